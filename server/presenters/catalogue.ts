import type { Catalogue, CatalogueLevel } from '../contract/catalogue.js'
import type { Kiln, Level, Studio } from '../models/index.js'
import { abilitiesFor } from '../policies/index.js'
import type { Scope } from '../policies/index.js'
import { heatOf } from './kiln.js'
import { attributesOfLevel } from './level.js'

function presentStudio(studio: Studio, scope: Scope): Catalogue['studios'][number] {
  return {
    uid: studio.uid,
    slug: studio.slug,
    name: studio.name,
    timeZone: studio.timeZone,
    temperatureUnit: studio.temperatureUnit,
    archived: studio.archivedAt !== null,
    abilities: abilitiesFor(scope, { studioId: studio.id }),
  }
}

function presentLevel(level: Level, uids: ReadonlyMap<number, string>): CatalogueLevel {
  return {
    uid: level.uid,
    factor: level.factor,
    studio: level.studioId === null ? null : (uids.get(level.studioId) ?? null),
    code: level.code,
    name: level.name,
    attributes: attributesOfLevel(level),
    archived: level.archivedAt !== null,
  }
}

/** Everything that the load sheet and the filters choose from. `next` is by kiln id. */
export function presentCatalogue(
  rows: { studios: Studio[]; kilns: Kiln[]; levels: Level[]; next: ReadonlyMap<number, number> },
  scope: Scope,
): Catalogue {
  const uids = new Map(rows.studios.map(({ id, uid }) => [id, uid]))
  return {
    studios: rows.studios.map((studio) => presentStudio(studio, scope)),
    kilns: rows.kilns.map((kiln) => ({
      uid: kiln.uid,
      name: kiln.name,
      studio: uids.get(kiln.studioId) ?? '',
      litres: kiln.litres,
      heat: heatOf(kiln),
      nextNumber: rows.next.get(kiln.id) ?? null,
      archived: kiln.archivedAt !== null,
    })),
    levels: rows.levels.map((level) => presentLevel(level, uids)),
  }
}
