/** Properties that hold by the definition of an interval (Wilson 1927, Cochran 1977). */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import {
  clopperPearsonInterval,
  clusteredRate,
  clusteredRateFromSums,
  wilsonInterval,
} from '../../../server/statistics/index.js'
import { deepFreeze } from './deepFreeze.js'

const counts = fc
  .integer({ min: 1, max: 5000 })
  .chain((units) =>
    fc.record({ units: fc.constant(units), events: fc.integer({ min: 0, max: units }) }),
  )
const firings = fc.array(
  fc
    .integer({ min: 0, max: 200 })
    .chain((units) =>
      fc.record({ units: fc.constant(units), events: fc.integer({ min: 0, max: units }) }),
    ),
  { maxLength: 30 },
)
const level = fc.constantFrom(0.5, 0.8, 0.9, 0.95, 0.99, 0.998)
const nothing = {
  rate: null,
  standardError: null,
  designEffect: null,
  effectiveUnits: null,
  lower: null,
  upper: null,
}

describe.each([
  ['wilsonInterval', wilsonInterval],
  ['clopperPearsonInterval', clopperPearsonInterval],
])('%s', (_, interval) => {
  it('lies in 0..1 and holds the observed rate', () => {
    fc.assert(
      fc.property(counts, level, ({ events, units }, confidence) => {
        const { lower, upper } = interval(deepFreeze({ events, units, level: confidence }))
        expect(lower).toBeGreaterThanOrEqual(0)
        expect(upper).toBeLessThanOrEqual(1)
        expect(lower).toBeLessThanOrEqual(events / units + 1e-12)
        expect(upper).toBeGreaterThanOrEqual(events / units - 1e-12)
      }),
    )
  })

  it('is wider at a higher level', () => {
    fc.assert(
      fc.property(counts, ({ events, units }) => {
        const narrow = interval({ events, units, level: 0.8 })
        const wide = interval({ events, units, level: 0.99 })
        expect(wide.lower).toBeLessThanOrEqual(narrow.lower as number)
        expect(wide.upper).toBeGreaterThanOrEqual(narrow.upper as number)
      }),
    )
  })

  it('turns into its mirror when losses and sound pieces change places', () => {
    fc.assert(
      fc.property(counts, ({ events, units }) => {
        const lost = interval({ events, units, level: 0.95 })
        const sound = interval({ events: units - events, units, level: 0.95 })
        expect(lost.lower).toBeCloseTo(1 - (sound.upper as number), 9)
      }),
    )
  })

  it.each([
    [{ events: 3, units: 2, level: 0.95 }, /events must lie between 0 and 2/],
    [{ events: -1, units: 2, level: 0.95 }, /events/],
    [{ events: 1, units: Number.NaN, level: 0.95 }, /units/],
    [{ events: 1, units: 2, level: 1 }, /level/],
  ])('refuses %j', (input, message) => {
    expect(() => interval(input)).toThrow(message)
  })
})

describe('clusteredRate', { timeout: 30_000 }, () => {
  it('lies in 0..1 and holds the rate', () => {
    fc.assert(
      fc.property(firings, level, (clusters, confidence) => {
        const { rate, lower, upper } = clusteredRate(deepFreeze({ clusters, level: confidence }))
        if (lower === null || upper === null || rate === null) return
        expect(lower).toBeGreaterThanOrEqual(0)
        expect(upper).toBeLessThanOrEqual(1)
        expect(lower).toBeLessThanOrEqual(rate + 1e-12)
        expect(upper).toBeGreaterThanOrEqual(rate - 1e-12)
      }),
    )
  })

  it('does not depend on the order of firings', () => {
    fc.assert(
      fc.property(firings, (clusters) => {
        const forwards = clusteredRate({ clusters, level: 0.95 })
        expect(clusteredRate({ clusters: clusters.toReversed(), level: 0.95 })).toEqual(forwards)
      }),
    )
  })

  it('never takes more pieces for independent than there are', () => {
    fc.assert(
      fc.property(firings, (clusters) => {
        const { effectiveUnits } = clusteredRate({ clusters, level: 0.95 })
        if (effectiveUnits === null) return
        expect(effectiveUnits).toBeLessThanOrEqual(
          clusters.reduce((sum, { units }) => sum + units, 0),
        )
      }),
    )
  })

  it('is wider than Wilson on the same counts when losses clump in one firing', () => {
    const clumped = clusteredRate({
      clusters: [
        { events: 12, units: 40 },
        { events: 0, units: 40 },
        { events: 0, units: 40 },
        { events: 0, units: 40 },
      ],
      level: 0.95,
    })
    const plain = wilsonInterval({ events: 12, units: 160, level: 0.95 })
    expect(clumped.upper).toBeGreaterThan(plain.upper as number)
    expect(clumped.lower).toBeLessThan(plain.lower as number)
  })

  it('knows nothing without firings and only the rate with one', () => {
    expect(clusteredRate({ clusters: [], level: 0.95 })).toEqual(nothing)
    expect(clusteredRate({ clusters: [{ events: 0, units: 0 }], level: 0.95 })).toEqual(nothing)
    expect(clusteredRate({ clusters: [{ events: 1, units: 4 }], level: 0.95 })).toEqual({
      ...nothing,
      rate: 0.25,
    })
  })

  it('refuses more losses than pieces and names the firing', () => {
    expect(() =>
      clusteredRate({
        clusters: [
          { events: 0, units: 1 },
          { events: 2, units: 1 },
        ],
        level: 0.95,
      }),
    ).toThrow(/clusters\[1\]/)
  })
})

describe('clusteredRateFromSums', { timeout: 30_000 }, () => {
  const sumsOf = (clusters: readonly { events: number; units: number }[]) => {
    const used = clusters.filter(({ units }) => units > 0)
    const sum = (term: (m: number, y: number) => number) =>
      used.reduce((total, { units, events }) => total + term(units, events), 0)
    return {
      G: used.length,
      sumUnits: sum((m) => m),
      sumEvents: sum((_, y) => y),
      sumUnits2: sum((m) => m * m),
      sumUnitsEvents: sum((m, y) => m * y),
      sumEvents2: sum((_, y) => y * y),
    }
  }

  it('gives exactly what the firings give', () => {
    fc.assert(
      fc.property(firings, level, (clusters, confidence) => {
        expect(clusteredRateFromSums({ ...sumsOf(clusters), level: confidence })).toEqual(
          clusteredRate({ clusters, level: confidence }),
        )
      }),
    )
  })

  it('adds up over disjoint sets of firings', () => {
    fc.assert(
      fc.property(firings, firings, (first, second) => {
        const a = sumsOf(first)
        const b = sumsOf(second)
        const both = Object.fromEntries(
          Object.entries(a).map(([key, value]) => [key, value + b[key as keyof typeof b]]),
        ) as typeof a
        expect(clusteredRateFromSums({ ...both, level: 0.95 })).toEqual(
          clusteredRate({ clusters: [...first, ...second], level: 0.95 }),
        )
      }),
    )
  })
})
