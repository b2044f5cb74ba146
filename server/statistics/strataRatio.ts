import { tQuantile } from './distributions.js'
import type { StrataRows } from './strata.js'

export interface StrataRatio {
  ratio: number | null
  lower: number | null
  upper: number | null
  mixedStrata: number
  totals: {
    exposedUnits: number
    exposedEvents: number
    unexposedUnits: number
    unexposedEvents: number
  }
}

/** Running sums; one object for a whole test. */
interface Sums {
  R: number
  S: number
  mixedStrata: number
  exposedUnits: number
  exposedEvents: number
  unexposedUnits: number
  unexposedEvents: number
}

/**
 * Mantel–Haenszel ratio over the mixed strata, with limits by leaving out one stratum (or one row of a stratum) with
 * events at a time. Two passes: the sums, then what each part takes away from them.
 */
export function ratioWithLimits(
  rows: StrataRows,
  level: number,
  leaveOut: 'stratum' | 'row',
): StrataRatio {
  const sums: Sums = {
    R: 0,
    S: 0,
    mixedStrata: 0,
    exposedUnits: 0,
    exposedEvents: 0,
    unexposedUnits: 0,
    unexposedEvents: 0,
  }
  const strata: StratumParts = { n1: [], n0: [], a: [], c: [], g: [] }
  for (let g = 0; g < rows.strata; g += 1) addStratum(rows, g, sums, strata)
  const { mixedStrata, R, S, ...totals } = sums
  return { ...limits(rows, R, S, strata, level, leaveOut), mixedStrata, totals }
}

/** Counts of the mixed strata with events. */
interface StratumParts {
  n1: number[]
  n0: number[]
  a: number[]
  c: number[]
  g: number[]
}

function addStratum(rows: StrataRows, g: number, sums: Sums, strata: StratumParts): void {
  const { starts, events, exposed } = rows
  const counted = rows.represents ?? rows.units
  let n1 = 0
  let n0 = 0
  let a = 0
  let c = 0
  for (let i = starts[g] as number; i < (starts[g + 1] as number); i += 1) {
    if (exposed[i] === 1) {
      n1 += counted[i] as number
      a += events[i] as number
    } else {
      n0 += counted[i] as number
      c += events[i] as number
    }
  }
  if (n1 === 0 || n0 === 0) return
  sums.mixedStrata += 1
  sums.exposedUnits += n1
  sums.exposedEvents += a
  sums.unexposedUnits += n0
  sums.unexposedEvents += c
  if (a + c === 0) return
  sums.R += (a * n0) / (n1 + n0)
  sums.S += (c * n1) / (n1 + n0)
  strata.n1.push(n1)
  strata.n0.push(n0)
  strata.a.push(a)
  strata.c.push(c)
  strata.g.push(g)
}

/** Jackknife limits of the log ratio: se² = (G−1)/G·Σ(b₍g₎ − b)², t with G − 1; null when it rests on one part. */
function limits(
  rows: StrataRows,
  R: number,
  S: number,
  strata: StratumParts,
  level: number,
  leaveOut: 'stratum' | 'row',
): { ratio: number | null; lower: number | null; upper: number | null } {
  if (!(S > 0)) return { ratio: null, lower: null, upper: null }
  if (!(R > 0)) return { ratio: 0, lower: null, upper: null }
  const ratio = R / S
  const spread = new Spread(R, S)
  for (let k = 0; k < strata.g.length; k += 1) {
    const n1 = strata.n1[k] as number
    const n0 = strata.n0[k] as number
    const a = strata.a[k] as number
    const c = strata.c[k] as number
    const partR = (a * n0) / (n1 + n0)
    const partS = (c * n1) / (n1 + n0)
    if (leaveOut === 'stratum') spread.without(partR, partS)
    else leaveRowsOut(rows, strata.g[k] as number, { n1, n0, a, c, partR, partS }, spread)
  }
  const standardError = spread.standardError()
  if (standardError === null) return { ratio, lower: null, upper: null }
  const reach = Math.exp(tQuantile(1 - (1 - level) / 2, spread.G - 1) * standardError)
  return Number.isFinite(ratio * reach)
    ? { ratio, lower: ratio / reach, upper: ratio * reach }
    : { ratio, lower: null, upper: null }
}

function leaveRowsOut(
  rows: StrataRows,
  g: number,
  whole: { n1: number; n0: number; a: number; c: number; partR: number; partS: number },
  spread: Spread,
): void {
  const counted = rows.represents ?? rows.units
  for (let i = rows.starts[g] as number; i < (rows.starts[g + 1] as number); i += 1) {
    const units = counted[i] as number
    const events = rows.events[i] as number
    const isExposed = rows.exposed[i] === 1
    const n1 = whole.n1 - (isExposed ? units : 0)
    const n0 = whole.n0 - (isExposed ? 0 : units)
    const a = whole.a - (isExposed ? events : 0)
    const c = whole.c - (isExposed ? 0 : events)
    spread.without(whole.partR - (a * n0) / (n1 + n0), whole.partS - (c * n1) / (n1 + n0))
  }
}

/** Σ(b₍g₎ − b)² as the parts go by. */
class Spread {
  G = 0
  private squares = 0
  private finite = true
  private readonly b: number
  /** The last part that carries a side leaves only rounding behind, not a true 0. */
  private readonly nothing: number

  constructor(
    private readonly R: number,
    private readonly S: number,
  ) {
    this.b = Math.log(R / S)
    this.nothing = 1e-12 * Math.max(R, S)
  }

  without(partR: number, partS: number): void {
    this.G += 1
    const R = this.R - partR
    const S = this.S - partS
    if (R <= this.nothing || S <= this.nothing) this.finite = false
    else this.squares += (Math.log(R / S) - this.b) ** 2
  }

  standardError(): number | null {
    return this.finite && this.G >= 2 ? Math.sqrt(((this.G - 1) / this.G) * this.squares) : null
  }
}
