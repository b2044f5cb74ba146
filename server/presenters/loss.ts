import type { Coverage, Rate } from '../contract/common.js'
import type { LossRow } from '../contract/losses.js'
import { can } from '../policies/index.js'
import type { Scope } from '../policies/index.js'
import type { KilnCoverage } from '../queries/kilnCoverage.js'
import type { KilnOfLosses, LossCut, SumsByKey } from '../queries/lossSums.js'
import { FAULT_TREE, withDescendants } from '../shared/faults/index.js'
import { missingFirings } from '../shared/missingFirings.js'
import { monthsFrom } from '../shared/months.js'
import { presentRates } from './rate.js'

type Families = Map<string, number[]>

/**
 * Reported firings of all kinds against the kilns' own counters, and the loss rate if the missing
 * ones had been clean loads of the usual size, of this kind as often as those that are here.
 * @param recordedShare share of pieces for which a factor is recorded, or null
 */
export function presentCoverage(
  kilns: readonly KilnCoverage[],
  loss: Rate,
  recordedShare: number | null,
): Coverage {
  const reported = kilns.reduce((sum, kiln) => sum + kiln.reported, 0)
  const missing = kilns.reduce((sum, kiln) => sum + missingFirings(kiln, kiln.reported), 0)
  const counted = kilns.some(({ highest }) => highest !== null)
  const pieces = loss.pieces * (1 + (reported > 0 ? missing / reported : 0))
  return {
    reported,
    expected: counted ? reported + missing : null,
    rateIfMissingClean: counted && pieces > 0 ? loss.events / pieces : null,
    recordedShare,
  }
}

const MONTH_NAME = new Intl.DateTimeFormat('en-GB', {
  month: 'long',
  year: 'numeric',
  timeZone: 'UTC',
})

/** A row a month in time order; months without firings are there too. */
export function presentMonths(sums: SumsByKey, { from, to, fault, kind }: LossCut): LossRow[] {
  return monthsFrom(from, to).map((month) => ({
    key: month,
    label: MONTH_NAME.format(new Date(`${month}-01T00:00:00Z`)),
    uid: null,
    rates: presentRates(sums.get(month), fault, kind),
  }))
}

/** A row a kiln, or (summed over its kilns) a studio. */
export function presentPlaces(
  sums: SumsByKey,
  kilns: readonly KilnOfLosses[],
  by: 'kiln' | 'studio',
  { fault, kind }: LossCut,
): LossRow[] {
  const several = new Set(kilns.map(({ studioId }) => studioId)).size > 1
  const places = new Map<string, { label: string; families: Families }>()
  for (const kiln of kilns) {
    const uid = by === 'kiln' ? kiln.uid : kiln.studioUid
    const label =
      by === 'studio' ? kiln.studioName : several ? `${kiln.name}, ${kiln.studioName}` : kiln.name
    const place = places.get(uid) ?? { label, families: new Map<string, number[]>() }
    places.set(uid, place)
    addFamilies(place.families, sums.get(String(kiln.id)))
  }
  const rows = [...places].map(([uid, { label, families }]) => ({
    key: uid,
    label,
    uid,
    rates: presentRates(families, fault, kind),
  }))
  return byLostPieces(rows.sort(byLabel))
}

function addFamilies(into: Families, families: Families | undefined): void {
  for (const [family, sums] of families ?? []) {
    const before = into.get(family)
    into.set(family, before ? before.map((sum, i) => sum + (sums[i] as number)) : sums)
  }
}

/** A row a fault that was mentioned; faults below a coarser one count in it too, and it stands before them. */
export function presentFaults(families: Families | undefined, { fault, kind }: LossCut): LossRow[] {
  const nodes =
    fault === null ? FAULT_TREE : FAULT_TREE.filter(({ id }) => withDescendants(fault).includes(id))
  const rows = nodes.map(({ id, name }) => ({
    key: id,
    label: name,
    uid: null,
    rates: presentRates(families, id, kind),
  }))
  return byLostPieces(rows.filter(({ rates }) => rates.loss.events + rates.blemish.events > 0))
}

export interface LevelOfRow {
  id: number
  uid: string
  name: string
  studioId: number | null
}

/** A class is shown outside its studio only with this much behind it, so that no row is one person's work. */
const LEAST_OF_CLASS = { pieces: 5, firings: 3 }

/** A row a level of a factor. */
export function presentLevels(
  sums: SumsByKey,
  levels: readonly LevelOfRow[],
  factor: string,
  { fault, kind }: LossCut,
  scope: Scope,
): LossRow[] {
  const rows = levels.flatMap(({ id, uid, name, studioId }) => {
    const rates = presentRates(sums.get(String(id)), fault, kind)
    const thin =
      rates.loss.pieces < LEAST_OF_CLASS.pieces || rates.loss.firings < LEAST_OF_CLASS.firings
    const hidden = factor === 'class' && thin && !can(scope, 'firings.makers', { studioId })
    return hidden ? [] : [{ key: uid, label: name, uid, rates }]
  })
  return byLostPieces(rows.sort(byLabel))
}

/** Most lost pieces first, else as they were; what had no pieces at risk says nothing and is left out. */
function byLostPieces(rows: readonly LossRow[]): LossRow[] {
  return rows
    .filter(({ rates }) => rates.loss.note !== 'none')
    .sort((a, b) => b.rates.loss.events - a.rates.loss.events)
}

function byLabel(a: LossRow, b: LossRow): number {
  return a.label.localeCompare(b.label, 'en')
}
