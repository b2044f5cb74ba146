import { QueryTypes } from 'sequelize'
import type { Sequelize } from 'sequelize'
import { Kiln, Studio } from '../models/index.js'
import { SUM_COLUMNS } from '../shared/lossRollup.js'
import { familiesOf } from '../shared/lossRollupRates.js'
import type { FiringKind } from '../shared/kinds.js'

export interface KilnOfLosses {
  id: number
  uid: string
  name: string
  studioId: number
  studioUid: string
  studioName: string
}

const list = (text: string | undefined): string[] => (text ?? '').split(',').filter(Boolean)

/**
 * Kilns that the filters (uids with commas) leave, archived ones too, in studios that the person may read.
 * @param studios ids, or null for every studio
 */
export async function kilnsOfLosses(
  networkId: number,
  studios: readonly number[] | null,
  filters: { studio?: string; kiln?: string },
): Promise<KilnOfLosses[]> {
  const [ofStudio, ofKiln] = [list(filters.studio), list(filters.kiln)]
  const [kilns, found] = await Promise.all([
    Kiln.findAll({
      where: { networkId },
      attributes: ['id', 'uid', 'name', 'studioId'],
      raw: true,
    }),
    Studio.findAll({ where: { networkId }, attributes: ['id', 'uid', 'name'], raw: true }),
  ])
  const byId = new Map(found.map((studio) => [studio.id, studio]))
  return kilns.flatMap(({ id, uid, name, studioId }) => {
    const studio = byId.get(studioId)
    const left =
      studio &&
      (studios === null || studios.includes(studioId)) &&
      (ofStudio.length === 0 || ofStudio.includes(studio.uid)) &&
      (ofKiln.length === 0 || ofKiln.includes(uid))
    return left ? [{ id, uid, name, studioId, studioUid: studio.uid, studioName: studio.name }] : []
  })
}

/** A cut of the roll-ups: kilns, one kind, months (first days) and a fault, or null for all faults. */
export interface LossCut {
  networkId: number
  kilnIds: readonly number[]
  kind: FiringKind
  /** YYYY-MM, both included. */
  from: string
  to: string
  fault: string | null
}

/** Sums by family of the roll-ups (shared/lossRollup.ts), by what they were grouped by. */
export type SumsByKey = Map<string, Map<string, number[]>>

/** `fault`: one group of every family. `level`: by id of the level, 0 being whatever is recorded. */
export type LossGrouping = 'all' | 'month' | 'kiln' | 'fault' | 'level'

const KEYS: Readonly<Record<LossGrouping, string>> = {
  all: "''",
  fault: "''",
  month: "DATE_FORMAT(month, '%Y-%m')",
  kiln: 'kiln_id',
  level: 'level_id',
}
const SUMS = SUM_COLUMNS.map((column) => `SUM(${column}) AS ${column}`).join(', ')

/** Sums of a slice of the roll-ups; `factor` '' is the whole firings. Keys without rows are missing. */
export async function lossSums(
  sequelize: Sequelize,
  cut: LossCut,
  grouping: LossGrouping,
  factor = '',
): Promise<SumsByKey> {
  const { networkId, kilnIds, kind, from, to, fault } = cut
  const groups: SumsByKey = new Map()
  if (kilnIds.length === 0) return groups
  const rows = await sequelize.query<Record<string, string | number>>(
    `SELECT ${KEYS[grouping]} AS grouped, fault, ${SUMS} FROM loss_rollups
    WHERE network_id = :networkId AND kiln_id IN (:kilnIds) AND kind = :kind AND factor = :factor
      ${grouping === 'fault' ? '' : 'AND fault IN (:families)'} AND month BETWEEN :from AND :to
      ${grouping === 'level' ? '' : 'AND level_id = 0'}
    GROUP BY grouped, fault`,
    {
      replacements: {
        networkId,
        kilnIds,
        kind,
        factor,
        families: familiesOf(fault),
        from: `${from}-01`,
        to: `${to}-01`,
      },
      type: QueryTypes.SELECT,
    },
  )
  for (const row of rows) {
    const key = String(row.grouped)
    const families = groups.get(key) ?? new Map<string, number[]>()
    families.set(
      String(row.fault),
      SUM_COLUMNS.map((column) => Number(row[column])),
    )
    groups.set(key, families)
  }
  return groups
}
