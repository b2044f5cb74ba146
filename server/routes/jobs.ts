import { z } from 'zod'
import { requestRun } from '../commands/requestRun.js'
import { jobsOutput, runJobOutput } from '../contract/jobs.js'
import { PATHS } from '../contract/paths.js'
import { notFound } from '../errors.js'
import { presentJob, presentRun } from '../presenters/job.js'
import { findRun, lastRuns, recentRuns } from '../queries/jobRuns.js'
import { JOBS } from '../shared/jobs.js'
import { defineRoute } from './defineRoute.js'

const RECENT = 50

/** Jobs of the network: what they are, when they run, how they ended; and a run at once. */
export const jobRoutes = [
  defineRoute({
    method: 'get',
    path: PATHS.jobs,
    ability: 'jobs.read',
    output: jobsOutput,
    handle: async ({ scope, deps }) => {
      const facts = JOBS.filter((job) => job.of === 'network')
      const [last, recent] = await Promise.all([
        lastRuns(
          scope,
          facts.map(({ job }) => job),
        ),
        recentRuns(scope, RECENT),
      ])
      const { timeZone } = scope.network
      const now = deps.clock.now()
      return {
        jobs: facts.map((job) => presentJob(job, last.get(job.job), { timeZone, now })),
        runs: recent.map(presentRun),
      }
    },
  }),
  defineRoute({
    method: 'post',
    path: PATHS.jobRuns,
    ability: 'jobs.run',
    params: z.object({ network: z.string(), job: z.string() }),
    output: runJobOutput,
    status: 202,
    handle: async ({ scope, deps, params }) => {
      const { id } = await requestRun(scope, params.job, deps)
      const run = await findRun(scope, id)
      if (!run) throw notFound()
      return { run: presentRun(run) }
    },
  }),
]
