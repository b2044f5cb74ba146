import { z } from 'zod'
import {
  abilities,
  count,
  counts,
  coverage,
  day,
  fault,
  instant,
  kind,
  lossOutcome,
  pageInput,
  pageOf,
  ref,
  uid,
} from './common.js'
import { FIRING_FACTORS, LOT_FACTORS } from '../shared/factors.js'
import { CONES } from '../shared/kinds.js'
import { FAILED_OUTCOMES } from '../shared/counts.js'

const lotFactor = z.enum(LOT_FACTORS.map((each) => each.id) as [string, ...string[]])
const firingFactor = z.enum(
  FIRING_FACTORS.filter(
    (each) => !['kiln', 'programme', 'opening_temperature'].includes(each.id),
  ).map((each) => each.id) as [string, ...string[]],
)

/** Levels of a lot by factor; a factor that is missing or null is not recorded. Several only for factors that allow it. */
export const lotLevels = z.partialRecord(lotFactor, z.union([uid, z.array(uid).max(8)]).nullable())

export const lotInput = z.object({
  uid,
  pieces: z.int('Whole pieces only.').min(1, 'At least one piece.').max(10_000),
  levels: lotLevels,
  glazeOverlap: z.boolean().nullable().default(null),
  refireCount: z.int().min(0).max(9).default(0),
  maker: z.string().trim().max(80).nullable().default(null),
  note: z.string().trim().max(500).nullable().default(null),
})

/** Pieces found cracked before firing; `lot` is the uid of a lot or of the rest. */
export const turnedAwayInput = z.object({
  uid,
  lot: uid,
  fault,
  pieces: z.int().min(1).max(10_000),
})

/** What went in. The rest is pieces − Σ lots and has a uid of its own. */
export const packBody = z.object({
  kiln: uid,
  kind,
  programme: uid.nullable().default(null),
  cone: z.enum(CONES).nullable().default(null),
  localDate: day,
  kilnNumber: z.int().min(1).max(1_000_000).nullable().default(null),
  /** Pieces offered in all, those turned away among them. */
  pieces: z.int('Whole pieces only.').min(1, 'At least one piece.').max(10_000),
  about: z.boolean().default(false),
  levels: z.partialRecord(firingFactor, uid.nullable()).default({}),
  note: z.string().trim().max(1000).nullable().default(null),
  rest: uid,
  lots: z.array(lotInput).max(200),
  turnedAway: z.array(turnedAwayInput).max(200).default([]),
})
export type PackBody = z.infer<typeof packBody>

/** Pieces of one lot that failed alike. */
export const lossInput = z.object({
  uid,
  fault,
  also: z.array(fault).max(5).default([]),
  outcome: z.enum(FAILED_OUTCOMES),
  pieces: z.int().min(1).max(10_000),
  /** "A neighbour did it": kept out of comparisons of lots and out of baselines, counted in totals. */
  neighbour: z.boolean().default(false),
  /** Features of the fault as seen, by id of the guide. */
  features: z
    .record(z.string().max(40), z.union([z.string().max(40), z.array(z.string().max(40)).max(5)]))
    .default({}),
})

export const WHOLE_LOAD_CAUSES = ['power', 'probe', 'wrong-programme', 'other'] as const

/** What came out, lot by lot; every lot and the rest must be there: a lot that is missing was not looked at, which must be said. */
export const reportBody = z.object({
  openedAt: instant.nullable().default(null),
  openingTemperatureC: z.int().min(-20).max(1400).nullable().default(null),
  /** The whole load failed: left out of baselines and comparisons. */
  wholeLoadFailed: z.enum(WHOLE_LOAD_CAUSES).nullable().default(null),
  lots: z
    .array(
      z.object({
        lot: uid,
        notLookedAt: count.default(0),
        losses: z.array(lossInput).max(300),
      }),
    )
    .max(201),
  note: z.string().trim().max(1000).nullable().default(null),
})
export type ReportBody = z.infer<typeof reportBody>

const revisionBase = {
  /** Number of the revision that this one was written on; 0 for a new firing. */
  base: z.int().min(0),
  deviceTime: instant.nullable().default(null),
}
/**
 * PUT /firings/:firing/revisions/:revision, both uids made by the client. Same body, same answer;
 * another body under the same uid is 409 `different-body`; a stale base is 409 `stale` with
 * `details.revision`. `pack` makes the firing or corrects its load before it is reported; `report`
 * needs a packed firing (its `pack`, when given, corrects the load as well) or, with base 0 and a
 * `pack`, makes one that was never packed; `amend` needs a reason.
 */
export const revisionInput = z.discriminatedUnion('kind', [
  z.object({ kind: z.literal('pack'), ...revisionBase, pack: packBody }),
  z.object({
    kind: z.literal('report'),
    ...revisionBase,
    pack: packBody.optional(),
    report: reportBody,
  }),
  z.object({
    kind: z.literal('amend'),
    ...revisionBase,
    pack: packBody.optional(),
    report: reportBody,
    reason: z.string().trim().min(1, 'Say why.').max(300),
  }),
])
export type RevisionInput = z.infer<typeof revisionInput>

export const loss = z.object({
  uid,
  lot: uid,
  fault: z.string(),
  also: z.array(z.string()),
  outcome: lossOutcome,
  pieces: z.number(),
  neighbour: z.boolean(),
  features: z.record(z.string(), z.union([z.string(), z.array(z.string())])),
  lateOn: z.string().nullable(),
})
export type LossView = z.infer<typeof loss>

export const lot = z.object({
  uid,
  isRest: z.boolean(),
  ...counts.shape,
  /** Levels by factor, several where a lot holds several. */
  levels: z.record(z.string(), z.array(ref)),
  glazeOverlap: z.boolean().nullable(),
  refireCount: z.number(),
  /** Null for readers outside the lot's studio. */
  maker: z.string().nullable(),
  note: z.string().nullable(),
  losses: z.array(loss),
})
export type LotView = z.infer<typeof lot>

/** A row of the list of firings. */
export const firingRow = z.object({
  uid,
  studio: ref,
  kiln: ref,
  kind,
  status: z.enum(['packed', 'reported', 'void']),
  programme: ref.nullable(),
  cone: z.string().nullable(),
  localDate: day,
  kilnNumber: z.number().nullable(),
  about: z.boolean(),
  ...counts.shape,
  wholeLoadFailed: z.string().nullable(),
  revision: z.number(),
  packedAt: z.string().nullable(),
  reportedAt: z.string().nullable(),
  abilities,
})
export type FiringRow = z.infer<typeof firingRow>

export const FIRING_SORTS = [
  '-date',
  'date',
  '-lost',
  'lost',
  '-pieces',
  'pieces',
  'kiln',
  '-kiln',
] as const
/**
 * GET /firings and /firings.csv. Lists take several uids with commas. `fault` finds firings with
 * that node or any below it; `level` is a level's uid of any factor, of a lot or of the firing: levels
 * of one factor are alternatives, levels of several must all be there. Without `status` void firings
 * are left out.
 */
export const firingFilters = z.object({
  studio: z.string().optional(),
  kiln: z.string().optional(),
  kind: z.string().optional(),
  status: z.enum(['packed', 'reported', 'void']).optional(),
  from: day.optional(),
  to: day.optional(),
  fault: z.string().optional(),
  level: z.string().optional(),
  lost: z.enum(['some', 'none']).optional(),
})
export const firingsInput = firingFilters.extend({
  ...pageInput.shape,
  sort: z.enum(FIRING_SORTS).default('-date'),
})
export const firingsOutput = pageOf(firingRow)

export const revision = z.object({
  uid,
  number: z.number(),
  kind: z.enum(['pack', 'report', 'amend', 'late', 'void']),
  reason: z.string().nullable(),
  author: z.string().nullable(),
  serverTime: z.string(),
  deviceTime: z.string().nullable(),
  /** The counts after this revision. */
  counts,
})
export type RevisionView = z.infer<typeof revision>

/** GET /firings/:firing, and the answer of PUT revisions. */
export const firingOutput = firingRow.extend({
  timeZone: z.string(),
  rest: uid,
  lots: z.array(lot),
  levels: z.record(z.string(), ref),
  openedAt: z.string().nullable(),
  openingTemperatureC: z.number().nullable(),
  note: z.string().nullable(),
  packedBy: z.string().nullable(),
  reportedBy: z.string().nullable(),
  voidReason: z.string().nullable(),
  /** Share of the load (pieces) for which each lot factor is recorded; factors that do not apply to the kind are missing. */
  recorded: z.array(z.object({ factor: z.string(), share: z.number() })),
  revisions: z.array(revision),
})
export type FiringDetail = z.infer<typeof firingOutput>

/** GET /firings/:firing/revisions/:number: a revision whole, as it was sent; makers and notes are null for readers outside the studio. */
export const revisionOutput = revision.extend({ payload: z.unknown() })

/** POST /firings/:firing/void */
export const voidInput = z.object({
  base: z.int().min(1),
  reason: z.string().trim().min(1, 'Say why.').max(300),
})

/** GET /firings/last?kiln=&kind=: the load to copy for "as last time", or null. */
export const lastFiringInput = z.object({ kiln: uid, kind })
export const lastFiringOutput = z.object({ firing: firingOutput.nullable() })

export { coverage }
