export interface RunSignal {
  /** 1 beyond three; 2 nine on one side; 3 six rising or falling; 4 two of three beyond two. */
  rule: 1 | 2 | 3 | 4
  /** Place, from 0, of the point that completes the pattern. */
  index: number
}

const RULES: readonly {
  rule: RunSignal['rule']
  completes: (z: readonly number[], i: number) => boolean
}[] = [
  { rule: 1, completes: (z, i) => Math.abs(at(z, i)) > 3 },
  { rule: 2, completes: (z, i) => sideRun(z, i, 9) },
  { rule: 3, completes: (z, i) => trend(z, i, 6) },
  { rule: 4, completes: (z, i) => twoOfThree(z, i) },
]

/**
 * Patterns in standardised points that chance alone seldom makes. Rule 1: |z| > 3. Rule 2: the last nine all above or
 * all below 0 (0 breaks). Rule 3: the last six strictly rising or falling (a tie breaks). Rule 4: this point is beyond
 * 2 and so is one of the two before it, on the same side (so it can complete at the second point).
 *
 * @param input z in the order of time, without gaps.
 * @returns every completing point, by index, then rule; none for an empty series. Seldom is for independent points:
 *   on clumped loads calibrate first.
 *
 * Nelson 1984, Journal of Quality Technology 16(4):237-239, tests 1, 2, 3 and 5; ISO 7870-2:2013.
 */
export function runSignals(input: { z: readonly number[] }): { signals: RunSignal[] } {
  const { z } = input
  const signals = z.flatMap((_, index) =>
    RULES.filter(({ completes }) => completes(z, index)).map(({ rule }) => ({ rule, index })),
  )
  return { signals }
}

function at(z: readonly number[], i: number): number {
  return z[i] as number
}

function sideRun(z: readonly number[], i: number, length: number): boolean {
  if (i < length - 1) return false
  const last = z.slice(i - length + 1, i + 1)
  return last.every((value) => value > 0) || last.every((value) => value < 0)
}

function trend(z: readonly number[], i: number, length: number): boolean {
  if (i < length - 1) return false
  const steps = z.slice(i - length + 2, i + 1).map((value, k) => value - at(z, i - length + 1 + k))
  return steps.every((step) => step > 0) || steps.every((step) => step < 0)
}

function twoOfThree(z: readonly number[], i: number): boolean {
  const side = Math.sign(at(z, i))
  const before = z.slice(Math.max(0, i - 2), i)
  return at(z, i) * side > 2 && before.some((value) => value * side > 2)
}
