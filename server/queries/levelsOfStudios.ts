import { Op } from 'sequelize'
import { Level } from '../models/index.js'
import type { Scope } from '../policies/index.js'

export interface LevelsWanted {
  /** The studios whose own lists are wanted, besides the network's. */
  studioIds: readonly number[]
  /** All factors when left out. */
  factors?: readonly string[]
  /** Archived ones too. */
  archived: boolean
}

/** Levels of the network's and these studios' lists: fixed ones in their order, others by name. */
export function levelsOfStudios(
  { networkId }: Scope,
  { studioIds, factors, archived }: LevelsWanted,
): Promise<Level[]> {
  return Level.findAll({
    where: {
      networkId,
      mergedIntoId: null,
      studioId: { [Op.or]: [{ [Op.is]: null }, { [Op.in]: [...studioIds] }] },
      ...(factors && { factor: [...factors] }),
      ...(!archived && { archivedAt: null }),
    },
    order: ['factor', ['studioId', 'ASC'], 'position', 'name', 'id'],
  })
}

/** The level with this uid, or null. */
export function findLevel({ networkId }: Scope, uid: string): Promise<Level | null> {
  return Level.findOne({ where: { networkId, uid } })
}
