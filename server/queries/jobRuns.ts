import { Op, QueryTypes } from 'sequelize'
import { JobSlot, User } from '../models/index.js'
import type { Scope } from '../policies/index.js'

/** A run of a job with the name of who asked for it. */
export interface JobRunRow {
  id: number
  job: string
  slot: string
  status: 'waiting' | 'running' | 'done' | 'failed'
  progress: number
  outcome: string | null
  error: string | null
  requestedBy: string | null
  createdAt: Date
  startedAt: Date | null
  finishedAt: Date | null
}

async function withNames(slots: readonly JobSlot[]): Promise<JobRunRow[]> {
  const ids = [...new Set(slots.flatMap(({ requestedBy }) => requestedBy ?? []))]
  const people =
    ids.length === 0
      ? []
      : await User.findAll({ where: { id: ids }, attributes: ['id', 'name'], raw: true })
  const names = new Map(people.map(({ id, name }) => [id, name]))
  return slots.map((slot) => ({
    id: slot.id,
    job: slot.job,
    slot: slot.slot,
    status: slot.status,
    progress: slot.progress,
    outcome: slot.outcome ?? null,
    error: slot.error ?? null,
    requestedBy: names.get(slot.requestedBy ?? 0) ?? null,
    createdAt: slot.createdAt,
    startedAt: slot.startedAt ?? null,
    finishedAt: slot.finishedAt ?? null,
  }))
}

/** The newest runs of the network's jobs, newest first. */
export async function recentRuns({ networkId }: Scope, limit: number): Promise<JobRunRow[]> {
  return withNames(
    await JobSlot.findAll({ where: { networkId }, order: [['id', 'DESC']], limit, raw: true }),
  )
}

/** The newest run of each of these jobs in the network; a job that never ran is missing. */
export async function lastRuns(
  { networkId }: Scope,
  jobs: readonly string[],
): Promise<Map<string, JobRunRow>> {
  const newest = await JobSlot.sequelize!.query<{ id: number }>(
    'SELECT MAX(id) AS id FROM job_slots WHERE network_id = :networkId AND job IN (:jobs) GROUP BY job',
    { type: QueryTypes.SELECT, replacements: { networkId, jobs: [...jobs] } },
  )
  const slots = await JobSlot.findAll({
    where: { networkId, id: { [Op.in]: newest.map(({ id }) => id) } },
    raw: true,
  })
  return new Map((await withNames(slots)).map((run) => [run.job, run]))
}

/** One run by its id; null when it is not of this network. */
export async function findRun({ networkId }: Scope, id: number): Promise<JobRunRow | null> {
  const slot = await JobSlot.findOne({ where: { networkId, id }, raw: true })
  if (!slot) return null
  const [run] = await withNames([slot])
  return run ?? null
}
