import type { StudioView } from '../contract/catalogue.js'
import type { Ability } from '../contract/roles.js'
import type { Studio } from '../models/index.js'
import { abilitiesFor } from '../policies/index.js'
import type { Scope } from '../policies/index.js'

const ASKED: readonly Ability[] = [
  'studios.edit',
  'kilns.edit',
  'catalogue.edit',
  'people.edit',
  'firings.pack',
  'firings.report',
]

/** A studio for those who may read its firings; `kilns` is how many it has in use. */
export function presentStudio(studio: Studio, kilns: number, scope: Scope): StudioView {
  return {
    uid: studio.uid,
    slug: studio.slug,
    name: studio.name,
    timeZone: studio.timeZone,
    currency: studio.currency,
    temperatureUnit: studio.temperatureUnit,
    lengthUnit: studio.lengthUnit,
    weekStart: studio.weekStart,
    appearance: studio.appearance,
    letter: studio.letter,
    kilns,
    archivedAt: studio.archivedAt?.toISOString() ?? null,
    abilities: abilitiesFor(scope, { studioId: studio.id }, ASKED),
  }
}
