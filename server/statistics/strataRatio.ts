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

/** Counts of one stratum; one object is filled again and again. */
interface Counted {
  n1: number
  n0: number
  a: number
  c: number
}

/**
 * Mantel–Haenszel ratio over the mixed strata, with limits by leaving out one stratum (or one row of
 * a stratum) with events at a time. Two passes over the rows: the sums, then what each part takes away
 * from them; counting twice is cheaper than keeping the counts.
 */
export function ratioWithLimits(
  rows: StrataRows,
  level: number,
  leaveOut: 'stratum' | 'row',
): StrataRatio {
  const totals = { exposedUnits: 0, exposedEvents: 0, unexposedUnits: 0, unexposedEvents: 0 }
  const one: Counted = { n1: 0, n0: 0, a: 0, c: 0 }
  let mixedStrata = 0
  let R = 0
  let S = 0
  for (let g = 0; g < rows.strata; g += 1) {
    if (!count(rows, g, one)) continue
    mixedStrata += 1
    totals.exposedUnits += one.n1
    totals.exposedEvents += one.a
    totals.unexposedUnits += one.n0
    totals.unexposedEvents += one.c
    R += partR(one)
    S += partS(one)
  }
  return { ...limits(rows, R, S, level, leaveOut), mixedStrata, totals }
}

/** Counts stratum g; false when it is not mixed. */
function count(
  { starts, units, represents, events, exposed }: StrataRows,
  g: number,
  into: Counted,
): boolean {
  const counted = represents ?? units
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
  into.n1 = n1
  into.n0 = n0
  into.a = a
  into.c = c
  return n1 > 0 && n0 > 0
}

function partR({ a, n0, n1 }: Counted): number {
  return (a * n0) / (n1 + n0)
}

function partS({ c, n1, n0 }: Counted): number {
  return (c * n1) / (n1 + n0)
}

/**
 * Jackknife limits of the log ratio: se² = (G−1)/G·Σ(b₍g₎ − b)², t with G − 1; null when it rests on
 * one part.
 */
function limits(
  rows: StrataRows,
  R: number,
  S: number,
  level: number,
  leaveOut: 'stratum' | 'row',
): Pick<StrataRatio, 'ratio' | 'lower' | 'upper'> {
  if (!(S > 0)) return { ratio: null, lower: null, upper: null }
  if (!(R > 0)) return { ratio: 0, lower: null, upper: null }
  const ratio = R / S
  const spread = new Spread(R, S)
  const one: Counted = { n1: 0, n0: 0, a: 0, c: 0 }
  for (let g = 0; g < rows.strata; g += 1) {
    if (!count(rows, g, one) || one.a + one.c === 0) continue
    if (leaveOut === 'stratum') spread.without(partR(one), partS(one))
    else leaveRowsOut(rows, g, one, spread)
  }
  const standardError = spread.standardError()
  if (standardError === null) return { ratio, lower: null, upper: null }
  const reach = Math.exp(tQuantile(1 - (1 - level) / 2, spread.G - 1) * standardError)
  return Number.isFinite(ratio * reach)
    ? { ratio, lower: ratio / reach, upper: ratio * reach }
    : { ratio, lower: null, upper: null }
}

function leaveRowsOut(rows: StrataRows, g: number, whole: Counted, spread: Spread): void {
  const counted = rows.represents ?? rows.units
  const wholeR = partR(whole)
  const wholeS = partS(whole)
  for (let i = rows.starts[g] as number; i < (rows.starts[g + 1] as number); i += 1) {
    const units = counted[i] as number
    const events = rows.events[i] as number
    const isExposed = rows.exposed[i] === 1
    const n1 = whole.n1 - (isExposed ? units : 0)
    const n0 = whole.n0 - (isExposed ? 0 : units)
    const a = whole.a - (isExposed ? events : 0)
    const c = whole.c - (isExposed ? 0 : events)
    spread.without(wholeR - (a * n0) / (n1 + n0), wholeS - (c * n1) / (n1 + n0))
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
