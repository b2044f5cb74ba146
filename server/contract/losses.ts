import { z } from 'zod'
import { counts, coverage, day, rate, uid } from './common.js'
import { FACTORS } from '../shared/factors.js'

/**
 * GET /losses and below. Filters as in the list of firings; `kind` is one kind, since kinds are
 * never pooled into one rate. Reported firings only. `fault` narrows every rate to losses that
 * mention that node or one below it, over the pieces at risk of it.
 *
 * Rates are first-pass: pieces that had been fired before are in none of them but `refired`, and are
 * the only ones that a fault of refires is over. Counts are those of the same pieces.
 */
export const lossFilters = z.object({
  studio: z.string().optional(),
  kiln: z.string().optional(),
  kind: z.enum(['bisque', 'glaze', 'single', 'lustre', 'raku']).default('glaze'),
  fault: z.string().optional(),
  /** First and last month, YYYY-MM; the last twelve months when left out. */
  from: z
    .string()
    .regex(/^\d{4}-\d{2}$/)
    .optional(),
  to: z
    .string()
    .regex(/^\d{4}-\d{2}$/)
    .optional(),
})
export type LossFilters = z.infer<typeof lossFilters>

export const rates = z.object({ loss: rate, waste: rate, blemish: rate })

/** GET /losses: the answer of the page. */
export const lossSummary = z.object({
  from: day,
  to: day,
  rates,
  /** Pieces that had been fired before, over all faults: nothing is counted twice. */
  refired: rates,
  counts,
  /** Firings of all kinds, since a kiln counts them all; the missing ones are taken to be of this kind as often as the others are. */
  coverage,
})
export type LossSummary = z.infer<typeof lossSummary>

/** `month`, `kiln`, `studio`, `fault`, or the id of a factor of the lot or the firing. */
export const lossDimension = z.enum([
  'month',
  'kiln',
  'studio',
  'fault',
  ...FACTORS.map((each) => each.id).filter((id) => id !== 'kiln'),
] as [string, ...string[]])

/** A row of a breakdown; `key` is a month (YYYY-MM), a uid, or a fault's id: what the drill-down filters by. */
export const lossRow = z.object({
  key: z.string(),
  label: z.string(),
  uid: uid.nullable(),
  rates,
})
export type LossRow = z.infer<typeof lossRow>

/** GET /losses/by/:dimension, and .csv of the same. Rows by month are in time order with empty months kept; others by lost pieces. */
export const lossBreakdown = z.object({
  dimension: z.string(),
  rows: z.array(lossRow),
  coverage,
})
export type LossBreakdown = z.infer<typeof lossBreakdown>
