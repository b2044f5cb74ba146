import { QueryTypes } from 'sequelize'
import type { Sequelize } from 'sequelize'
import { Kiln } from '../models/index.js'
import type { Scope } from '../policies/index.js'

/** Kilns of these studios by studio and name, archived ones too. */
export function kilnsOfStudios(
  { networkId }: Scope,
  studioIds: readonly number[],
): Promise<Kiln[]> {
  return Kiln.findAll({
    where: { networkId, studioId: [...studioIds] },
    order: ['studioId', 'name', 'id'],
  })
}

/** The kiln with this uid, or null. */
export function findKiln({ networkId }: Scope, uid: string): Promise<Kiln | null> {
  return Kiln.findOne({ where: { networkId, uid } })
}

/** How many kilns each studio of the network has, archived ones left out. */
export async function kilnCounts({ networkId }: Scope): Promise<Map<number, number>> {
  const rows = await Kiln.count({
    where: { networkId, archivedAt: null },
    group: ['studioId'],
    attributes: ['studioId'],
  })
  return new Map(rows.map((row) => [Number(row.studioId), row.count]))
}

/**
 * The next number of each kiln's own counter: one more than the newest firing says that has a number.
 * By date, not the largest: a counter that was set back starts again. Walks firings_kiln_date backwards.
 * @returns by kiln id; a kiln without numbers is missing
 */
export async function nextKilnNumbers(
  { networkId }: Scope,
  sequelize: Sequelize,
): Promise<Map<number, number>> {
  const rows = await sequelize.query<{ id: number; last: number | null }>(
    `SELECT kilns.id, (
       SELECT firings.kiln_number FROM firings
       WHERE firings.network_id = kilns.network_id AND firings.kiln_id = kilns.id
         AND firings.kiln_number IS NOT NULL AND firings.status <> 'void'
       ORDER BY firings.local_date DESC, firings.id DESC LIMIT 1
     ) AS last
     FROM kilns WHERE kilns.network_id = :networkId`,
    { type: QueryTypes.SELECT, replacements: { networkId } },
  )
  return new Map(rows.flatMap(({ id, last }) => (last === null ? [] : [[id, last + 1]])))
}
