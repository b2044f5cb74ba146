import { QueryTypes } from 'sequelize'
import type { FindingLevelRow } from '../contract/findings.js'
import { Kiln, Level, Network, Study } from '../models/index.js'
import type { Scope } from '../policies/index.js'
import { FROM, SELECT, VISIBLE, findingRow, listOf, studyRow } from './findingRows.js'
import type { FindingRow, SelectedRow, StudyRow } from './findingRows.js'

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

/** As commands/storeStudy.ts stores them: `uids` are those of all levels of the row. */
type StoredLevels = (FindingLevelRow & { uids: string[] })[]

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
