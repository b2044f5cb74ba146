import { FIRING_KINDS, type FiringKind } from '../shared/kinds.js'
import { compareText, type CodeColumn, type Codes, type Dictionary } from './levelColumn.js'
import { REST_PIECE, type FactorColumn, type StudyFirings, type StudyTable } from './table.js'
import { levelsOfKey, type RawColumns } from './tableBuilder.js'
import type { StudyFactor } from './types.js'

/**
 * Puts the columns into an order that depends on what they hold and not on the order of arrival: names by code unit,
 * rows by firing, then part, counts, levels and losses. The same rows then give the same sums, to the last bit,
 * and the same seeded draws. Described pieces of a rest without any sound one among them stay out.
 */
export function arrangeTable(raw: RawColumns): StudyTable {
  const firingNames = raw.firings.names.sorted()
  const place = (row: number): number => (firingNames.remap[raw.firing.get(row) + 1] as number) - 1
  const renamed = raw.factors.map(({ factor, codes, names }) => ({
    factor,
    codes,
    ...sortedLevels(factor, names),
  }))
  const formings = raw.formings.sorted()
  const order = rowOrder(raw, place, firingNames.names.length, [
    { codes: raw.forming, remap: formings.remap },
    ...renamed,
  ])
  const start = new Int32Array(firingNames.names.length + 1)
  for (const row of order) start[place(row) + 1] = (start[place(row) + 1] as number) + 1
  for (let f = 0; f < firingNames.names.length; f += 1)
    start[f + 1] = (start[f + 1] as number) + (start[f] as number)
  return {
    rows: order.length,
    offered: raw.offered.arranged(order),
    fired: raw.fired.arranged(order),
    refireCount: raw.refireCount.arranged(order),
    part: Uint8Array.from(raw.part.arranged(order)),
    glaze: Uint8Array.from(raw.glaze.arranged(order)),
    joint: Uint8Array.from(raw.joint.arranged(order)),
    forming: raw.forming.arranged(order, formings.remap),
    formings: formings.names,
    standsFor:
      raw.standsFor.size > 0
        ? Float64Array.from(order, (row) => raw.standsFor.get(row) ?? 1)
        : null,
    factors: renamed.map(({ factor, codes, levels, sets, remap }) => ({
      factor,
      levels,
      sets,
      codes: codes.arranged(order, remap),
    })),
    firings: arrangeFirings(raw, firingNames.names, firingNames.remap, start),
    losses: arrangeLosses(raw, order),
    leftOut: raw.leftOut,
  }
}

/** Rows of a described rest without a sound piece are dropped; the others in their order. */
function rowOrder(
  raw: RawColumns,
  place: (row: number) => number,
  firings: number,
  coded: readonly { codes: CodeColumn; remap: Uint32Array }[],
): Int32Array {
  const signature = lossSignatures(raw)
  const soundRest = new Uint8Array(firings)
  for (let row = 0; row < raw.firing.length; row += 1) {
    if (raw.part.get(row) === REST_PIECE && signature[row] === 0) soundRest[place(row)] = 1
  }
  const kept: number[] = []
  for (let row = 0; row < raw.firing.length; row += 1) {
    if (raw.part.get(row) !== REST_PIECE || soundRest[place(row)] === 1) kept.push(row)
  }
  const numbers = [raw.part, raw.offered, raw.fired, raw.refireCount, raw.glaze, raw.joint]
  return Int32Array.from(kept).sort((a, b) => {
    const firing = place(a) - place(b)
    if (firing !== 0) return firing
    for (const column of numbers) {
      const difference = column.get(a) - column.get(b)
      if (difference !== 0) return difference
    }
    for (const { codes, remap } of coded) {
      const difference = (remap[codes.get(a)] as number) - (remap[codes.get(b)] as number)
      if (difference !== 0) return difference
    }
    const stands = (raw.standsFor.get(a) ?? 1) - (raw.standsFor.get(b) ?? 1)
    // Rows that agree in all this are the same to the study, whichever comes first.
    return stands !== 0 ? stands : (signature[a] as number) - (signature[b] as number)
  })
}

/** A number for the losses of every row, the same in whatever order they came; 0 = none. */
function lossSignatures(raw: RawColumns): Float64Array {
  const out = new Float64Array(raw.firing.length)
  const sets = raw.faultSets.sorted()
  for (let i = 0; i < raw.lossRow.length; i += 1) {
    const set = sets.remap[raw.lossFaults.get(i) + 1] as number
    // Small whole numbers, so that the sum is exact in any order.
    const mixed = Math.imul(set * 2 + raw.lossBefore.get(i) + 1, 0x9e3779b1) >>> 0
    const row = raw.lossRow.get(i)
    out[row] = (out[row] as number) + (mixed % 1_000_003) * raw.lossPieces.get(i) + 1
  }
  return out
}

interface SortedLevels {
  levels: readonly string[]
  sets: readonly Int32Array[] | null
  remap: Uint32Array
}

function sortedLevels(factor: StudyFactor, names: Dictionary): SortedLevels {
  const { names: keys, remap } = names.sorted()
  if (!factor.several) return { levels: keys, sets: null, remap }
  const levels = [...new Set(keys.flatMap(levelsOfKey))].sort(compareText)
  const number = new Map(levels.map((level, index) => [level, index + 1]))
  const sets = keys.map((key) =>
    Int32Array.from(levelsOfKey(key), (level) => number.get(level) as number),
  )
  return { levels, sets: [new Int32Array(0), ...sets], remap }
}

function arrangeFirings(
  raw: RawColumns,
  names: readonly string[],
  remap: Uint32Array,
  start: Int32Array,
): StudyFirings {
  const order = new Int32Array(names.length)
  for (let old = 0; old < names.length; old += 1) order[(remap[old + 1] as number) - 1] = old
  const studios = raw.firings.studios.sorted()
  const studio = Uint32Array.from(
    order,
    (old) => (studios.remap[raw.firings.studio[old] as number] as number) - 1,
  )
  const kind = [...order].map((old) => raw.firings.kind[old] as FiringKind)
  return {
    count: names.length,
    names,
    start,
    studio,
    studios: studios.names,
    kind,
    ...groupsOf(studio, kind),
    factors: raw.firingFactors.map(({ factor, codes, names: levelNames }): FactorColumn => {
      const { levels, sets, remap: renamed } = sortedLevels(factor, levelNames)
      const arranged = Uint32Array.from(order, (old) => renamed[codes[old] as number] as number)
      return { factor, levels, sets, codes: arranged }
    }),
  }
}

/** Firings of the same studio and kind are compared with each other. */
function groupsOf(
  studio: Codes,
  kind: readonly FiringKind[],
): Pick<StudyFirings, 'byGroup' | 'groups'> {
  const group = kind.map(
    (one, f) => (studio[f] as number) * FIRING_KINDS.length + FIRING_KINDS.indexOf(one),
  )
  const byGroup = Int32Array.from(kind.keys()).sort(
    (a, b) => (group[a] as number) - (group[b] as number) || a - b,
  )
  const groups: number[] = []
  byGroup.forEach((f, place) => {
    if (place === 0 || group[f] !== group[byGroup[place - 1] as number]) groups.push(place)
  })
  return { byGroup, groups: Int32Array.from([...groups, byGroup.length]) }
}

function arrangeLosses(raw: RawColumns, order: Int32Array): StudyTable['losses'] {
  const placeOf = new Int32Array(raw.firing.length).fill(-1)
  order.forEach((row, index) => {
    placeOf[row] = index
  })
  const kept: number[] = []
  for (let i = 0; i < raw.lossRow.length; i += 1)
    if ((placeOf[raw.lossRow.get(i)] as number) >= 0) kept.push(i)
  const pick = Int32Array.from(kept)
  const sets = raw.faultSets.names.map(levelsOfKey)
  return {
    count: pick.length,
    row: pick.map((i) => placeOf[raw.lossRow.get(i)] as number),
    pieces: pick.map((i) => raw.lossPieces.get(i)),
    before: Uint8Array.from(pick, (i) => raw.lossBefore.get(i)),
    faults: Uint32Array.from(pick, (i) => raw.lossFaults.get(i)),
    faultSets: sets,
  }
}
