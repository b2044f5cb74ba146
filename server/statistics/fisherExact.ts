import { logFactorial } from './distributions.js'

/**
 * Fisher's exact test of a two-by-two table (rows a b / c d), two-sided: the probabilities of all tables with the
 * same margins that are no likelier than the observed one (within 1e-7 of it) are added up.
 *
 * @returns pValue; 1 when a margin is empty. Takes pieces as independent: for small tables on display only.
 * @throws RangeError when a cell is not a whole number ≥ 0.
 *
 * Fisher 1935, The Design of Experiments; the sum by probability is the common modern variant.
 */
export function fisherExact(input: { a: number; b: number; c: number; d: number }): {
  pValue: number
} {
  const { a, b, c, d } = input
  for (const [name, cell] of Object.entries({ a, b, c, d })) {
    if (!Number.isInteger(cell) || cell < 0)
      throw new RangeError(`${name} must be a whole number of 0 or more`)
  }
  const row = a + b
  const column = a + c
  const total = row + c + d
  if (row === 0 || c + d === 0 || column === 0 || b + d === 0) return { pValue: 1 }
  const logProbability = (x: number): number =>
    logChoose(column, x) + logChoose(total - column, row - x) - logChoose(total, row)
  const limit = logProbability(a) + Math.log1p(1e-7)
  let pValue = 0
  for (let x = Math.max(0, row + column - total); x <= Math.min(row, column); x += 1) {
    const log = logProbability(x)
    if (log <= limit) pValue += Math.exp(log)
  }
  return { pValue: Math.min(1, pValue) }
}

function logChoose(n: number, k: number): number {
  return logFactorial(n) - logFactorial(k) - logFactorial(n - k)
}
