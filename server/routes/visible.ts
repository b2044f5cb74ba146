import type { Ability } from '../contract/roles.js'
import { notFound } from '../errors.js'
import { can, studiosWith } from '../policies/index.js'
import type { Scope } from '../policies/index.js'
import { findKiln } from '../queries/kilnsOfStudios.js'
import { findLevel } from '../queries/levelsOfStudios.js'
import { findStudio } from '../queries/studiosOfNetwork.js'

/**
 * What a person may see of a network's lists: the common ones, and those of the studios whose firings
 * they may read. What they may not see is answered like what is not there.
 */
const SEES: Ability = 'firings.read'

/** Ids of the studios whose lists the person sees. */
export function seenStudioIds(scope: Scope): number[] {
  return studiosWith(scope, SEES)
}

function seen<Row extends object>(
  scope: Scope,
  row: Row | null,
  studioId: (row: Row) => number | null,
): Row {
  if (!row) throw notFound()
  const id = studioId(row)
  if (id !== null && !can(scope, SEES, { studioId: id })) throw notFound()
  return row
}

/** The studio of this uid. @throws AppError `not-found` */
export async function seenStudio(scope: Scope, uid: string) {
  return seen(scope, await findStudio(scope, uid), (studio) => studio.id)
}

/** The kiln of this uid. @throws AppError `not-found` */
export async function seenKiln(scope: Scope, uid: string) {
  return seen(scope, await findKiln(scope, uid), (kiln) => kiln.studioId)
}

/** The level of this uid. @throws AppError `not-found` */
export async function seenLevel(scope: Scope, uid: string) {
  return seen(scope, await findLevel(scope, uid), (level) => level.studioId)
}
