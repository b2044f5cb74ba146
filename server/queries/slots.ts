import { QueryTypes } from 'sequelize'
import type { Sequelize } from 'sequelize'

/** The scheduler's own questions, over all networks: it belongs to none. */

/** Slots of requested runs begin with this; scheduled ones are local days. */
export const REQUESTED = 'now:'

/** Newest scheduled slot of each job and network. */
export async function lastSlots(
  sequelize: Sequelize,
): Promise<{ job: string; networkId: number; slot: string }[]> {
  return sequelize.query(
    `SELECT job, network_id AS networkId, MAX(slot) AS slot FROM job_slots
     WHERE slot NOT LIKE '${REQUESTED}%' GROUP BY job, network_id`,
    { type: QueryTypes.SELECT },
  )
}

/**
 * Ids of runs that may be claimed, oldest first: those that wait and whose pause is over, and those
 * whose holder let its lease run out. A job runs once at a time in a network.
 */
export async function claimableSlots(sequelize: Sequelize, now: Date): Promise<number[]> {
  const rows = await sequelize.query<{ id: number }>(
    `SELECT s.id FROM job_slots s
     WHERE ((s.status = 'waiting' AND (s.not_before IS NULL OR s.not_before <= :now))
         OR (s.status = 'running' AND s.lease_until < :now))
       AND NOT EXISTS (
         SELECT 1 FROM job_slots r
         WHERE r.job = s.job AND r.network_id = s.network_id AND r.id <> s.id
           AND r.status = 'running' AND r.lease_until >= :now)
     ORDER BY s.id LIMIT 20`,
    { type: QueryTypes.SELECT, replacements: { now } },
  )
  return rows.map((row) => row.id)
}

/** Removes records of ended runs from before; each job's newest scheduled one stays, it says what was run last. */
export async function forgetSlots(sequelize: Sequelize, before: Date): Promise<number> {
  return sequelize.query(
    `DELETE s FROM job_slots s
     LEFT JOIN (
       SELECT job, network_id, MAX(slot) AS slot FROM job_slots
       WHERE slot NOT LIKE '${REQUESTED}%' GROUP BY job, network_id
     ) newest ON newest.job = s.job AND newest.network_id = s.network_id AND newest.slot = s.slot
     WHERE newest.slot IS NULL AND s.status IN ('done', 'failed') AND s.finished_at < :before`,
    { type: QueryTypes.BULKDELETE, replacements: { before } },
  )
}
