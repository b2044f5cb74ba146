import { z } from 'zod'
import { HEATS } from '../contract/catalogue.js'
import type { KilnView } from '../contract/catalogue.js'
import type { Kiln } from '../models/index.js'
import { abilitiesFor } from '../policies/index.js'
import type { Scope } from '../policies/index.js'

const heat = z.enum(HEATS).catch('other')

/** How the kiln is heated; what an import wrote that is no such word is "other". */
export const heatOf = (kiln: Pick<Kiln, 'heat'>) => heat.parse(kiln.heat)

/** A kiln with its studio. */
export function presentKiln(
  kiln: Kiln,
  studio: { uid: string; name: string },
  scope: Scope,
): KilnView {
  return {
    uid: kiln.uid,
    name: kiln.name,
    studio: { uid: studio.uid, name: studio.name },
    litres: kiln.litres,
    heat: heatOf(kiln),
    shelves: kiln.shelves,
    note: kiln.note,
    archivedAt: kiln.archivedAt?.toISOString() ?? null,
    abilities: abilitiesFor(scope, { studioId: kiln.studioId }, ['kilns.edit', 'firings.pack']),
  }
}
