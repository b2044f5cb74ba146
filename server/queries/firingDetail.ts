import { Op } from 'sequelize'
import {
  Firing,
  FiringLevel,
  Kiln,
  Level,
  Loss,
  Lot,
  LotLevel,
  ReportRevision,
  Studio,
  User,
} from '../models/index.js'
import { LOT_FACTORS } from '../shared/factors.js'

export interface NamedLevel {
  factor: string
  uid: string
  name: string
}

export interface LotDetail {
  lot: Lot
  levels: NamedLevel[]
  losses: Loss[]
}

/** Everything that a firing's page shows, besides its row of the list. */
export interface FiringDetailRows {
  firing: Firing
  timeZone: string
  lots: LotDetail[]
  levels: NamedLevel[]
  revisions: ReportRevision[]
  /** Names of the people of the firing and its revisions, by id. */
  people: ReadonlyMap<number, string>
}

/** Where a firing is, or null when it is not there. */
export async function findFiring(
  networkId: number,
  uid: string,
): Promise<{ id: number; studioId: number } | null> {
  return Firing.findOne({ where: { networkId, uid }, attributes: ['id', 'studioId'], raw: true })
}

/** A firing whole: lots in their order, the rest last, in a fixed number of questions. */
export async function firingDetail(networkId: number, id: number): Promise<FiringDetailRows> {
  const firing = await Firing.findOne({ where: { networkId, id }, rejectOnEmpty: true })
  const of = { networkId, firingId: id }
  const [studio, lots, losses, firingLevels, revisions] = await Promise.all([
    Studio.findOne({ where: { networkId, id: firing.studioId }, rejectOnEmpty: true }),
    Lot.findAll({ where: of, order: [['position', 'ASC']] }),
    Loss.findAll({ where: of, order: [['id', 'ASC']] }),
    FiringLevel.findAll({ where: of }),
    ReportRevision.findAll({ where: of, order: [['number', 'ASC']] }),
  ])
  const lotLevels = await LotLevel.findAll({
    where: { networkId, lotId: lots.map((lot) => lot.id) },
    order: [['id', 'ASC']],
  })
  const [named, people] = await Promise.all([
    levelsById(networkId, [
      ...lots.flatMap((lot) => columnLevels(lot).map(({ levelId }) => levelId)),
      ...lotLevels.map(({ levelId }) => levelId),
      ...firingLevels.map(({ levelId }) => levelId),
    ]),
    namesOf([firing.packedBy, firing.reportedBy, ...revisions.map(({ authorId }) => authorId)]),
  ])
  const nameAll = (rows: readonly { factor: string; levelId: number }[]): NamedLevel[] =>
    rows.flatMap(({ factor, levelId }) => {
      const level = named.get(levelId)
      return level ? [{ factor, ...level }] : []
    })
  return {
    firing,
    timeZone: studio.timeZone,
    lots: lots.map((lot) => ({
      lot,
      levels: nameAll([...columnLevels(lot), ...lotLevels.filter(({ lotId }) => lotId === lot.id)]),
      losses: losses.filter(({ lotId }) => lotId === lot.id),
    })),
    levels: nameAll(firingLevels),
    revisions,
    people,
  }
}

function columnLevels(lot: Lot): { factor: string; levelId: number }[] {
  const columns = lot.get() as unknown as Record<string, number | null>
  return LOT_FACTORS.flatMap(({ id: factor, column }) => {
    const levelId = column === undefined ? null : columns[column]
    return levelId ? [{ factor, levelId }] : []
  })
}

async function levelsById(
  networkId: number,
  ids: readonly number[],
): Promise<Map<number, { uid: string; name: string }>> {
  const rows = await Level.findAll({
    where: { networkId, id: [...new Set(ids)] },
    attributes: ['id', 'uid', 'name'],
    raw: true,
  })
  return new Map(rows.map(({ id, uid, name }) => [id, { uid, name }]))
}

async function namesOf(ids: readonly (number | null | undefined)[]): Promise<Map<number, string>> {
  const known = [...new Set(ids.filter((id) => id !== null && id !== undefined))]
  const rows = await User.findAll({ where: { id: known }, attributes: ['id', 'name'], raw: true })
  return new Map(rows.map(({ id, name }) => [id, name]))
}

/** The newest firing of a kiln and kind that is not void, or null. */
export async function lastFiringOf(
  networkId: number,
  kilnId: number,
  kind: string,
): Promise<number | null> {
  const row = await Firing.findOne({
    where: { networkId, kilnId, kind: kind as Firing['kind'], status: { [Op.ne]: 'void' } },
    attributes: ['id'],
    order: [
      ['localDate', 'DESC'],
      ['id', 'DESC'],
    ],
    raw: true,
  })
  return row?.id ?? null
}

/** Where a kiln is, or null when it is not there. */
export async function findKiln(
  networkId: number,
  uid: string,
): Promise<{ id: number; studioId: number } | null> {
  return Kiln.findOne({ where: { networkId, uid }, attributes: ['id', 'studioId'], raw: true })
}

/** One revision of a firing by its number, or null. */
export async function findRevisionByNumber(
  networkId: number,
  firingId: number,
  number: number,
): Promise<ReportRevision | null> {
  return ReportRevision.findOne({ where: { networkId, firingId, number } })
}
