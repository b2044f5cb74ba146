import { Kiln, Level } from '../models/index.js'
import type { Scope } from '../policies/index.js'

/** A level, or a kiln standing as one, as others name it. */
export interface NamedLevel {
  id: number
  uid: string
  name: string
  /** The studio whose list it is on; null: the network's own list. */
  studioId: number | null
}

/** Levels by id: of the factor `kiln` the kilns, of every other the levels. */
export type LevelNames = (factor: string, id: number) => NamedLevel | undefined

/** Every level and kiln of the network, archived and merged ones too. */
export async function levelNames({ networkId }: Scope): Promise<LevelNames> {
  const attributes = ['id', 'uid', 'name', 'studioId']
  const [levels, kilns] = await Promise.all([
    Level.findAll({ where: { networkId }, attributes, raw: true }),
    Kiln.findAll({ where: { networkId }, attributes, raw: true }),
  ])
  const levelById = new Map(levels.map((level) => [level.id, level]))
  const kilnById = new Map(kilns.map((kiln) => [kiln.id, kiln]))
  return (factor, id) => (factor === 'kiln' ? kilnById : levelById).get(id)
}
