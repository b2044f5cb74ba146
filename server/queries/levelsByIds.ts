import { Level } from '../models/index.js'

export interface NamedLevelRow {
  id: number
  uid: string
  name: string
  studioId: number | null
}

/** Levels by id, archived ones too. */
export async function levelsByIds(
  networkId: number,
  ids: readonly number[],
): Promise<NamedLevelRow[]> {
  const rows = await Level.findAll({
    where: { networkId, id: [...ids] },
    attributes: ['id', 'uid', 'name', 'studioId'],
    raw: true,
  })
  return rows.map(({ id, uid, name, studioId }) => ({ id, uid, name, studioId: studioId ?? null }))
}
