/**
 * What one reported firing adds to the roll-ups of losses: pure, so that the same arithmetic moves
 * them with a revision and makes them anew.
 *
 * A row is a cell (kiln × kind × local month), a slice (factor and level) and a family:
 * - `fault` '' holds the slice's denominators (G, Σm, Σm² over pieces fired and looked at), the sums of
 *   every measure over all faults (Σy, Σmy, Σy²) and the counts that no rate is over.
 * - `fault` of a node holds Σy, Σmy, Σy² alone: any mention of it or of a node below it, on lots that
 *   could show it. m is that of the node's risk group.
 * - `fault` '@' + a risk group holds how the denominators of its faults *differ* from the slice's own:
 *   ΔG, ΣΔm, ΣΔm². Most lots rule nothing out and had nothing turned away, so most of these rows do not
 *   exist. Rejected: denominators in every row of a fault (11 times the rows, for a fault is rarely
 *   there and its denominator always), and one row a measure (2.3 times).
 *
 * Slices: factor '' level 0 is the whole firing; a factor with a level is the firing's pieces of that
 * level; a factor with level 0 is its pieces for which the factor is recorded at all (a lot with two
 * glazes counts once); `REFIRED` is the pieces that had been fired before, which are in no other slice:
 * first-pass rates leave them out. Firings that failed as a whole are in: these are totals.
 *
 * Sums may be added over kilns, months and studios, not over levels, since a firing holds several.
 */
import type { LossOutcome, LotCounts, Measure } from './counts.js'
import { MEASURES, eventsFor, isEvent, piecesFor } from './counts.js'
import { FAULT_RULES, RISK_GROUPS, faultRule, lotAtRisk, overOffered, riskGroup, withAncestors } from './faults/index.js'
import type { RecordedLot, RiskGroup } from './faults/index.js'
import { FIRING_KINDS } from './kinds.js'
import type { FiringKind } from './kinds.js'

/** Factor of the slice of pieces that had been fired before. */
export const REFIRED = '@refired'

export interface LevelOfFactor {
  factor: string
  levelId: number
}

export interface RollupLoss {
  fault: string
  also: readonly string[]
  outcome: LossOutcome
  pieces: number
}

export interface RollupLot extends LotCounts, RecordedLot {
  levels: readonly LevelOfFactor[]
  losses: readonly RollupLoss[]
}

export interface RollupFiring {
  studioId: number
  kilnId: number
  kind: FiringKind
  /** First day of the local month. */
  month: string
  /** Levels of firing factors. */
  levels: readonly LevelOfFactor[]
  lots: readonly RollupLot[]
}

/** Columns of sums, in the order of `sums` of a row. */
export const SUM_COLUMNS = [
  'firings', 'units', 'units2',
  'loss', 'loss_units', 'loss2',
  'waste', 'waste_units', 'waste2',
  'blemish', 'blemish_units', 'blemish2',
  'offered', 'turned_away', 'undecided', 'not_looked_at',
] as const

export interface RollupRow {
  studioId: number
  kilnId: number
  kind: FiringKind
  month: string
  factor: string
  levelId: number
  fault: string
  sums: number[]
}

/** Where the three sums of a measure begin. */
const FIRST_OF = { loss: 3, waste: 6, blemish: 9 } as const satisfies Record<Measure, number>

/** Rows by their key; what several firings add to the same row is summed. */
export type Rollup = Map<string, RollupRow>

type Slice = Map<string, number[]>

/** Adds a firing to the roll-up, or takes it away (sign −1). */
export function addFiring(rollup: Rollup, firing: RollupFiring, sign: 1 | -1 = 1): void {
  const put = (factor: string, levelId: number, slice: Slice): void => {
    for (const [fault, sums] of slice) add(rollup, firing, { factor, levelId, fault }, sums, sign)
  }
  const whole = sliceOf(firing.kind, firing.lots)
  put('', 0, whole)
  for (const { factor, levelId } of firing.levels) {
    put(factor, levelId, whole)
    put(factor, 0, denominators(firing.lots))
  }
  for (const [factor, byLevel] of lotsByLevel(firing.lots)) {
    put(factor, 0, denominators([...new Set([...byLevel.values()].flat())]))
    for (const [levelId, lots] of byLevel) put(factor, levelId, sliceOf(firing.kind, lots))
  }
  put(REFIRED, 0, new Map([['', baseSums(firing.lots.filter((lot) => lot.refireCount > 0))]]))
}

function lotsByLevel(lots: readonly RollupLot[]): Map<string, Map<number, RollupLot[]>> {
  const factors = new Map<string, Map<number, RollupLot[]>>()
  for (const lot of lots) {
    for (const { factor, levelId } of lot.levels) {
      const byLevel = factors.get(factor) ?? new Map<number, RollupLot[]>()
      factors.set(factor, byLevel)
      const held = byLevel.get(levelId)
      if (held) held.push(lot)
      else byLevel.set(levelId, [lot])
    }
  }
  return factors
}

function firstPass(lots: readonly RollupLot[]): RollupLot[] {
  return lots.filter((lot) => lot.refireCount === 0)
}

function denominators(lots: readonly RollupLot[]): Slice {
  return new Map([['', baseSums(firstPass(lots))]])
}

function noSums(): number[] {
  return new Array<number>(SUM_COLUMNS.length).fill(0)
}

function baseSums(lots: readonly RollupLot[]): number[] {
  const sums = noSums()
  const units = lots.reduce((sum, lot) => sum + piecesFor(lot), 0)
  sums.splice(0, 3, units > 0 ? 1 : 0, units, units * units)
  for (const measure of MEASURES) {
    const events = lots.reduce((sum, lot) => sum + eventsFor(lot, measure), 0)
    sums.splice(FIRST_OF[measure], 3, events, events * units, events * events)
  }
  const of = (count: keyof LotCounts): number => lots.reduce((sum, lot) => sum + lot[count], 0)
  sums.splice(12, 4, of('pieces'), of('turnedAway'), of('undecided'), of('notLookedAt'))
  return sums
}

/** Groups that hold a fault which can be seen in a firing of the kind. */
const groupsOf = new Map<FiringKind, RiskGroup[]>(
  FIRING_KINDS.map((kind) => [
    kind,
    RISK_GROUPS.filter((group) =>
      FAULT_RULES.some((rule) => riskGroup(rule.id) === group && rule.seenIn.includes(kind)),
    ),
  ]),
)

/** The families of one slice of one firing. */
function sliceOf(kind: FiringKind, lots: readonly RollupLot[]): Slice {
  const base = baseSums(firstPass(lots))
  const slice: Slice = new Map([['', base]])
  const unitsOf = new Map<RiskGroup, number>()
  for (const group of groupsOf.get(kind) ?? []) {
    const over = group.overOffered ? 'offered' : 'fired'
    const units = lots.reduce((sum, lot) => sum + (lotAtRisk(group.rule, lot) ? piecesFor(lot, over) : 0), 0)
    unitsOf.set(group, units)
    if (units === base[1]) continue
    const sums = noSums()
    const own = [units > 0 ? 1 : 0, units, units * units]
    sums.splice(0, 3, ...own.map((sum, i) => sum - (base[i] as number)))
    slice.set(groupFault(group), sums)
  }
  for (const [node, events] of eventsByNode(kind, lots)) {
    const units = unitsOf.get(riskGroup(node) as RiskGroup) ?? 0
    const sums = noSums()
    for (const measure of MEASURES) {
      const y = events[measure]
      sums.splice(FIRST_OF[measure], 3, y, y * units, y * y)
    }
    slice.set(node, sums)
  }
  return slice
}

/** The `fault` of the rows that hold a group's differences. */
export function groupFault(group: RiskGroup): string {
  return `@${group.id}`
}

function eventsByNode(kind: FiringKind, lots: readonly RollupLot[]): Map<string, Record<Measure, number>> {
  const nodes = new Map<string, Record<Measure, number>>()
  for (const lot of lots) {
    for (const loss of lot.losses) {
      const mentioned = new Set([loss.fault, ...loss.also].flatMap(withAncestors))
      for (const node of mentioned) {
        const rule = faultRule(node)
        if (!rule?.seenIn.includes(kind) || !lotAtRisk(rule, lot)) continue
        if (loss.outcome === 'turned-away' && !overOffered(rule)) continue
        const events = nodes.get(node) ?? { loss: 0, waste: 0, blemish: 0 }
        nodes.set(node, events)
        for (const measure of MEASURES) if (isEvent(loss.outcome, measure)) events[measure] += loss.pieces
      }
    }
  }
  return nodes
}

/** An entry that is nought everywhere leaves no row. */
function add(
  rollup: Rollup,
  { studioId, kilnId, kind, month }: RollupFiring,
  at: { factor: string; levelId: number; fault: string },
  sums: readonly number[],
  sign: 1 | -1,
): void {
  if (sums.every((sum) => sum === 0)) return
  const key = `${kilnId}|${kind}|${at.factor}|${at.fault}|${month}|${at.levelId}`
  let row = rollup.get(key)
  if (!row) {
    row = { studioId, kilnId, kind, month, ...at, sums: noSums() }
    rollup.set(key, row)
  }
  for (let i = 0; i < sums.length; i += 1) row.sums[i] = (row.sums[i] as number) + sign * (sums[i] as number)
}

/** Sums of a set of firings for one measure, as `clusteredRateFromSums` takes them. */
export interface MeasureSums {
  G: number
  sumUnits: number
  sumEvents: number
  sumUnits2: number
  sumUnitsEvents: number
  sumEvents2: number
}

/**
 * Sums of one measure from the families of a slice (each summed over kilns, months and studios).
 * @param byFault sums by family; a missing one is nought
 * @param fault a node of the tree, or null for all faults
 */
export function measureSums(byFault: ReadonlyMap<string, readonly number[]>, fault: string | null, measure: Measure): MeasureSums {
  const base = byFault.get('') ?? noSums()
  const group = fault === null ? undefined : riskGroup(fault)
  const differs = (group && byFault.get(groupFault(group))) ?? noSums()
  const events = byFault.get(fault ?? '') ?? noSums()
  const unit = (i: number): number => (base[i] as number) + (differs[i] as number)
  const event = (i: number): number => events[FIRST_OF[measure] + i] as number
  return {
    G: unit(0),
    sumUnits: unit(1),
    sumUnits2: unit(2),
    sumEvents: event(0),
    sumUnitsEvents: event(1),
    sumEvents2: event(2),
  }
}

/** The families that the rates of a fault are made of. */
export function familiesOf(fault: string | null): string[] {
  const group = fault === null ? undefined : riskGroup(fault)
  return fault === null || !group ? [''] : ['', groupFault(group), fault]
}

/** Counts of a slice's own pieces from its sums of family ''. */
export function countsOf(sums: readonly number[] | undefined): LotCounts {
  const at = (i: number): number => sums?.[i] ?? 0
  return {
    pieces: at(12),
    turnedAway: at(13),
    seconds: at(FIRST_OF.blemish),
    refires: at(FIRST_OF.loss) - at(FIRST_OF.waste),
    wasters: at(FIRST_OF.waste),
    undecided: at(14),
    notLookedAt: at(15),
  }
}
