import { z } from 'zod'
import { day, pageInput, pageOf, rate, ref, uid } from './common.js'

/** A row of a finding's table: one level of its factor. `events` and `units` may be weighted. */
export const findingLevelRow = z.object({
  level: z.object({ uid: uid.nullable(), name: z.string() }),
  exposed: z.boolean(),
  rate,
})
export type FindingLevelRow = z.infer<typeof findingLevelRow>

/** Numbers of a comparison; prose is made of them by shared/sentences. */
export const finding = z.object({
  uid,
  /** null: the whole network */
  studio: ref.nullable(),
  fault: z.string(),
  factor: z.string(),
  level: ref,
  /** The clay body of a glaze × clay body pair. */
  pair: z.object({ factor: z.string(), level: ref }).nullable(),
  comparison: z.enum(['within-firing', 'between-firings']),
  ratio: z.number().nullable(),
  lower: z.number().nullable(),
  upper: z.number().nullable(),
  pValue: z.number(),
  qValue: z.number(),
  exposed: z.object({ events: z.number(), units: z.number() }),
  unexposed: z.object({ events: z.number(), units: z.number() }),
  /** Firings (or groups of firings) that held both, and those of them that could tell. */
  mixedStrata: z.number(),
  informativeStrata: z.number(),
  /** Share of pieces at risk for which the factor is recorded. */
  recordedShare: z.number(),
  verdict: z.string().nullable(),
  firstSeenOn: day,
})
export type FindingView = z.infer<typeof finding>

export const study = z.object({
  uid,
  studio: ref.nullable(),
  windowFrom: day,
  windowTo: day,
  firings: z.number(),
  lots: z.number(),
  pieces: z.number(),
  comparisons: z.number(),
  findings: z.number(),
  finishedAt: z.string(),
})
export type StudyView = z.infer<typeof study>

/** GET /findings: of the newest study of a scope. `scope` is `network` or a studio's uid; direction by ratio. */
export const findingsInput = pageInput.extend({
  scope: z.string().default('network'),
  fault: z.string().optional(),
  factor: z.string().optional(),
  q: z.coerce.number().min(0).max(0.1).default(0.1),
  direction: z.enum(['raised', 'lowered']).optional(),
})
export const findingsOutput = pageOf(finding).extend({
  study: study.nullable(),
  /** Scopes that this person may read. */
  scopes: z.array(z.object({ key: z.string(), name: z.string() })),
})
export type Findings = z.infer<typeof findingsOutput>

/** GET /findings/:finding */
export const findingOutput = finding.extend({
  study,
  /** By level of the factor, the finding's own level first. */
  levels: z.array(findingLevelRow),
  /** Filters of the list of firings that lie behind it. */
  firingFilters: z.record(z.string(), z.string()),
  /** What to check on the shelf, from the facts of the fault, each with its source. */
  checks: z.array(z.object({ text: z.string(), source: z.string() })),
  cautions: z.array(z.object({ text: z.string(), source: z.string() })),
})
export type FindingDetail = z.infer<typeof findingOutput>
