import { QueryTypes } from 'sequelize'
import type { Sequelize, Transaction } from 'sequelize'
import type { Scope } from '../policies/index.js'

/** Day on which each of these findings was first seen in that scope; unknown ones are missing. */
export async function firstSeen(
  { networkId }: Scope,
  { studioId, identities }: { studioId: number | null; identities: readonly string[] },
  { sequelize, transaction }: { sequelize: Sequelize; transaction?: Transaction },
): Promise<Map<string, string>> {
  if (identities.length === 0) return new Map()
  const rows = await sequelize.query<{ identity: string; day: string }>(
    `SELECT identity, DATE_FORMAT(MIN(first_seen_on), '%Y-%m-%d') AS day FROM findings
     WHERE network_id = :networkId AND studio_id <=> :studioId AND identity IN (:identities)
     GROUP BY identity`,
    {
      type: QueryTypes.SELECT,
      replacements: { networkId, studioId, identities: [...identities] },
      transaction,
    },
  )
  return new Map(rows.map(({ identity, day }) => [identity, day]))
}
