import type { PersonView } from '../../../server/contract/people.js'
import type { Role } from '../../../server/contract/roles.js'

/** A role in a studio; '' stands for the whole network. */
export interface AssignmentValues {
  role: Role
  studio: string | null
}
export interface PersonValues {
  name: string
  email: string
  assignments: AssignmentValues[]
}

export function personValues(person: PersonView | null, first: AssignmentValues): PersonValues {
  if (!person) return { name: '', email: '', assignments: [{ ...first }] }
  return {
    name: person.name,
    email: person.email,
    assignments: person.assignments.map(({ role, studio }) => ({
      role,
      studio: studio?.uid ?? null,
    })),
  }
}
