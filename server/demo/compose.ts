import type { PackBody, ReportBody } from '../contract/firings.js'
import type { WholeFiring, WholeRevision } from '../commands/writeFirings.js'
import type { DemoFiring, DemoLot, DemoReport, DemoSending } from './types.js'

/** What keys of the demo became in a database. */
export interface DemoKeys {
  /** uid of a kiln by its key. */
  kiln(key: string): string
  /** uid of a level by factor and key. */
  level(factor: string, key: string): string
  /** Inner id of a person by e-mail address. */
  person(email: string): number
}

/** A demo firing as the revisions that the app would have been sent. */
export function composeFiring(firing: DemoFiring, keys: DemoKeys): WholeFiring {
  const revisions: WholeRevision[] = [
    revision(firing.pack, keys, (deviceTime) => ({
      kind: 'pack',
      base: 0,
      deviceTime,
      pack: packOf(firing, keys),
    })),
  ]
  const { report, amend } = firing
  if (report) {
    revisions.push(
      revision(report, keys, (deviceTime) => ({
        kind: 'report',
        base: 1,
        deviceTime,
        report: reportOf(report),
      })),
    )
  }
  if (amend) {
    const { reason } = amend
    revisions.push(
      revision(amend, keys, (deviceTime) => ({
        kind: 'amend',
        base: 2,
        deviceTime,
        report: reportOf(amend),
        reason,
      })),
    )
  }
  return { uid: firing.uid, revisions }
}

function revision(
  sending: DemoSending,
  keys: DemoKeys,
  input: (deviceTime: string) => WholeRevision['input'],
): WholeRevision {
  return {
    uid: sending.revision,
    authorId: keys.person(sending.by),
    at: new Date(sending.at),
    input: input(sending.at),
  }
}

function packOf(firing: DemoFiring, keys: DemoKeys): PackBody {
  return {
    kiln: keys.kiln(firing.kiln),
    kind: firing.kind,
    programme: firing.programme === null ? null : keys.level('programme', firing.programme),
    cone: firing.cone as PackBody['cone'],
    localDate: firing.localDate,
    kilnNumber: firing.kilnNumber,
    pieces: firing.pieces,
    about: firing.about,
    levels: firing.cooling === null ? {} : { cooling: keys.level('cooling', firing.cooling) },
    note: firing.note,
    rest: firing.rest,
    lots: firing.lots.map((lot) => lotOf(lot, keys)),
    turnedAway: firing.turnedAway,
  }
}

function lotOf({ levels, ...lot }: DemoLot, keys: DemoKeys): PackBody['lots'][number] {
  const uids = Object.entries(levels).map(([factor, key]) => [
    factor,
    Array.isArray(key) ? key.map((each) => keys.level(factor, each)) : keys.level(factor, key),
  ])
  return {
    ...lot,
    levels: Object.fromEntries(uids) as PackBody['lots'][number]['levels'],
    note: null,
  }
}

function reportOf({
  openedAt,
  openingTemperatureC,
  wholeLoadFailed,
  lots,
  note,
}: DemoReport): ReportBody {
  return {
    openedAt,
    openingTemperatureC,
    wholeLoadFailed,
    lots: lots.map(({ losses, ...lot }) => ({
      ...lot,
      losses: losses.map((loss) => ({ ...loss, features: {} })),
    })),
    note,
  }
}
