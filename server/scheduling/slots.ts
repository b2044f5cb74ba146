import { randomBytes } from 'node:crypto'
import { hostname } from 'node:os'
import { Op, literal } from 'sequelize'
import type { WhereOptions } from 'sequelize'
import type { Deps } from '../deps.js'
import { JobSlot, Network } from '../models/index.js'
import { claimableSlots, lastSlots } from '../queries/slots.js'
import { JOBS } from '../shared/jobs.js'
import { dueSlots, slotKey } from './dueSlots.js'
import type { HeldSlot } from './types.js'

/** A holder that does not renew its claim within this time is taken for dead. */
export const LEASE_MS = 120_000
export const MOST_TRIES = 3
/** Pauses before the second and the third try. */
const PAUSES_MS = [60_000, 300_000]
const ERROR_LENGTH = 2000
const OUTCOME_LENGTH = 300

/** A name for one scheduler of this process, as rows carry it (ascii, at most 60 characters). */
export function ownerName(): string {
  const host = hostname()
    .replace(/[^\w.-]/g, '')
    .slice(0, 30)
  return `${host}:${process.pid}:${randomBytes(6).toString('hex')}`
}

/** Writes a waiting row for every run that is due. The unique key lets each in once, whoever comes first. */
export async function insertDueSlots({ sequelize, clock }: Deps): Promise<void> {
  const [networks, last] = await Promise.all([
    Network.findAll({ attributes: ['id', 'timeZone', 'createdAt'], raw: true }),
    lastSlots(sequelize),
  ])
  const due = dueSlots(
    clock.now(),
    JOBS,
    networks.map(({ id, timeZone, createdAt }) => ({ networkId: id, timeZone, since: createdAt })),
    new Map(last.map(({ job, networkId, slot }) => [slotKey(job, networkId), slot])),
  )
  if (due.length === 0) return
  await JobSlot.bulkCreate(
    due.map((slot) => ({ ...slot, status: 'waiting' as const })),
    { ignoreDuplicates: true },
  )
}

/** Rows that may be claimed at that moment. */
function claimable(now: Date): WhereOptions<JobSlot> {
  return {
    [Op.or]: [
      { status: 'waiting', [Op.or]: [{ notBefore: null }, { notBefore: { [Op.lte]: now } }] },
      { status: 'running', leaseUntil: { [Op.lt]: now } },
    ],
  }
}

/** Takes this run if it may be claimed: one conditional update, the rows it changed are counted. */
export async function claimSlot(
  id: number,
  owner: string,
  { clock }: Deps,
): Promise<HeldSlot | null> {
  const now = clock.now()
  const [claimed] = await JobSlot.update(
    {
      status: 'running',
      owner,
      leaseUntil: new Date(now.getTime() + LEASE_MS),
      attempt: literal('attempt + 1'),
      progress: 0,
      notBefore: null,
      startedAt: now,
      finishedAt: null,
    },
    { where: { id, ...claimable(now) } },
  )
  if (claimed !== 1) return null
  const row = await JobSlot.findOne({ where: { id, owner, status: 'running' }, raw: true })
  if (!row) return null
  const { job, slot, networkId, attempt } = row
  return { id, job, slot, networkId, owner, attempt }
}

/** Takes the next run that may be claimed, or answers null. Runs that died too often are closed on the way. */
export async function claimNext(owner: string, deps: Deps): Promise<HeldSlot | null> {
  await closeDeadSlots(deps)
  for (const id of await claimableSlots(deps.sequelize, deps.clock.now())) {
    const held = await claimSlot(id, owner, deps)
    if (held) return held
  }
  return null
}

/** A run whose holders died at every try is not given to yet another one. */
async function closeDeadSlots({ clock }: Deps): Promise<void> {
  const now = clock.now()
  await JobSlot.update(
    {
      status: 'failed',
      owner: null,
      leaseUntil: null,
      finishedAt: now,
      error: `The server stopped during each of ${MOST_TRIES} tries.`,
    },
    {
      where: { status: 'running', leaseUntil: { [Op.lt]: now }, attempt: { [Op.gte]: MOST_TRIES } },
    },
  )
}

async function changeHeld(
  held: HeldSlot,
  values: Parameters<typeof JobSlot.update>[0],
): Promise<boolean> {
  const [changed] = await JobSlot.update(values, {
    where: { id: held.id, owner: held.owner, status: 'running' },
  })
  return changed === 1
}

/** Holds the run for another lease, with its progress when given. False: it is no longer ours. */
export async function renewSlot(
  held: HeldSlot,
  { clock }: Deps,
  percent?: number,
): Promise<boolean> {
  return changeHeld(held, {
    leaseUntil: new Date(clock.now().getTime() + LEASE_MS),
    ...(percent !== undefined && { progress: Math.max(0, Math.min(100, Math.round(percent))) }),
  })
}

/** Ends the run well. False: it was no longer ours. */
export async function finishSlot(
  held: HeldSlot,
  outcome: string,
  { clock }: Deps,
): Promise<boolean> {
  return changeHeld(held, {
    status: 'done',
    owner: null,
    leaseUntil: null,
    progress: 100,
    outcome: outcome.slice(0, OUTCOME_LENGTH),
    error: null,
    finishedAt: clock.now(),
  })
}

/** Notes what went wrong: the run waits for another try after a pause, or has failed for good. */
export async function failSlot(held: HeldSlot, error: unknown, { clock }: Deps): Promise<boolean> {
  const now = clock.now()
  const message = (error instanceof Error ? error.message : String(error)).slice(0, ERROR_LENGTH)
  const pause = PAUSES_MS[held.attempt - 1]
  if (held.attempt >= MOST_TRIES || pause === undefined) {
    return changeHeld(held, {
      status: 'failed',
      owner: null,
      leaseUntil: null,
      error: message,
      finishedAt: now,
    })
  }
  const notBefore = new Date(now.getTime() + pause)
  return changeHeld(held, {
    status: 'waiting',
    owner: null,
    leaseUntil: null,
    error: message,
    notBefore,
  })
}

/** Gives the run back, as if it had not been tried: this server stops. */
export async function releaseSlot(held: HeldSlot): Promise<boolean> {
  return changeHeld(held, {
    status: 'waiting',
    owner: null,
    leaseUntil: null,
    attempt: held.attempt - 1,
    progress: 0,
    startedAt: null,
  })
}
