import { QueryTypes } from 'sequelize'
import type { Sequelize } from 'sequelize'
import type { FiringKind } from '../shared/kinds.js'
import type { MeasureSums } from '../shared/lossRollupRates.js'
import type { FiringWhere } from './firingWhere.js'

/** Packed and not reported, in the studios given. */
export function waitingFirings(networkId: number, studioIds: readonly number[]): FiringWhere {
  return {
    sql: "f.network_id = :networkId AND f.studio_id IN (:studioIds) AND f.status = 'packed'",
    replacements: { networkId, studioIds },
  }
}

/** Reported since a day, with pieces that are still undecided. */
export function undecidedFirings(
  networkId: number,
  studioIds: readonly number[],
  since: string,
): FiringWhere {
  return {
    sql: `f.network_id = :networkId AND f.studio_id IN (:studioIds) AND f.status = 'reported'
      AND f.local_date >= :since AND f.undecided > 0`,
    replacements: { networkId, studioIds, since },
  }
}

/** Reported since a day. */
export function reportedFirings(
  networkId: number,
  studioIds: readonly number[],
  since: string,
): FiringWhere {
  return {
    sql: "f.network_id = :networkId AND f.studio_id IN (:studioIds) AND f.status = 'reported' AND f.local_date >= :since",
    replacements: { networkId, studioIds, since },
  }
}

export interface RecentLosses {
  studioId: number
  studioUid: string
  studioName: string
  kind: FiringKind
  /** In the later of the two spans. */
  recent: boolean
  sums: MeasureSums
}

/**
 * Sums of first-pass losses by studio and kind over two spans of days that follow each other: from
 * `from` to the day before `since`, and from `since` to `to`. Read from the lots, since roll-ups know
 * months only; a third of a year has some hundreds of firings.
 */
export async function recentLosses(
  sequelize: Sequelize,
  networkId: number,
  studioIds: readonly number[],
  days: { from: string; since: string; to: string },
): Promise<RecentLosses[]> {
  if (studioIds.length === 0) return []
  const rows = await sequelize.query<Record<string, string | number>>(
    `SELECT s.id AS studioId, s.uid AS studioUid, s.name AS studioName, x.kind, x.recent, COUNT(*) AS G,
      SUM(x.m) AS sumUnits, SUM(x.y) AS sumEvents, SUM(x.m * x.m) AS sumUnits2, SUM(x.m * x.y) AS sumUnitsEvents,
      SUM(x.y * x.y) AS sumEvents2
    FROM (
      SELECT f.studio_id, f.kind, f.local_date >= :since AS recent,
        SUM(l.pieces - l.turned_away - l.not_looked_at) AS m, SUM(l.wasters + l.refires) AS y
      FROM firings f JOIN lots l ON l.network_id = f.network_id AND l.firing_id = f.id AND l.refire_count = 0
      WHERE f.network_id = :networkId AND f.studio_id IN (:studioIds) AND f.status = 'reported'
        AND f.local_date BETWEEN :from AND :to
      GROUP BY f.id, f.studio_id, f.kind, recent
    ) x JOIN studios s ON s.network_id = :networkId AND s.id = x.studio_id
    WHERE x.m > 0
    GROUP BY s.id, s.uid, s.name, x.kind, x.recent
    ORDER BY s.name, x.kind`,
    { replacements: { networkId, studioIds, ...days }, type: QueryTypes.SELECT },
  )
  return rows.map((row) => ({
    studioId: Number(row.studioId),
    studioUid: String(row.studioUid),
    studioName: String(row.studioName),
    kind: String(row.kind) as FiringKind,
    recent: Number(row.recent) === 1,
    sums: {
      G: Number(row.G),
      sumUnits: Number(row.sumUnits),
      sumEvents: Number(row.sumEvents),
      sumUnits2: Number(row.sumUnits2),
      sumUnitsEvents: Number(row.sumUnitsEvents),
      sumEvents2: Number(row.sumEvents2),
    },
  }))
}
