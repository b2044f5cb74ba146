import type { Ability } from '../contract/roles.js'
import { studiosWith } from '../policies/index.js'
import type { Scope } from '../policies/index.js'

/** Ids of the studios in which the person holds the ability; null where that is every studio, which needs no condition. */
export function readableStudios(scope: Scope, ability: Ability): number[] | null {
  const ids = studiosWith(scope, ability)
  return ids.length === scope.studioIds.length ? null : ids
}
