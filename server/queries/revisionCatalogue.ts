import { Op } from 'sequelize'
import type { Transaction } from 'sequelize'
import { Kiln, Level, Loss, Lot, Studio } from '../models/index.js'

export interface KilnOfRevision {
  id: number
  uid: string
  studioId: number
  timeZone: string
  archived: boolean
}

export interface LevelOfRevision {
  id: number
  uid: string
  factor: string
  studioId: number | null
  archived: boolean
  /** Of a class: the code of its class level. */
  classLevel: string | null
}

/** The kiln of that uid with its studio's time zone, or null. */
export async function kilnOfRevision(
  networkId: number,
  uid: string,
  transaction?: Transaction,
): Promise<KilnOfRevision | null> {
  const kiln = await Kiln.findOne({ where: { networkId, uid }, transaction })
  if (!kiln) return null
  const studio = await Studio.findOne({
    where: { networkId, id: kiln.studioId },
    rejectOnEmpty: true,
    transaction,
  })
  return {
    id: kiln.id,
    uid: kiln.uid,
    studioId: kiln.studioId,
    timeZone: studio.timeZone,
    archived: kiln.archivedAt !== null || studio.archivedAt !== null,
  }
}

/** Levels by uid. */
export async function levelsOfRevision(
  networkId: number,
  uids: readonly string[],
  transaction?: Transaction,
): Promise<Map<string, LevelOfRevision>> {
  const rows = await Level.findAll({ where: { networkId, uid: [...uids] }, raw: true, transaction })
  return new Map(
    rows.map(({ id, uid, factor, studioId, archivedAt, attributes }) => {
      const classLevel = typeof attributes.classLevel === 'string' ? attributes.classLevel : null
      return [
        uid,
        { id, uid, factor, studioId: studioId ?? null, archived: Boolean(archivedAt), classLevel },
      ]
    }),
  )
}

/** Ids of the network's class levels by code. */
export async function classLevelIds(
  networkId: number,
  transaction?: Transaction,
): Promise<Map<string, number>> {
  const rows = await Level.findAll({
    where: { networkId, factor: 'class_level', studioId: null, code: { [Op.ne]: null } },
    attributes: ['id', 'code'],
    raw: true,
    transaction,
  })
  return new Map(rows.map(({ id, code }) => [code as string, id]))
}

/** Those of the uids that lots or losses of another firing have. */
export async function uidsOfOtherFirings(
  networkId: number,
  firingId: number | null,
  uids: { lots: readonly string[]; losses: readonly string[] },
  transaction?: Transaction,
): Promise<{ lots: Set<string>; losses: Set<string> }> {
  // No firing has the id 0.
  const elsewhere = { [Op.ne]: firingId ?? 0 }
  const find = { attributes: ['uid'], raw: true, transaction }
  const [lots, losses] = await Promise.all([
    Lot.findAll({ ...find, where: { networkId, uid: [...uids.lots], firingId: elsewhere } }),
    Loss.findAll({ ...find, where: { networkId, uid: [...uids.losses], firingId: elsewhere } }),
  ])
  return {
    lots: new Set(lots.map(({ uid }) => uid)),
    losses: new Set(losses.map(({ uid }) => uid)),
  }
}
