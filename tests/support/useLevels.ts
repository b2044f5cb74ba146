import { v7 } from 'uuid'
import { Firing, Lot, LotLevel } from '../../server/models/index.js'
import type { Studio } from '../../server/models/index.js'
import { makeKiln } from './factories.js'

/** One firing of the programme with two lots: one with the glaze in its column and again in a row, one with the row alone. */
export async function useLevels(
  studio: Studio,
  ids: { clayBodyId: number; glazeId: number; programmeId: number },
) {
  const kiln = await makeKiln({ studio })
  const { networkId, id: studioId } = studio
  const firing = await Firing.create({
    networkId,
    studioId,
    kilnId: kiln.id,
    uid: v7(),
    kind: 'glaze',
    localDate: '2026-03-04',
    pieces: 20,
    kilnNumber: 41,
    programmeId: ids.programmeId,
  })
  for (const [position, glazeId] of [ids.glazeId, null].entries()) {
    const lot = await Lot.create({
      networkId,
      studioId,
      firingId: firing.id,
      uid: v7(),
      position,
      pieces: 10,
      clayBodyId: ids.clayBodyId,
      glazeId,
    })
    await LotLevel.create({ networkId, lotId: lot.id, factor: 'glaze', levelId: ids.glazeId })
  }
  return { kiln }
}
