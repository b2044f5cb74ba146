import type { JobRun, Jobs } from '../contract/jobs.js'
import type { JobRunRow } from '../queries/jobRuns.js'
import type { JobFacts } from '../shared/jobs.js'
import { nextOccurrence, scheduleInWords } from '../shared/schedule.js'

export function presentRun(run: JobRunRow): JobRun {
  return {
    job: run.job,
    slot: run.slot,
    status: run.status,
    progress: run.progress,
    outcome: run.outcome,
    error: run.error,
    requestedBy: run.requestedBy,
    createdAt: run.createdAt.toISOString(),
    startedAt: run.startedAt?.toISOString() ?? null,
    finishedAt: run.finishedAt?.toISOString() ?? null,
  }
}

/** A job with its schedule in the network's zone, its next time after `now` and its newest run. */
export function presentJob(
  facts: JobFacts,
  last: JobRunRow | undefined,
  { timeZone, now }: { timeZone: string; now: Date },
): Jobs['jobs'][number] {
  return {
    job: facts.job,
    name: facts.name,
    description: facts.description,
    schedule: scheduleInWords(facts.when, timeZone),
    nextAt: nextOccurrence(facts.when, timeZone, now).at.toISOString(),
    last: last ? presentRun(last) : null,
  }
}
