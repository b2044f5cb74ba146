import { QueryTypes } from 'sequelize'
import type { Sequelize } from 'sequelize'

/** What a kiln's own counter says of a span of days, all kinds of firing together. */
export interface KilnCoverage {
  kilnId: number
  /** Firings here that are not void, and those of them that are reported. */
  known: number
  reported: number
  /** Lowest and highest number of the kiln's counter; null where none was recorded. */
  lowest: number | null
  highest: number | null
}

/** Coverage of kilns over days, both included; a kiln without firings is missing. */
export async function kilnCoverage(
  sequelize: Sequelize,
  networkId: number,
  kilnIds: readonly number[],
  days: { from: string; to: string },
): Promise<KilnCoverage[]> {
  if (kilnIds.length === 0) return []
  const rows = await sequelize.query<Record<keyof KilnCoverage, number | string | null>>(
    `SELECT kiln_id AS kilnId, COUNT(*) AS known, SUM(status = 'reported') AS reported,
      MIN(kiln_number) AS lowest, MAX(kiln_number) AS highest
    FROM firings
    WHERE network_id = :networkId AND kiln_id IN (:kilnIds) AND status <> 'void' AND local_date BETWEEN :from AND :to
    GROUP BY kiln_id`,
    { replacements: { networkId, kilnIds, ...days }, type: QueryTypes.SELECT },
  )
  return rows.map((row) => ({
    kilnId: Number(row.kilnId),
    known: Number(row.known),
    reported: Number(row.reported),
    lowest: row.lowest === null ? null : Number(row.lowest),
    highest: row.highest === null ? null : Number(row.highest),
  }))
}
