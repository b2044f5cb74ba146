import { z } from 'zod'
import { FIRING_KINDS } from '../shared/kinds.js'
import { LOSS_OUTCOMES, MEASURES } from '../shared/counts.js'
import { faultNode } from '../shared/faults/index.js'
import { ABILITIES } from './roles.js'

/** Public identity of a row: a UUID (version 7 where we make it). */
export const uid = z.uuid().toLowerCase()
/** A calendar day in the studio's zone, YYYY-MM-DD. */
export const day = z.iso.date()
/** An instant, ISO 8601 in UTC. */
export const instant = z.iso.datetime()
export const kind = z.enum(FIRING_KINDS)
export const lossOutcome = z.enum(LOSS_OUTCOMES)
export const measure = z.enum(MEASURES)
export const fault = z
  .string()
  .refine((id) => faultNode(id) !== undefined, { message: 'Not a fault of the tree.' })
export const appearance = z.enum(['name', 'letter', 'hidden'])
export const timeZone = z.string().refine(
  (zone) => {
    try {
      new Intl.DateTimeFormat('en', { timeZone: zone })
      return true
    } catch {
      return false
    }
  },
  { message: 'Not a time zone; write one like Europe/Lisbon.' },
)
export const currency = z.string().regex(/^[A-Z]{3}$/, 'Three capital letters, like EUR.')
export const count = z.int().min(0).max(100_000)

/** A named thing as it appears inside other things. */
export const ref = z.object({ uid, name: z.string() })
export type Ref = z.infer<typeof ref>

/** What this person may do with this thing: looked up by the client, decided by the server. */
export const abilities = z.partialRecord(z.enum(ABILITIES), z.boolean())
export type Abilities = z.infer<typeof abilities>

/** Page of a list; `pageSize` at most 200. */
export const pageInput = z.object({
  page: z.coerce.number().int().min(1).default(1),
  pageSize: z.coerce.number().int().min(1).max(200).default(25),
})
export const pageOf = <T extends z.ZodType>(row: T) =>
  z.object({
    rows: z.array(row),
    total: z.number(),
    page: z.number(),
    pageSize: z.number(),
  })

/** The counts of a lot or a firing; see shared/counts.ts for what is over what. */
export const counts = z.object({
  pieces: z.number(),
  turnedAway: z.number(),
  seconds: z.number(),
  refires: z.number(),
  wasters: z.number(),
  undecided: z.number(),
  notLookedAt: z.number(),
})

/**
 * A rate with what it rests on. `rate` and limits are shares (0..1), null when there is too little
 * to say: `none` no pieces, `one-firing` counts only, `few-firings` under five.
 */
export const rate = z.object({
  events: z.number(),
  pieces: z.number(),
  firings: z.number(),
  rate: z.number().nullable(),
  lower: z.number().nullable(),
  upper: z.number().nullable(),
  note: z.enum(['ok', 'few-firings', 'one-firing', 'none']),
})
export type Rate = z.infer<typeof rate>

/**
 * Coverage of what a rate is about: firings reported here against what the kilns' own counters say
 * (null where no number was recorded), the loss rate if the missing ones had all been clean, and
 * the share of pieces for which the factor in question is recorded (null when no factor is).
 */
export const coverage = z.object({
  reported: z.number(),
  expected: z.number().nullable(),
  rateIfMissingClean: z.number().nullable(),
  recordedShare: z.number().nullable(),
})
export type Coverage = z.infer<typeof coverage>

export const errorBody = z.object({
  error: z.object({
    /** What the caller can do: sign-in, forbidden, not-found, invalid, stale, different-body, in-use, too-many, cross-site, unexpected. */
    code: z.string(),
    message: z.string(),
    /** Messages by field path (`lots.2.pieces`): all problems of a form at once. */
    fields: z.record(z.string(), z.string()).optional(),
    details: z.record(z.string(), z.unknown()).optional(),
    requestId: z.string(),
  }),
})
export type ErrorBody = z.infer<typeof errorBody>

/** An empty answer. */
export const nothing = z.object({})
