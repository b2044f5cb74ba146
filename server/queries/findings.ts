import { QueryTypes } from 'sequelize'
import type { FindingLevelRow } from '../contract/findings.js'
import { Kiln, Level, Network, Studio, Study } from '../models/index.js'
import type { Scope } from '../policies/index.js'
import { withDescendants } from '../shared/faults/index.js'

export interface NamedRow {
  uid: string
  name: string
}

/** A finding with the names of what it is about; studio null is the whole network. */
export interface FindingRow {
  id: number
  uid: string
  studyId: number
  studio: NamedRow | null
  fault: string
  factor: string
  level: NamedRow
  pair: { factor: string; level: NamedRow } | null
  comparison: 'within-firing' | 'between-firings'
  ratio: number | null
  lower: number | null
  upper: number | null
  pValue: number
  qValue: number
  exposedUnits: number
  exposedEvents: number
  unexposedUnits: number
  unexposedEvents: number
  mixedStrata: number
  informativeStrata: number
  recordedShare: number
  verdict: string | null
  firstSeenOn: string
}

export interface StudyRow {
  id: number
  uid: string
  studio: NamedRow | null
  windowFrom: string
  windowTo: string
  firings: number
  lots: number
  pieces: number
  comparisons: number
  findings: number
  finishedAt: Date
}

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

export interface FindingWithStudy extends FindingRow {
  study: StudyRow
  /** By level, the finding's own first; rows of levels that are not to be seen are left out. */
  levels: FindingLevelRow[]
}

/** One finding that the person may read, with its study and table; null otherwise. */
export async function findFinding(
  scope: Scope,
  uid: string,
  readable: readonly number[],
): Promise<FindingWithStudy | null> {
  const { networkId } = scope
  const [whole] = await Network.sequelize!.query<SelectedRow & { levels: StoredLevels }>(
    `${SELECT}, f.levels ${FROM} WHERE f.network_id = :networkId AND f.uid = :uid AND ${VISIBLE}`,
    {
      type: QueryTypes.SELECT,
      replacements: { networkId, uid, readable: listOf(readable) },
    },
  )
  if (!whole) return null
  const { levels, ...selected } = whole
  const study = await Study.findOne({ where: { networkId, id: selected.studyId }, raw: true })
  if (!study) return null
  const row = findingRow(selected)
  return {
    ...row,
    study: studyRow(study, row.studio),
    levels: await visibleLevels(scope, levels, readable, row.factor),
  }
}

const SELECT = `SELECT f.id, f.uid, f.study_id AS studyId, f.fault, f.factor, f.comparison, f.ratio,
    f.lower_limit AS lower, f.upper_limit AS upper, f.p_value AS pValue, f.q_value AS qValue,
    f.exposed_units AS exposedUnits, f.exposed_events AS exposedEvents,
    f.unexposed_units AS unexposedUnits, f.unexposed_events AS unexposedEvents,
    f.mixed_strata AS mixedStrata, f.informative_strata AS informativeStrata, f.recorded_share AS recordedShare,
    f.verdict, f.first_seen_on AS firstSeenOn, f.pair_factor AS pairFactor,
    COALESCE(k.uid, l.uid) AS levelUid, COALESCE(k.name, l.name) AS levelName,
    p.uid AS pairUid, p.name AS pairName, s.uid AS studioUid, s.name AS studioName`

const FROM = `FROM findings f
  LEFT JOIN levels l ON l.network_id = f.network_id AND l.id = f.level_id AND f.factor <> 'kiln'
  LEFT JOIN kilns k ON k.network_id = f.network_id AND k.id = f.level_id AND f.factor = 'kiln'
  LEFT JOIN levels p ON p.network_id = f.network_id AND p.id = f.pair_level_id
  LEFT JOIN studios s ON s.network_id = f.network_id AND s.id = f.studio_id`

/** The wall inside the network: of the person's studios, or about what belongs to the network. */
const VISIBLE = `(f.studio_id IS NULL OR f.studio_id IN (:readable))
  AND (COALESCE(k.studio_id, l.studio_id) IS NULL OR COALESCE(k.studio_id, l.studio_id) IN (:readable))
  AND (p.studio_id IS NULL OR p.studio_id IN (:readable))
  AND COALESCE(k.uid, l.uid) IS NOT NULL`

/** As commands/storeStudy.ts stores them: `uids` are those of all levels of the row. */
type StoredLevels = (FindingLevelRow & { uids: string[] })[]

interface SelectedRow extends Omit<FindingRow, 'studio' | 'level' | 'pair'> {
  levelUid: string
  levelName: string
  pairFactor: string | null
  pairUid: string | null
  pairName: string | null
  studioUid: string | null
  studioName: string | null
}

/** SQL knows no empty list; no row has id 0. */
function listOf(ids: readonly number[]): number[] {
  return ids.length > 0 ? [...ids] : [0]
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

function findingRow(selected: SelectedRow): FindingRow {
  const { levelUid, levelName, pairFactor, pairUid, pairName, studioUid, studioName, ...row } =
    selected
  return {
    ...row,
    studio: studioUid === null ? null : { uid: studioUid, name: studioName ?? '' },
    level: { uid: levelUid, name: levelName },
    pair:
      pairFactor === null || pairUid === null
        ? null
        : { factor: pairFactor, level: { uid: pairUid, name: pairName ?? '' } },
  }
}

function studyRow(study: Study, studio: NamedRow | null): StudyRow {
  const {
    id,
    uid,
    windowFrom,
    windowTo,
    firings,
    lots,
    pieces,
    comparisons,
    findings,
    finishedAt,
  } = study
  return {
    id,
    uid,
    studio: studio && { uid: studio.uid, name: studio.name },
    windowFrom,
    windowTo,
    firings,
    lots,
    pieces,
    comparisons,
    findings,
    finishedAt,
  }
}

async function readableStudios({ networkId }: Scope, readable: readonly number[]) {
  return Studio.findAll({
    where: { networkId, id: [...readable] },
    attributes: ['id', 'uid', 'name'],
    order: ['name'],
    raw: true,
  })
}

/** A class is shown in a table only with this much behind it, so that no row is one person's work. */
const LEAST_OF_CLASS = { pieces: 5, firings: 3 }

/** The stored table under its present names, without levels of other studios' own lists. */
async function visibleLevels(
  { networkId }: Scope,
  rows: StoredLevels,
  readable: readonly number[],
  factor: string,
): Promise<FindingLevelRow[]> {
  const uids = rows.flatMap((row) => row.uids)
  const where = { networkId, uid: uids }
  const attributes = ['uid', 'name', 'studioId']
  const [levels, kilns] = await Promise.all([
    Level.findAll({ where, attributes, raw: true }),
    Kiln.findAll({ where, attributes, raw: true }),
  ])
  const known = new Map(
    [...levels, ...kilns].map(({ uid, name, studioId }) => [
      uid,
      { name, studioId: studioId ?? null },
    ]),
  )
  return rows.flatMap(({ level, exposed, rate, uids: own }) => {
    const found = own.map((uid) => known.get(uid))
    const hidden = found.some(
      (each) => !each || (each.studioId !== null && !readable.includes(each.studioId)),
    )
    const thin =
      factor === 'class' &&
      (rate.pieces < LEAST_OF_CLASS.pieces || rate.firings < LEAST_OF_CLASS.firings)
    if (hidden || own.length === 0 || thin) return []
    return [
      {
        level: { uid: level.uid, name: found.map((each) => each?.name).join(' on ') },
        exposed,
        rate,
      },
    ]
  })
}
