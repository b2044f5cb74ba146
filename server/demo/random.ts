/**
 * Repeatable chance: a seeded generator and the draws that the demo needs. Nothing here is secret.
 * The generator is sfc32 (public domain, from memory of PractRand's documentation).
 */
export interface Random {
  /** Uniform in [0, 1). */
  next(): number
  /** Whole number from `least` to `most`, both possible. */
  whole(least: number, most: number): number
  chance(probability: number): boolean
  pick<T>(items: readonly T[]): T
  /** One of the items, each as often as its weight says. */
  weighted<T>(items: readonly (readonly [T, number])[]): T
  normal(): number
  /** Beta with this mean and intraclass correlation (0 < rho < 1): what a cluster's own risk is drawn from. */
  beta(mean: number, rho: number): number
  /** A UUID (version 7) of this moment, in ms. */
  uid(at: number): string
  /** An independent generator for one part, so that a change there moves nothing else. */
  part(name: string): Random
}

/** The same seed and path give the same draws on every machine. */
export function makeRandom(seed: number, path = ''): Random {
  const next = sfc32(hash32(`${seed}/${path}`))
  const random: Random = {
    next,
    whole: (least, most) => least + Math.floor(next() * (most - least + 1)),
    chance: (probability) => next() < probability,
    pick: (items) => must(items[Math.floor(next() * items.length)]),
    weighted(items) {
      let left = next() * items.reduce((sum, [, weight]) => sum + weight, 0)
      for (const [item, weight] of items) {
        left -= weight
        if (left < 0) return item
      }
      return must(items.at(-1))[0]
    },
    normal: () => Math.sqrt(-2 * Math.log(1 - next())) * Math.cos(2 * Math.PI * next()),
    beta(mean, rho) {
      const total = 1 / rho - 1
      const a = gamma(random, mean * total)
      const b = gamma(random, (1 - mean) * total)
      return a + b === 0 ? 0 : a / (a + b)
    },
    uid: (at) => uuid7(at, next),
    part: (name) => makeRandom(seed, `${path}/${name}`),
  }
  return random
}

function must<T>(value: T | undefined): T {
  if (value === undefined) throw new Error('Nothing to pick from.')
  return value
}

/** FNV-1a with four starting points: four words of state from a text. */
function hash32(text: string): [number, number, number, number] {
  const words = [0x811c9dc5, 0x9e3779b9, 0x85ebca6b, 0xc2b2ae35].map((start) => {
    let h = start
    for (let i = 0; i < text.length; i += 1) h = Math.imul(h ^ text.charCodeAt(i), 0x01000193)
    return h >>> 0
  })
  return words as [number, number, number, number]
}

function sfc32([a, b, c, d]: [number, number, number, number]): () => number {
  const next = (): number => {
    const t = (((a + b) | 0) + d) | 0
    d = (d + 1) | 0
    a = b ^ (b >>> 9)
    b = (c + (c << 3)) | 0
    c = (c << 21) | (c >>> 11)
    c = (c + t) | 0
    return (t >>> 0) / 4294967296
  }
  for (let i = 0; i < 16; i += 1) next()
  return next
}

/** Marsaglia and Tsang 2000, ACM Transactions on Mathematical Software 26:363-372 (from memory); shapes under 1 by the power of a uniform. */
function gamma(random: Random, shape: number): number {
  if (shape < 1) return gamma(random, shape + 1) * Math.pow(1 - random.next(), 1 / shape)
  const d = shape - 1 / 3
  const c = 1 / Math.sqrt(9 * d)
  for (;;) {
    const x = random.normal()
    const v = Math.pow(1 + c * x, 3)
    if (v > 0 && Math.log(1 - random.next()) < 0.5 * x * x + d - d * v + d * Math.log(v))
      return d * v
  }
}

function uuid7(at: number, next: () => number): string {
  const time = Math.floor(at).toString(16).padStart(12, '0')
  const bits = (length: number) =>
    Math.floor(next() * 16 ** length)
      .toString(16)
      .padStart(length, '0')
  const variant = (8 + Math.floor(next() * 4)).toString(16)
  return `${time.slice(0, 8)}-${time.slice(8)}-7${bits(3)}-${variant}${bits(3)}-${bits(6)}${bits(6)}`
}
