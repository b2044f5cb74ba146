interface Outcomes {
  first: number
  second: number
  refire: number
  waster: number
}

/**
 * Outcomes as whole pieces of a hundred that add up to a hundred (largest remainders); null without
 * pieces. What was seen at all is at least one piece only where it rounds to one: the text beside it
 * has the counts.
 */
export function perHundred(outcomes: Outcomes): Outcomes | null {
  const keys = ['first', 'second', 'refire', 'waster'] as const
  const total = keys.reduce((sum, key) => sum + outcomes[key], 0)
  if (total === 0) return null
  const shares = keys.map((key) => ({ key, share: (outcomes[key] * 100) / total }))
  const whole = new Map(shares.map(({ key, share }) => [key, Math.floor(share)]))
  let left = 100 - [...whole.values()].reduce((sum, n) => sum + n, 0)
  for (const { key } of shares.sort((a, b) => (b.share % 1) - (a.share % 1))) {
    if (left === 0) break
    whole.set(key, (whole.get(key) ?? 0) + 1)
    left -= 1
  }
  const of = (key: keyof Outcomes): number => whole.get(key) ?? 0
  return { first: of('first'), second: of('second'), refire: of('refire'), waster: of('waster') }
}
