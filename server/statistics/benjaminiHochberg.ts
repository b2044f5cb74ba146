/**
 * False-discovery-rate adjusted p-values (step-up): q₍ᵢ₎ = min over j ≥ i of min(1, n·p₍ⱼ₎/j).
 *
 * @param input p-values between 0 and 1, in any order.
 * @returns qValues in the order of the input; [] for none. Keeping q ≤ 0.10 expects at most a tenth of what is
 *   kept to be false, when the tests are independent or positively dependent.
 * @throws RangeError for a value that is no probability.
 *
 * Benjamini and Hochberg 1995, Journal of the Royal Statistical Society B 57:289-300.
 */
export function benjaminiHochberg(input: { pValues: readonly number[] }): { qValues: number[] } {
  const { pValues } = input
  pValues.forEach((p, index) => {
    if (!(p >= 0 && p <= 1))
      throw new RangeError(`pValues[${index}] must lie between 0 and 1, not ${p}`)
  })
  const n = pValues.length
  const order = pValues
    .map((_, index) => index)
    .sort((i, j) => (pValues[j] as number) - (pValues[i] as number))
  const qValues = new Array<number>(n).fill(1)
  let smallest = 1
  order.forEach((index, place) => {
    // The quotient first: it is never below 1, so rounding cannot take q below p.
    smallest = Math.min(smallest, (n / (n - place)) * (pValues[index] as number))
    qValues[index] = smallest
  })
  return { qValues }
}
