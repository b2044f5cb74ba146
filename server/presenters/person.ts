import type { PersonView } from '../contract/people.js'
import { assignmentsSeen, canAssign, canMakeLink } from '../policies/assignments.js'
import type { Scope } from '../policies/index.js'
import type { Member } from '../queries/peopleOfNetwork.js'

/** A member as this person sees them; `studios` by id, all of the network. */
export function presentPerson(
  member: Member,
  studios: ReadonlyMap<number, { uid: string; name: string }>,
  scope: Scope,
): PersonView {
  const { user, held } = member
  const seen = assignmentsSeen(scope, held)
  return {
    uid: user.uid,
    name: user.name,
    email: user.email,
    assignments: seen.map(({ role, studioId }) => {
      const studio = studioId === null ? undefined : studios.get(studioId)
      return { role, studio: studio ? { uid: studio.uid, name: studio.name } : null }
    }),
    active: user.passwordHash !== null,
    linkable: canMakeLink(scope, member),
    lastSeenAt: user.lastSeenAt?.toISOString() ?? null,
    self: user.id === scope.userId,
    abilities: { 'people.edit': seen.some((each) => canAssign(scope, each)) },
  }
}
