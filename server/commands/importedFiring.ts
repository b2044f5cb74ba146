import { v7 } from 'uuid'
import type { PackBody, ReportBody } from '../contract/firings.js'
import type { PlannedFiring, PlannedLot } from '../imports/planImport.js'
import { factor as factorOf } from '../shared/factors.js'
import type { ImportUids } from './importNames.js'
import type { WholeFiring } from './writeFirings.js'

/** A firing of a sheet as the app would have been sent it: a report of a load that was never packed here. */
export function importedFiring(firing: PlannedFiring, uids: ImportUids, at: Date): WholeFiring {
  const lots = firing.lots.map((lot) => ({ ...lot, uid: v7() }))
  const pack = packOf(firing, lots, uids)
  const report = reportOf(firing, lots, pack.rest)
  return {
    uid: v7(),
    revisions: [
      {
        uid: v7(),
        authorId: null,
        at,
        input: { kind: 'report', base: 0, deviceTime: null, pack, report },
      },
    ],
  }
}

type Lot = PlannedLot & { uid: string }

function packOf(firing: PlannedFiring, lots: readonly Lot[], uids: ImportUids): PackBody {
  const uidOf = (place: number): string => uids.levels[place] ?? ''
  const { programme, ...levels } = firing.levels
  return {
    kiln: uids.kiln(firing.studio, firing.kiln),
    kind: firing.kind,
    programme: programme === undefined ? null : uidOf(programme),
    cone: firing.cone,
    localDate: firing.date,
    kilnNumber: null,
    pieces: lots.reduce((sum, { row }) => sum + row.pieces, 0),
    about: false,
    levels: Object.fromEntries(
      Object.entries(levels).map(([factor, place]) => [factor, uidOf(place)]),
    ),
    note: firing.number === '' ? null : `Imported: ${firing.number}`,
    // A sheet describes every piece: the rest is there, and empty.
    rest: v7(),
    lots: lots.map((lot) => lotOf(lot, uidOf)),
    turnedAway: lots.flatMap(({ uid, row }) =>
      // Turned away is found cracked before the firing; a sheet says no more.
      row.turnedAway === 0
        ? []
        : [{ uid: v7(), lot: uid, fault: 'crack-not-named', pieces: row.turnedAway }],
    ),
  }
}

function lotOf(
  { uid, row, levels }: Lot,
  uidOf: (place: number) => string,
): PackBody['lots'][number] {
  const named = Object.entries(levels).map(([factor, places]) => {
    const found = places.map(uidOf)
    return [factor, factorOf(factor)?.several ? found : found[0]]
  })
  return {
    uid,
    pieces: row.pieces,
    levels: Object.fromEntries(named) as PackBody['lots'][number]['levels'],
    glazeOverlap: null,
    refireCount: row.refireCount,
    maker: null,
    note: null,
  }
}

function reportOf(
  { openingTemperatureC }: PlannedFiring,
  lots: readonly Lot[],
  rest: string,
): ReportBody {
  const reported: ReportBody['lots'] = lots.map(({ uid, row }) => ({
    lot: uid,
    notLookedAt: row.notLookedAt,
    losses: row.losses.map(({ fault, pieces }) => ({
      uid: v7(),
      fault,
      also: [],
      outcome: 'waster',
      pieces,
      neighbour: false,
      features: {},
    })),
  }))
  return {
    openedAt: null,
    openingTemperatureC,
    wholeLoadFailed: null,
    lots: [...reported, { lot: rest, notLookedAt: 0, losses: [] }],
    note: null,
  }
}
