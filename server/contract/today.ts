import { z } from 'zod'
import { rate, ref } from './common.js'
import { firingRow } from './firings.js'
import { finding, study } from './findings.js'

/** GET /today: what waits, and what happened; parts that the person's roles do not have are null. */
export const todayOutput = z.object({
  /** Packed and not reported, oldest first, at most 20; with how many there are. */
  toReport: z.object({ total: z.number(), rows: z.array(firingRow) }).nullable(),
  /** Firings with undecided pieces, oldest first, at most 20. */
  undecided: z.object({ total: z.number(), rows: z.array(firingRow) }).nullable(),
  /** Last firings reported, newest first, at most 8. */
  recent: z.array(firingRow),
  /** Kilns whose counter is ahead of the firings reported here. */
  gaps: z.array(z.object({ kiln: ref, studio: ref, kilnNumber: z.number(), missing: z.number() })),
  /** By studio that the person may read and kind of firing: the last 30 days beside the 12 weeks before. */
  rates: z.array(z.object({ studio: ref, kind: z.string(), last30: rate, before: rate })),
  /** Leading findings (q ≤ 0.01 first) of the scopes the person may read, at most 5. */
  findings: z.object({ study: study.nullable(), rows: z.array(finding) }).nullable(),
})
export type Today = z.infer<typeof todayOutput>
