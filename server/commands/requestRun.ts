import { Op } from 'sequelize'
import type { Sequelize } from 'sequelize'
import { isDuplicate } from '../database/violations.js'
import type { Deps } from '../deps.js'
import { notFound } from '../errors.js'
import { JobSlot } from '../models/index.js'
import type { Scope } from '../policies/index.js'
import { REQUESTED } from '../queries/slots.js'
import { jobFacts } from '../shared/jobs.js'

const listeners = new WeakMap<Sequelize, Set<() => void>>()

/** Calls back when a run is requested in this process, so that it starts at once. Answers how to stop listening. */
export function whenRunRequested(
  { sequelize }: Pick<Deps, 'sequelize'>,
  listener: () => void,
): () => void {
  const all = listeners.get(sequelize) ?? new Set()
  listeners.set(sequelize, all.add(listener))
  return () => all.delete(listener)
}

/**
 * Asks for a run of a job of this network, now. One that waits or runs already is answered instead:
 * pressing twice makes one run.
 * @returns the id of its slot
 * @throws AppError `not-found` for a job that networks do not have
 */
export async function requestRun(scope: Scope, job: string, deps: Deps): Promise<{ id: number }> {
  if (jobFacts(job)?.of !== 'network') throw notFound()
  const { networkId } = scope
  const id = (await pendingRun(job, networkId)) ?? (await insertRun(scope, job, deps))
  // Somebody is waiting for it now: a pause before another try is over.
  await JobSlot.update({ notBefore: null }, { where: { id, status: 'waiting' } })
  for (const listener of listeners.get(deps.sequelize) ?? []) listener()
  return { id }
}

/** The oldest run of the job that waits or runs. */
async function pendingRun(job: string, networkId: number): Promise<number | undefined> {
  const where = { job, networkId, status: { [Op.in]: ['waiting', 'running'] } }
  const slot = await JobSlot.findOne({ where, attributes: ['id'], order: ['id'], raw: true })
  return slot?.id
}

/**
 * Writes the row down first and looks second: of two that do so at once, at least one sees both, and
 * the later row gives way. A lock would have to span processes.
 */
async function insertRun(
  { networkId, userId }: Scope,
  job: string,
  { clock }: Deps,
): Promise<number> {
  const mine = await insertSlot({ job, networkId, requestedBy: userId }, clock.now())
  const first = await pendingRun(job, networkId)
  if (first === undefined || first >= mine) return mine
  const gaveWay = await JobSlot.destroy({ where: { id: mine, status: 'waiting', attempt: 0 } })
  return gaveWay === 1 ? first : mine
}

/** The slot is `now:` and the moment, a millisecond later where that is taken. */
async function insertSlot(
  values: { job: string; networkId: number; requestedBy: number | null },
  now: Date,
): Promise<number> {
  for (let at = now.getTime(); ; at += 1) {
    try {
      const slot = `${REQUESTED}${new Date(at).toISOString()}`
      return (await JobSlot.create({ ...values, slot, status: 'waiting' })).id
    } catch (error) {
      if (!isDuplicate(error)) throw error
    }
  }
}
