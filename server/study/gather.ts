import type { StrataRows } from '../statistics/strata.js'
import type { Panel } from './atRisk.js'
import { codeAt, exposure, type FactorView } from './factorView.js'

/** What a comparison is made of. */
export interface GatherInput {
  panel: Panel
  view: FactorView
  /** By row of the panel. */
  events: Float64Array
  /** What the mix of lots leads one to expect, by row, up to a constant for a stratum. */
  expected?: Float64Array | undefined
  scratch: Scratch
}

/** Arrays that are filled anew for every comparison; as long as the longest panel. */
export interface Scratch {
  starts: Int32Array
  units: Float64Array
  events: Float64Array
  exposed: Uint8Array
  represents: Float64Array
  explained: Float64Array
}

/** Scratch for panels of up to `rows` rows. */
export function makeScratch(rows: number): Scratch {
  return {
    starts: new Int32Array(rows + 1),
    units: new Float64Array(rows),
    events: new Float64Array(rows),
    exposed: new Uint8Array(rows),
    represents: new Float64Array(rows),
    explained: new Float64Array(rows),
  }
}

/** Copies the recorded rows of some strata into the scratch arrays, told apart by one level. */
export function gather(
  { panel, view, events, expected, scratch }: GatherInput,
  level: number,
  strata: readonly number[],
): StrataRows {
  const { units, exposed, represents, starts } = scratch
  const standsFor = expected ?? panel.represents
  let next = 0
  for (let place = 0; place < strata.length; place += 1) {
    const g = strata[place] as number
    const from = next
    for (let i = panel.starts[g] as number; i < (panel.starts[g + 1] as number); i += 1) {
      const code = codeAt(view, i)
      if (code === 0) continue
      const side = exposure(view, code, level)
      if (side === -1) continue
      units[next] = panel.units[i] as number
      scratch.events[next] = events[i] as number
      exposed[next] = side
      if (standsFor !== null) represents[next] = standsFor[i] as number
      next += 1
    }
    if (expected !== undefined) explain(scratch, from, next)
    starts[place + 1] = next
  }
  return {
    strata: strata.length,
    starts,
    units,
    events: scratch.events,
    exposed,
    represents: standsFor === null ? undefined : represents,
    explained: expected === undefined ? undefined : scratch.explained,
  }
}

/**
 * Scales the expectations of a stratum to its pieces, and takes as explained what they shift between its rows:
 * Y·(E/ΣE − m/M). Both add up to what they should, so that nothing but the mix is taken away.
 */
function explain(
  { represents, explained, units, events }: Scratch,
  from: number,
  to: number,
): void {
  let E = 0
  let M = 0
  let Y = 0
  for (let i = from; i < to; i += 1) {
    E += represents[i] as number
    M += units[i] as number
    Y += events[i] as number
  }
  for (let i = from; i < to; i += 1) {
    const share = E > 0 ? (represents[i] as number) / E : (units[i] as number) / M
    explained[i] = Y * (share - (units[i] as number) / M)
    represents[i] = M * share
  }
}
