import { QueryTypes } from 'sequelize'
import type { Sequelize } from 'sequelize'
import type { FIRING_SORTS } from '../contract/firings.js'
import type { LotCounts } from '../shared/counts.js'
import type { FiringKind } from '../shared/kinds.js'
import type { FiringWhere } from './firingWhere.js'

/** A firing with the names of its studio, kiln and programme. */
export interface FiringListRow extends LotCounts {
  id: number
  uid: string
  studioId: number
  studioUid: string
  studioName: string
  kilnUid: string
  kilnName: string
  kind: FiringKind
  status: 'packed' | 'reported' | 'void'
  programmeUid: string | null
  programmeName: string | null
  cone: string | null
  /** YYYY-MM-DD */
  localDate: string
  kilnNumber: number | null
  about: number
  wholeLoadFailed: string | null
  revision: number
  packedAt: Date | null
  reportedAt: Date | null
}

export type FiringSort = (typeof FIRING_SORTS)[number]
/** `reported`: newest report first. */
export type FiringOrder = FiringSort | 'reported'

/** Ties are broken by day and id, so that every page is the same each time. */
const ORDERS: Readonly<Record<FiringOrder, string>> = {
  reported: 'f.reported_at DESC, f.id DESC',
  '-date': 'f.local_date DESC, f.id DESC',
  date: 'f.local_date, f.id',
  '-lost': 'f.wasters + f.refires DESC, f.local_date DESC, f.id DESC',
  lost: 'f.wasters + f.refires, f.local_date DESC, f.id DESC',
  '-pieces': 'f.pieces DESC, f.local_date DESC, f.id DESC',
  pieces: 'f.pieces, f.local_date DESC, f.id DESC',
  kiln: 'k.name, f.kiln_id, f.local_date DESC, f.id DESC',
  '-kiln': 'k.name DESC, f.kiln_id, f.local_date DESC, f.id DESC',
}

function from(sort: FiringOrder): string {
  const kiln = sort.endsWith('kiln')
    ? 'JOIN kilns k ON k.network_id = f.network_id AND k.id = f.kiln_id'
    : ''
  return `FROM firings f ${kiln}`
}

export async function countFirings(sequelize: Sequelize, where: FiringWhere): Promise<number> {
  const [row] = await sequelize.query<{ total: number }>(
    `SELECT COUNT(*) AS total FROM firings f WHERE ${where.sql}`,
    {
      replacements: where.replacements,
      type: QueryTypes.SELECT,
    },
  )
  return Number(row?.total ?? 0)
}

/** Ids in order: of one page, or (without one) of all. Ids alone are sorted, so that a late page costs little. */
export async function firingIds(
  sequelize: Sequelize,
  where: FiringWhere,
  sort: FiringOrder,
  page?: { limit: number; offset: number },
): Promise<number[]> {
  const rows = await sequelize.query<{ id: number }>(
    `SELECT f.id ${from(sort)} WHERE ${where.sql} ORDER BY ${ORDERS[sort]} ${page ? 'LIMIT :limit OFFSET :offset' : ''}`,
    { replacements: { ...where.replacements, ...page }, type: QueryTypes.SELECT },
  )
  return rows.map(({ id }) => id)
}

/** Firings by id, in the order of the ids. */
export async function firingRows(
  sequelize: Sequelize,
  networkId: number,
  ids: readonly number[],
): Promise<FiringListRow[]> {
  if (ids.length === 0) return []
  const rows = await sequelize.query<FiringListRow>(
    `SELECT f.id, f.uid, f.studio_id AS studioId, s.uid AS studioUid, s.name AS studioName, k.uid AS kilnUid,
      k.name AS kilnName, f.kind, f.status, p.uid AS programmeUid, p.name AS programmeName, f.cone,
      DATE_FORMAT(f.local_date, '%Y-%m-%d') AS localDate, f.kiln_number AS kilnNumber, f.about, f.pieces,
      f.turned_away AS turnedAway, f.seconds, f.refires, f.wasters, f.undecided, f.not_looked_at AS notLookedAt,
      f.whole_load_failed AS wholeLoadFailed, f.revision, f.packed_at AS packedAt, f.reported_at AS reportedAt
    FROM firings f
    JOIN studios s ON s.network_id = f.network_id AND s.id = f.studio_id
    JOIN kilns k ON k.network_id = f.network_id AND k.id = f.kiln_id
    LEFT JOIN levels p ON p.network_id = f.network_id AND p.id = f.programme_id
    WHERE f.network_id = :networkId AND f.id IN (:ids)`,
    { replacements: { networkId, ids }, type: QueryTypes.SELECT },
  )
  const byId = new Map(rows.map((row) => [row.id, row]))
  return ids.flatMap((id) => byId.get(id) ?? [])
}

/** Firings of a condition in chunks, in order: what a long table is streamed from. */
export async function* everyFiring(
  sequelize: Sequelize,
  networkId: number,
  where: FiringWhere,
  sort: FiringSort,
  chunk = 500,
): AsyncGenerator<FiringListRow> {
  const ids = await firingIds(sequelize, where, sort)
  for (let at = 0; at < ids.length; at += chunk)
    yield* await firingRows(sequelize, networkId, ids.slice(at, at + chunk))
}
