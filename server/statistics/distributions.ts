/**
 * Quantiles and tails that every interval and p-value here rests on.
 *
 * The numbers come from the package `cephes` 3.3.3 (Moshier's C library as WebAssembly), chosen by trying
 * three packages on tests/unit/statistics/reference/distributions.json (R 4.2.2; tolerance 1e-8, relative 1e-7):
 * - jstat 1.9.6 misses 5 of 64: its lower normal tail at −8 is 1.8 % off (it subtracts from 1, so every
 *   p-value under 1e-15 is noise), t quantiles from 30 degrees of freedom on are 2e-8 off, the median
 *   of beta(½, ½) 6e-8.
 * - @stdlib/stats-base-dists-* passes, but brings 241 packages and 28 MB.
 * - cephes passes all, is one package of 0.8 MB, typed, without dependencies; 33 ns a normal tail,
 *   26 µs a t quantile.
 * Its ES module compiles asynchronously, hence the one top-level await below.
 */
import { bdtr, chdtri, compiled, igamc, incbet, incbi, lgam, ndtr, ndtri, pdtr } from 'cephes'
import { requireProbability } from './arguments.js'

await compiled

/** z with P(Z ≤ z) = p for a standard normal Z; p strictly between 0 and 1. */
export function normalQuantile(p: number): number {
  requireProbability('p', p)
  return p === 0.5 ? 0 : ndtri(p)
}

/** P(Z ≤ x) for a standard normal Z, exact in the lower tail down to about 1e-290. */
export function normalCdf(x: number): number {
  return ndtr(x)
}

/** Two-sided normal p-value of a standardised statistic: 2·P(Z ≤ −|z|). */
export function normalTwoSided(z: number): number {
  return Math.min(1, 2 * normalCdf(-Math.abs(z)))
}

/** P(T ≤ x) for Student's t with df > 0 (not necessarily whole) degrees of freedom. */
export function tCdf(x: number, df: number): number {
  requirePositive('df', df)
  const tail = 0.5 * incbet(0.5 * df, 0.5, df / (df + x * x))
  return x <= 0 ? tail : 1 - tail
}

/** Two-sided p-value of a t statistic. */
export function tTwoSided(t: number, df: number): number {
  return Math.min(1, 2 * tCdf(-Math.abs(t), df))
}

/** t with P(T ≤ t) = p for Student's t; p strictly between 0 and 1, df > 0. */
export function tQuantile(p: number, df: number): number {
  requireProbability('p', p)
  requirePositive('df', df)
  if (p === 0.5) return 0
  // Solved in the smaller tail, where the beta quantile keeps its relative precision.
  const z = incbi(0.5 * df, 0.5, 2 * Math.min(p, 1 - p))
  const t = Math.sqrt((df * (1 - z)) / z)
  return p < 0.5 ? -t : t
}

/** x with P(X ≤ x) = p for a beta(a, b); a, b > 0. */
export function betaQuantile(p: number, a: number, b: number): number {
  requireProbability('p', p)
  requirePositive('a', a)
  requirePositive('b', b)
  return incbi(a, b, p)
}

/** P(X ≤ k) for a binomial(n, probability); 0 below 0, 1 from n on. */
export function binomialCdf(k: number, n: number, probability: number): number {
  if (k < 0) return 0
  if (k >= n) return 1
  return bdtr(Math.floor(k), n, probability)
}

/** The smallest whole number k with P(X ≤ k) ≥ p for a binomial(n, probability). */
export function binomialQuantile(p: number, n: number, probability: number): number {
  requireProbability('p', p)
  return smallestReaching(p, n, (k) => binomialCdf(k, n, probability))
}

/** P(X ≤ k) for a Poisson with the given mean ≥ 0. */
export function poissonCdf(k: number, mean: number): number {
  if (k < 0) return 0
  return mean === 0 ? 1 : pdtr(Math.floor(k), mean)
}

/** The smallest whole number k with P(X ≤ k) ≥ p for a Poisson. */
export function poissonQuantile(p: number, mean: number): number {
  requireProbability('p', p)
  let high = Math.max(1, Math.ceil(mean))
  while (poissonCdf(high, mean) < p) high *= 2
  return smallestReaching(p, high, (k) => poissonCdf(k, mean))
}

/** x with P(X ≤ x) = p for a chi-square with df > 0 degrees of freedom. */
export function chiSquareQuantile(p: number, df: number): number {
  requireProbability('p', p)
  requirePositive('df', df)
  return chdtri(df, 1 - p)
}

/** P(X > x) for a chi-square with df > 0 (not necessarily whole) degrees of freedom; 1 at x ≤ 0. */
export function chiSquareUpperTail(x: number, df: number): number {
  requirePositive('df', df)
  // Not chdtrc, which refuses fewer than one degree of freedom.
  return x <= 0 ? 1 : igamc(df / 2, x / 2)
}

/** ln n! for n ≥ 0. */
export function logFactorial(n: number): number {
  return n < 2 ? 0 : lgam(n + 1)
}

/** Bisection on whole numbers: the first k in 0..high at which a rising function reaches p. */
function smallestReaching(p: number, high: number, cdf: (k: number) => number): number {
  let low = 0
  let top = high
  while (low < top) {
    const middle = Math.floor((low + top) / 2)
    // R's fuzz: a probability that is p but for rounding counts as reached.
    if (cdf(middle) >= p * (1 - 64 * Number.EPSILON)) top = middle
    else low = middle + 1
  }
  return low
}

function requirePositive(name: string, value: number): void {
  if (!(value > 0)) throw new RangeError(`${name} must be above 0, not ${value}`)
}
