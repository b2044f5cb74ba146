/**
 * Can these counts be? What a load and its report must fulfil beside their shape; the same beside
 * the fields of the client and at the server's door. Answers are messages by field path, all
 * problems at once; an empty object says that all is well.
 */
import { failedExceeds, lotsExceed, lotsMissing, turnedAwayExceeds } from './sentences/counts.js'

export type FieldMessages = Record<string, string>

export interface LoadToCheck {
  pieces: number
  rest: string
  lots: readonly { uid: string; pieces: number }[]
  turnedAway: readonly { uid: string; lot: string; pieces: number }[]
}

export interface ReportToCheck {
  lots: readonly {
    lot: string
    notLookedAt: number
    losses: readonly { uid: string; pieces: number }[]
  }[]
}

const TWICE = 'Sent twice: every part needs a mark of its own.'
const NO_LOT = 'Not a lot of this firing.'

/** Says of each uid whether it came before. */
function seenBefore(): (uid: string) => boolean {
  const seen = new Set<string>()
  return (uid) => {
    const known = seen.has(uid)
    seen.add(uid)
    return known
  }
}

/** Pieces offered by lot and rest, by uid. A rest below nought is one of no pieces. */
function offeredByLot(load: LoadToCheck): Map<string, number> {
  const described = load.lots.reduce((sum, lot) => sum + lot.pieces, 0)
  return new Map([
    ...load.lots.map((lot) => [lot.uid, lot.pieces] as const),
    [load.rest, Math.max(0, load.pieces - described)],
  ])
}

function turnedAwayByLot(load: LoadToCheck): Map<string, number> {
  const away = new Map<string, number>()
  for (const { lot, pieces } of load.turnedAway) away.set(lot, (away.get(lot) ?? 0) + pieces)
  return away
}

/** Lots within the total, every uid once, pieces turned away within their lot. */
export function checkLoad(load: LoadToCheck): FieldMessages {
  const fields: FieldMessages = {}
  const described = load.lots.reduce((sum, lot) => sum + lot.pieces, 0)
  if (described > load.pieces) fields.pieces = lotsExceed(described, load.pieces)
  const isLotTwice = seenBefore()
  isLotTwice(load.rest)
  load.lots.forEach((lot, i) => {
    if (isLotTwice(lot.uid)) fields[`lots.${i}.uid`] = TWICE
  })
  const offered = offeredByLot(load)
  const away = turnedAwayByLot(load)
  const isAwayTwice = seenBefore()
  load.turnedAway.forEach((entry, i) => {
    const at = `turnedAway.${i}`
    const [pieces, all] = [offered.get(entry.lot), away.get(entry.lot) ?? 0]
    if (isAwayTwice(entry.uid)) fields[`${at}.uid`] = TWICE
    if (pieces === undefined) fields[`${at}.lot`] = NO_LOT
    else if (all > pieces) fields[`${at}.pieces`] = turnedAwayExceeds(all, pieces)
  })
  return fields
}

/** Every lot and the rest once, never more failed than were fired and looked at, every uid once. */
export function checkReport(load: LoadToCheck, report: ReportToCheck): FieldMessages {
  const fields: FieldMessages = {}
  const offered = offeredByLot(load)
  const away = turnedAwayByLot(load)
  const isLotTwice = seenBefore()
  const isLossTwice = seenBefore()
  load.turnedAway.forEach(({ uid }) => isLossTwice(uid))
  report.lots.forEach((lot, i) => {
    const at = `lots.${i}`
    const pieces = offered.get(lot.lot)
    if (pieces === undefined) fields[`${at}.lot`] = NO_LOT
    if (isLotTwice(lot.lot)) fields[`${at}.lot`] = TWICE
    lot.losses.forEach((loss, j) => {
      if (isLossTwice(loss.uid)) fields[`${at}.losses.${j}.uid`] = TWICE
    })
    const fired = (pieces ?? 0) - (away.get(lot.lot) ?? 0)
    const failed = lot.losses.reduce((sum, loss) => sum + loss.pieces, 0)
    if (pieces !== undefined && failed + lot.notLookedAt > fired) {
      fields[failed > 0 ? `${at}.losses` : `${at}.notLookedAt`] = failedExceeds(
        failed,
        lot.notLookedAt,
        Math.max(0, fired),
      )
    }
  })
  const reported = new Set(report.lots.map(({ lot }) => lot))
  const missing = load.lots.flatMap((lot, i) => (reported.has(lot.uid) ? [] : [i + 1]))
  // A rest without pieces has nothing to say.
  const restMissing = !reported.has(load.rest) && (offered.get(load.rest) ?? 0) > 0
  if (missing.length > 0 || restMissing) fields.lots = lotsMissing(missing, restMissing)
  return fields
}
