import { MEASURES, NO_COUNTS, addCounts, eventsFor, isEvent, piecesFor } from './counts.js'
import type { LotCounts, Measure } from './counts.js'
import {
  FAULT_RULES,
  RISK_GROUPS,
  faultRule,
  lotAtRisk,
  overOffered,
  riskGroup,
  withAncestors,
} from './faults/index.js'
import type { RiskGroup } from './faults/index.js'
import { FIRING_KINDS } from './kinds.js'
import type { FiringKind } from './kinds.js'
import { FIRST_OF, FIRST_OF_COUNTS, REFIRED, groupFault, noSums } from './lossRollup.js'
import type { Rollup, RollupFiring, RollupLot, Slice } from './lossRollup.js'

type Events = Record<Measure, number>

/** What a lot adds to every slice that it is in. */
interface CountedLot {
  lot: RollupLot
  /** Pieces at risk by group, in the order of the kind's groups. */
  units: number[]
  events: ReadonlyMap<string, Events>
}

/** Groups that hold a fault which can be seen in a firing of the kind. */
const GROUPS = Object.fromEntries(
  FIRING_KINDS.map((kind) => [
    kind,
    RISK_GROUPS.filter((group) =>
      FAULT_RULES.some((rule) => riskGroup(rule.id) === group && rule.seenIn.includes(kind)),
    ),
  ]),
) as Record<FiringKind, RiskGroup[]>

/** Adds a firing to the roll-up, or takes it away (sign −1). */
export function addFiring(rollup: Rollup, firing: RollupFiring, sign: 1 | -1 = 1): void {
  const { kind } = firing
  const lots = firing.lots.map((lot) => countLot(kind, lot))
  const put = (factor: string, levelId: number, slice: Slice): void => {
    rollup.add(firing, factor, levelId, slice, sign)
  }
  // Most levels of a lot are of that lot alone: its slice is summed once, not once a level.
  const known = new Map<string, Slice>()
  const sliceAt = (places: readonly number[]): Slice => {
    const key = places.join()
    const slice = known.get(key) ?? sliceOf(kind, lotsAt(lots, places))
    known.set(key, slice)
    return slice
  }
  const whole = sliceOf(kind, lots)
  put('', 0, whole)
  for (const { factor, levelId } of firing.levels) {
    put(factor, levelId, whole)
    put(factor, 0, denominators(lots))
  }
  for (const [factor, byLevel] of placesByLevel(firing.lots)) {
    put(factor, 0, denominators(lotsAt(lots, new Set([...byLevel.values()].flat()))))
    for (const [levelId, places] of byLevel) put(factor, levelId, sliceAt(places))
  }
  const refired = lots.filter(({ lot }) => lot.refireCount > 0)
  if (refired.length > 0) put(REFIRED, 0, new Map([['', baseSums(refired)]]))
}

function countLot(kind: FiringKind, lot: RollupLot): CountedLot {
  const units = GROUPS[kind].map(({ rule, overOffered: offered }) =>
    lotAtRisk(rule, lot) ? piecesFor(lot, offered ? 'offered' : 'fired') : 0,
  )
  return { lot, units, events: eventsByNode(kind, lot) }
}

function eventsByNode(kind: FiringKind, lot: RollupLot): Map<string, Events> {
  const nodes = new Map<string, Events>()
  for (const loss of lot.losses) {
    for (const node of new Set([loss.fault, ...loss.also].flatMap(withAncestors))) {
      const rule = faultRule(node)
      if (!rule?.seenIn.includes(kind) || !lotAtRisk(rule, lot)) continue
      if (loss.outcome === 'turned-away' && !overOffered(rule)) continue
      const events = nodes.get(node) ?? { loss: 0, waste: 0, blemish: 0 }
      nodes.set(node, events)
      for (const measure of MEASURES)
        if (isEvent(loss.outcome, measure)) events[measure] += loss.pieces
    }
  }
  return nodes
}

/** Places of the lots that hold a level, by factor and level. */
function placesByLevel(lots: readonly RollupLot[]): Map<string, Map<number, number[]>> {
  const factors = new Map<string, Map<number, number[]>>()
  lots.forEach((lot, place) => {
    for (const { factor, levelId } of lot.levels) {
      const byLevel = factors.get(factor) ?? new Map<number, number[]>()
      factors.set(factor, byLevel)
      const held = byLevel.get(levelId)
      if (held) held.push(place)
      else byLevel.set(levelId, [place])
    }
  })
  return factors
}

function lotsAt(lots: readonly CountedLot[], places: Iterable<number>): CountedLot[] {
  return Array.from(places, (place) => lots[place] as CountedLot)
}

function firstPass(lots: readonly CountedLot[]): CountedLot[] {
  return lots.filter(({ lot }) => lot.refireCount === 0)
}

function denominators(lots: readonly CountedLot[]): Slice {
  return new Map([['', baseSums(firstPass(lots))]])
}

/** Puts Σy, Σmy and Σy² of one firing in their places. */
function setEvents(sums: number[], measure: Measure, events: number, units: number): void {
  const at = FIRST_OF[measure]
  sums[at] = events
  sums[at + 1] = events * units
  sums[at + 2] = events * events
}

/** G, Σm and Σm² of one firing. */
const unitSums = (units: number): [number, number, number] => [
  units > 0 ? 1 : 0,
  units,
  units * units,
]

function baseSums(lots: readonly CountedLot[]): number[] {
  const sums = noSums()
  const counts = lots.reduce<LotCounts>((sum, { lot }) => addCounts(sum, lot), NO_COUNTS)
  const units = piecesFor(counts)
  sums.splice(0, 3, ...unitSums(units))
  for (const measure of MEASURES) setEvents(sums, measure, eventsFor(counts, measure), units)
  sums.splice(
    FIRST_OF_COUNTS,
    4,
    counts.pieces,
    counts.turnedAway,
    counts.undecided,
    counts.notLookedAt,
  )
  return sums
}

/** The families of one slice of one firing; what is nought is not there. */
function sliceOf(kind: FiringKind, lots: readonly CountedLot[]): Slice {
  const base = baseSums(firstPass(lots))
  const slice = new Map<string, number[]>()
  if (base.some((sum) => sum !== 0)) slice.set('', base)
  const unitsOf = new Map<RiskGroup, number>()
  GROUPS[kind].forEach((group, g) => {
    const units = lots.reduce((sum, lot) => sum + (lot.units[g] as number), 0)
    unitsOf.set(group, units)
    const shared = group.rule.needsRefire ? 0 : (base[1] as number)
    if (units === shared) return
    const without = unitSums(shared)
    const sums = noSums()
    unitSums(units).forEach((sum, i) => (sums[i] = sum - (without[i] as number)))
    slice.set(groupFault(group), sums)
  })
  for (const [node, events] of eventsOf(lots)) {
    const units = unitsOf.get(riskGroup(node) as RiskGroup) ?? 0
    const sums = noSums()
    for (const measure of MEASURES) setEvents(sums, measure, events[measure], units)
    slice.set(node, sums)
  }
  return slice
}

function eventsOf(lots: readonly CountedLot[]): ReadonlyMap<string, Events> {
  if (lots.length === 1) return (lots[0] as CountedLot).events
  const all = new Map<string, Events>()
  for (const { events } of lots) {
    for (const [node, { loss, waste, blemish }] of events) {
      const sum = all.get(node)
      all.set(node, {
        loss: loss + (sum?.loss ?? 0),
        waste: waste + (sum?.waste ?? 0),
        blemish: blemish + (sum?.blemish ?? 0),
      })
    }
  }
  return all
}
