import { levelAttributes } from '../contract/catalogue.js'
import type { LevelAttributes, LevelView } from '../contract/catalogue.js'
import type { Level } from '../models/index.js'
import { abilitiesFor } from '../policies/index.js'
import type { Scope } from '../policies/index.js'

/** What the level says beside its name, as far as it is of the contract's shape. */
export function attributesOfLevel({ attributes }: Pick<Level, 'attributes'>): LevelAttributes {
  return levelAttributes.catch({}).parse(attributes)
}

/** An entry of a list; `studio` is null for the network's own lists, `uses` counts what names it. */
export function presentLevel(
  level: Level,
  { studio, uses }: { studio: { uid: string; name: string } | null; uses: number },
  scope: Scope,
): LevelView {
  return {
    uid: level.uid,
    factor: level.factor,
    studio: studio && { uid: studio.uid, name: studio.name },
    code: level.code,
    name: level.name,
    isReference: level.isReference,
    attributes: attributesOfLevel(level),
    archivedAt: level.archivedAt?.toISOString() ?? null,
    uses,
    abilities: abilitiesFor(scope, { studioId: level.studioId }, ['catalogue.edit']),
  }
}
