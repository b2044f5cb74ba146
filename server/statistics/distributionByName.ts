import * as d from './distributions.js'

type Arguments = Readonly<Record<string, number>>

const FUNCTIONS: Record<string, (a: Arguments) => number> = {
  normalQuantile: (a) => d.normalQuantile(need(a, 'p')),
  normalCdf: (a) => d.normalCdf(need(a, 'x')),
  tQuantile: (a) => d.tQuantile(need(a, 'p'), need(a, 'df')),
  tCdf: (a) => d.tCdf(need(a, 'x'), need(a, 'df')),
  betaQuantile: (a) => d.betaQuantile(need(a, 'p'), need(a, 'a'), need(a, 'b')),
  binomialCdf: (a) => d.binomialCdf(need(a, 'k'), need(a, 'n'), need(a, 'probability')),
  binomialQuantile: (a) => d.binomialQuantile(need(a, 'p'), need(a, 'n'), need(a, 'probability')),
  poissonCdf: (a) => d.poissonCdf(need(a, 'k'), need(a, 'mean')),
  poissonQuantile: (a) => d.poissonQuantile(need(a, 'p'), need(a, 'mean')),
  chiSquareQuantile: (a) => d.chiSquareQuantile(need(a, 'p'), need(a, 'df')),
  chiSquareUpperTail: (a) => d.chiSquareUpperTail(need(a, 'x'), need(a, 'df')),
}

/**
 * A distribution function by its name, so that a library can be checked against tables before it is trusted.
 *
 * @param input function: a name of ./distributions.ts; the other keys are its arguments by name.
 * @throws RangeError for an unknown function or a missing argument.
 */
export function distributions(input: { function: string } & Record<string, unknown>): {
  value: number
} {
  const named = FUNCTIONS[input.function]
  if (!named) throw new RangeError(`function: no distribution function ${input.function}`)
  return { value: named(input as unknown as Arguments) }
}

function need(a: Arguments, name: string): number {
  const value = a[name]
  if (typeof value !== 'number') throw new RangeError(`${name} is missing`)
  return value
}
