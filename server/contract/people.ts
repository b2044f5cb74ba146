import { z } from 'zod'
import { abilities, ref, uid } from './common.js'
import { role } from './roles.js'

/** A role in one studio, or (studio null) in the whole network. */
export const assignment = z.object({ role, studio: ref.nullable() })
export const person = z.object({
  uid,
  name: z.string(),
  email: z.string(),
  assignments: z.array(assignment),
  /** Has set a password. */
  active: z.boolean(),
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
/** PATCH /people/:person */
export const personChangeInput = z.object({ assignments: assignmentsInput })
/** Answer of POST /people and POST /people/:person/link: shown once; null when the person already has a password. */
export const personLinkOutput = z.object({
  person,
  link: z.object({ url: z.string(), expiresAt: z.string() }).nullable(),
})
