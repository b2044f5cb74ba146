import type { JobFacts, JobId } from '../shared/jobs.js'
import { INSTALLATION } from '../shared/jobs.js'
import { lastOccurrence } from '../shared/schedule.js'

export interface NetworkZone {
  networkId: number
  timeZone: string
  /** When the network was made: what fell due before does not concern it. */
  since: Date
}

export interface DueSlot {
  job: JobId
  networkId: number
  slot: string
}

/** Key of `lastSlots`. */
export function slotKey(job: string, networkId: number): string {
  return `${job}/${networkId}`
}

/**
 * Runs that are due and have no row yet. After downtime only the latest missed one; a slot is a local
 * day, so that summer time, a clock that is set back and a changed zone make no second run.
 * @param lastSlots newest scheduled slot by `slotKey`; requested runs are not among them
 */
export function dueSlots(
  now: Date,
  schedules: readonly JobFacts[],
  zones: readonly NetworkZone[],
  lastSlots: ReadonlyMap<string, string>,
): DueSlot[] {
  const installation = {
    networkId: INSTALLATION.networkId,
    timeZone: INSTALLATION.zone,
    since: new Date(0),
  }
  return schedules.flatMap((schedule) =>
    (schedule.of === 'installation' ? [installation] : zones).flatMap(
      ({ networkId, timeZone, since }) => {
        const { slot, at } = lastOccurrence(schedule.when, timeZone, now)
        const last = lastSlots.get(slotKey(schedule.job, networkId))
        const isDue = at > since && (last === undefined || slot > last)
        return isDue ? [{ job: schedule.job, networkId, slot }] : []
      },
    ),
  )
}
