import { z } from 'zod'
import { instant } from './common.js'

export const jobRun = z.object({
  job: z.string(),
  slot: z.string(),
  status: z.enum(['waiting', 'running', 'done', 'failed']),
  /** Per cent. */
  progress: z.number(),
  outcome: z.string().nullable(),
  error: z.string().nullable(),
  requestedBy: z.string().nullable(),
  createdAt: instant,
  startedAt: instant.nullable(),
  finishedAt: instant.nullable(),
})
export type JobRun = z.infer<typeof jobRun>

/** GET /jobs */
export const jobsOutput = z.object({
  jobs: z.array(
    z.object({
      job: z.string(),
      name: z.string(),
      description: z.string(),
      /** When it runs, in words and in the network's zone. */
      schedule: z.string(),
      nextAt: instant.nullable(),
      last: jobRun.nullable(),
    }),
  ),
  runs: z.array(jobRun),
})
export type Jobs = z.infer<typeof jobsOutput>

/** POST /jobs/:job/runs: 202 with the run; one that waits or runs already is returned as it is. */
export const runJobOutput = z.object({ run: jobRun })
