import { z } from 'zod'
import { abilities, ref, uid } from './common.js'
import { role } from './roles.js'

/** A role in one studio, or (studio null) in the whole network. Owners see those of their own studios. */
export const assignment = z.object({ role, studio: ref.nullable() })
export const person = z.object({
  uid,
  name: z.string(),
  email: z.string(),
  assignments: z.array(assignment),
  /** Has set a password. */
  active: z.boolean(),
  /** A link may be made for them: every role that they hold is the asker's to give, and they are in no other network. */
  linkable: z.boolean(),
  lastSeenAt: z.string().nullable(),
  /** The person who asks. */
  self: z.boolean(),
  abilities,
})
export type PersonView = z.infer<typeof person>
export const peopleOutput = z.object({ rows: z.array(person) })

const assignmentsInput = z
  .array(z.object({ role, studio: uid.nullable() }))
  .min(1, 'Choose at least one role.')
  .max(100)
/** POST /people */
export const personInput = z.object({
  name: z.string().trim().min(1, 'Enter a name.').max(120),
  email: z.email('Enter an e-mail address like kim@example.org.').max(254),
  assignments: assignmentsInput,
})
/** PATCH /people/:person: all the roles that the asker sees of the person, as they shall be */
export const personChangeInput = z.object({ assignments: assignmentsInput })
/**
 * Answer of POST /people and POST /people/:person/link. The link is shown once; older ones end. POST
 * /people gives none to somebody who has a password already, or who is not `linkable`.
 */
export const personLinkOutput = z.object({
  person,
  link: z.object({ url: z.string(), expiresAt: z.string() }).nullable(),
})
