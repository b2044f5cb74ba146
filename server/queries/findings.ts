import { QueryTypes } from 'sequelize'
import { Network, Studio, Study } from '../models/index.js'
import type { Scope } from '../policies/index.js'
import { withDescendants } from '../shared/faults/index.js'
import { FROM, SELECT, VISIBLE, findingRow, listOf, studyRow } from './findingRows.js'
import type { FindingRow, SelectedRow, StudyRow } from './findingRows.js'

export type { FindingRow, StudyRow } from './findingRows.js'

/** Which findings of the newest study of a scope. */
export interface FindingFilters {
  /** `network`, or the uid of a studio. */
  scope: string
  /** Ids of the studios whose findings the person may read (`studiosWith(scope, 'findings.read')`). */
  readable: readonly number[]
  /** A node of the fault tree: it and those below it. */
  fault?: string
  factor?: string
  /** At most. */
  q?: number
  direction?: 'raised' | 'lowered'
  page?: number
  pageSize?: number
}

export interface FindingList {
  /** The newest study of the scope; null before the first. */
  study: StudyRow | null
  rows: FindingRow[]
  total: number
  page: number
  pageSize: number
  scopes: { key: string; name: string }[]
}

export const NETWORK_SCOPE = 'network'

/**
 * Findings of the newest study of a scope, surest first, a page at a time. In the network's study a
 * finding about a studio's own level or kiln is there only for those who may read that studio.
 * @returns null when the scope is not there or not to be read
 */
export async function listFindings(
  scope: Scope,
  filters: FindingFilters,
): Promise<FindingList | null> {
  const { page = 1, pageSize = 25 } = filters
  const studios = await readableStudios(scope, filters.readable)
  const studio =
    filters.scope === NETWORK_SCOPE ? null : studios.find(({ uid }) => uid === filters.scope)
  if (studio === undefined) return null
  const scopes = [
    { key: NETWORK_SCOPE, name: 'All studios' },
    ...studios.map(({ uid, name }) => ({ key: uid, name })),
  ]
  const found = await Study.findOne({
    where: { networkId: scope.networkId, studioId: studio?.id ?? null },
    order: [['id', 'DESC']],
    raw: true,
  })
  if (!found) return { study: null, rows: [], total: 0, page, pageSize, scopes }
  const { where, replacements } = conditions(scope, found.id, filters)
  const { sequelize } = Network
  const [counted] = await sequelize!.query<{ total: number }>(
    `SELECT COUNT(*) AS total ${FROM} WHERE ${where}`,
    {
      type: QueryTypes.SELECT,
      replacements,
    },
  )
  const rows = await sequelize!.query<SelectedRow>(
    `${SELECT} ${FROM} WHERE ${where} ORDER BY f.q_value, f.p_value, f.exposed_events DESC, f.id LIMIT :limit OFFSET :offset`,
    {
      type: QueryTypes.SELECT,
      replacements: { ...replacements, limit: pageSize, offset: (page - 1) * pageSize },
    },
  )
  return {
    study: studyRow(found, studio),
    rows: rows.map(findingRow),
    total: Number(counted?.total ?? 0),
    page,
    pageSize,
    scopes,
  }
}

function conditions(
  { networkId }: Scope,
  studyId: number,
  { readable, fault, factor, q, direction }: FindingFilters,
) {
  const where = ['f.network_id = :networkId', 'f.study_id = :studyId', VISIBLE]
  if (fault !== undefined) where.push('f.fault IN (:faults)')
  if (factor !== undefined) where.push('(f.factor = :factor OR f.pair_factor = :factor)')
  if (q !== undefined) where.push('f.q_value <= :q')
  // No ratio: nothing was lost on the other ware, so the rate is raised.
  if (direction === 'raised') where.push('(f.ratio IS NULL OR f.ratio > 1)')
  if (direction === 'lowered') where.push('f.ratio <= 1')
  const faults = fault === undefined ? [] : withDescendants(fault)
  const replacements = {
    networkId,
    studyId,
    readable: listOf(readable),
    faults: faults.length > 0 ? faults : [''],
    factor,
    q,
  }
  return { where: where.join(' AND '), replacements }
}

async function readableStudios({ networkId }: Scope, readable: readonly number[]) {
  return Studio.findAll({
    where: { networkId, id: [...readable] },
    attributes: ['id', 'uid', 'name'],
    order: ['name'],
    raw: true,
  })
}
