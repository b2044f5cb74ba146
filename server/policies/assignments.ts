import type { Role } from '../contract/roles.js'
import { can, isNetworkAdmin } from './index.js'
import type { HeldRole, Scope } from './scope.js'

/** Roles that an owner gives in their own studios. */
const OF_OWNERS: readonly Role[] = ['technician', 'owner']

/**
 * May this person give or take that role there? Admins any; owners technicians and owners of their
 * own studios. Roles in the whole network and the education lead's are the admins' to give.
 */
export function canAssign(scope: Scope, { role, studioId }: HeldRole): boolean {
  if (isNetworkAdmin(scope)) return true
  if (studioId === null || !OF_OWNERS.includes(role)) return false
  return can(scope, 'people.edit', { studioId })
}

/** Of the roles that somebody holds, those that this person may know of: all for admins, those of their studios for owners. */
export function assignmentsSeen(scope: Scope, held: readonly HeldRole[]): HeldRole[] {
  if (isNetworkAdmin(scope)) return [...held]
  return held.filter(({ studioId }) => studioId !== null && can(scope, 'people.read', { studioId }))
}

/**
 * May this person be given a link that sets somebody's password? Whoever holds it can be that somebody,
 * so only who could give every role that they hold, and never where they are in another network too.
 */
export function canMakeLink(
  scope: Scope,
  somebody: { held: readonly HeldRole[]; elsewhere: boolean },
): boolean {
  return !somebody.elsewhere && somebody.held.every((each) => canAssign(scope, each))
}
