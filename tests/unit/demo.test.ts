import { v7 } from 'uuid'
import { describe, expect, it, vi } from 'vitest'
import { revisionInput } from '../../server/contract/firings.js'
import { composeFiring } from '../../server/demo/compose.js'
import { demoHash, generateDemo } from '../../server/demo/generateDemo.js'
import { DEMO_TRUTH } from '../../server/demo/truth.js'
import type { DemoFiring, DemoLot, DemoNetwork } from '../../server/demo/types.js'
import { FACTORS } from '../../server/shared/factors.js'
import { faultRule, withDescendants } from '../../server/shared/faults/index.js'
import { checkLoad, checkReport } from '../../server/shared/loadChecks.js'

// Made in about two seconds, several times here.
vi.setConfig({ testTimeout: 60_000 })

const ENDS = '2026-10-15'
const content = generateDemo({ seed: 1, ends: ENDS })
const [ring, pair] = content.networks as [DemoNetwork, DemoNetwork]

/** What the firing's last revision says came out. */
const outcomeOf = (firing: DemoFiring) => firing.amend ?? firing.report
const studioOf = (network: DemoNetwork, { kiln }: DemoFiring) =>
  network.kilns.find(({ key }) => key === kiln)?.studio

describe('the content of the demo', () => {
  it('is the same for the same seed and end', () => {
    expect(demoHash(generateDemo({ seed: 1, ends: ENDS }))).toBe(demoHash(content))
  })

  it('is another for another seed, and for another end', () => {
    const hashes = [
      { seed: 2, ends: ENDS },
      { seed: 1, ends: '2026-10-16' },
    ].map((input) => demoHash(generateDemo(input)))
    expect(new Set([demoHash(content), ...hashes]).size).toBe(3)
  })

  it('has four studios in three time zones, 11 kilns and about 1,500 firings of 18 months', () => {
    expect(ring.studios).toHaveLength(4)
    expect(new Set(ring.studios.map(({ timeZone }) => timeZone)).size).toBe(3)
    expect(ring.kilns).toHaveLength(11)
    expect(ring.firings.length).toBeGreaterThanOrEqual(1400)
    expect(ring.firings.length).toBeLessThanOrEqual(1600)
    expect(ring.firings[0]?.localDate.slice(0, 7)).toBe('2025-04')
    expect(ring.firings.at(-1)?.localDate.slice(0, 7)).toBe('2026-10')
  })

  it('has a second network of two studios and some 60 firings', () => {
    expect(pair.studios).toHaveLength(2)
    expect(pair.firings.length).toBeGreaterThan(50)
    expect(pair.firings.length).toBeLessThan(75)
  })

  it('lets nothing happen at or after the midnight at which it ends', () => {
    const moments = content.networks.flatMap(({ firings }) =>
      firings.flatMap(({ pack, report, amend }) => [
        pack.at,
        report?.at,
        report?.openedAt,
        amend?.at,
      ]),
    )
    expect(moments.filter((at) => at && at >= `${ENDS}T00:00:00.000Z`)).toEqual([])
  })

  it('leaves a load to be reported in every studio', () => {
    for (const network of content.networks) {
      const waiting = network.firings.filter(({ report }) => report === null)
      expect(new Set(waiting.map((firing) => studioOf(network, firing)))).toEqual(
        new Set(network.studios.map(({ key }) => key)),
      )
    }
  })

  it('has all kinds of firing, about totals, gaps in counters, amendments, undecided pieces and one lost load', () => {
    expect(new Set(ring.firings.map(({ kind }) => kind))).toEqual(
      new Set(['bisque', 'glaze', 'single', 'lustre', 'raku']),
    )
    expect(ring.firings.filter(({ about }) => about).length).toBeGreaterThan(100)
    expect(ring.firings.filter(({ amend }) => amend).length).toBeGreaterThan(20)
    expect(ring.firings.filter(({ report }) => report?.wholeLoadFailed)).toHaveLength(1)
    const losses = ring.firings.flatMap(
      (firing) => outcomeOf(firing)?.lots.flatMap((lot) => lot.losses) ?? [],
    )
    expect(losses.some(({ outcome }) => outcome === 'undecided')).toBe(true)
    expect(losses.some(({ neighbour }) => neighbour)).toBe(true)
    const numbers = ring.firings
      .filter(({ kiln }) => kiln === 'north')
      .flatMap(({ kilnNumber }) => kilnNumber ?? [])
    expect(Math.max(...numbers) - Math.min(...numbers) + 1).toBeGreaterThan(numbers.length)
  })

  it.each(['bisque', 'glaze'] as const)(
    'loses 4 to 10 per cent of the pieces of a %s firing',
    (kind) => {
      const reported = ring.firings.filter(
        (firing) => firing.kind === kind && firing.report && !firing.report.wholeLoadFailed,
      )
      const pieces = reported.reduce((sum, firing) => sum + firing.pieces, 0)
      const lost = reported
        .flatMap((firing) => outcomeOf(firing)?.lots.flatMap((lot) => lot.losses) ?? [])
        .filter(({ outcome }) => outcome === 'waster' || outcome === 'refire')
        .reduce((sum, loss) => sum + loss.pieces, 0)
      expect(lost / pieces).toBeGreaterThan(0.04)
      expect(lost / pieces).toBeLessThan(0.1)
    },
  )

  it('records factors at shares that differ by factor and by studio', () => {
    const share = (studio: string, factor: string) => {
      const lots = ring.firings
        .filter((firing) => studioOf(ring, firing) === studio)
        .flatMap((firing) => firing.lots)
      return lots.filter(({ levels }) => levels[factor] !== undefined).length / lots.length
    }
    expect(share('otter-stair', 'clay_body')).toBeGreaterThan(0.9)
    expect(share('nine-buckets', 'clay_body')).toBeLessThan(0.75)
    expect(share('otter-stair', 'thickness_band')).toBeLessThan(0.5)
  })
})

describe('the firings of the demo', () => {
  const uid = v7()
  const keys = { kiln: () => uid, level: () => uid, person: () => 1 }

  it('are what the contract takes, with every default filled in', () => {
    for (const firing of content.networks.flatMap(({ firings }) => firings)) {
      for (const { input } of composeFiring(firing, keys).revisions)
        expect(revisionInput.parse(input)).toEqual(input)
    }
  })

  it('pass the checks of counts that a load and a report pass in the app', () => {
    for (const firing of content.networks.flatMap(({ firings }) => firings)) {
      const [pack, ...reports] = composeFiring(firing, keys).revisions
      if (pack?.input.kind !== 'pack') throw new Error('The first revision packs.')
      expect(checkLoad(pack.input.pack)).toEqual({})
      for (const { input } of reports) {
        if (input.kind !== 'pack') expect(checkReport(pack.input.pack, input.report)).toEqual({})
      }
    }
  })

  it('name only levels of their own studio and of the network', () => {
    for (const network of content.networks) {
      const known = new Set([
        ...FACTORS.flatMap(({ id, fixed = [] }) =>
          network.studios.flatMap(({ key }) => fixed.map(({ code }) => `${key}/${id}/${code}`)),
        ),
        ...network.levels.flatMap(({ key, factor, studio }) =>
          (studio === null ? network.studios.map((each) => each.key) : [studio]).map(
            (each) => `${each}/${factor}/${key}`,
          ),
        ),
      ])
      const named = network.firings.flatMap((firing) => {
        const studio = studioOf(network, firing) ?? ''
        const ofLots = firing.lots.flatMap(({ levels }) =>
          Object.entries(levels).flatMap(([factor, keyOrKeys]) =>
            [keyOrKeys].flat().map((key) => `${studio}/${factor}/${key}`),
          ),
        )
        return [
          ...ofLots,
          ...(firing.programme === null ? [] : [`${studio}/programme/${firing.programme}`]),
        ]
      })
      expect([...new Set(named)].filter((name) => !known.has(name))).toEqual([])
    }
  })
})

type When = Readonly<Record<string, string>>

/** Rate of a fault where the levels hold over the rate where they are recorded and others hold. */
function crudeRatio(fault: string, when: When, lastMonths?: number): number {
  const faults = new Set(withDescendants(fault))
  const from =
    lastMonths === undefined
      ? ''
      : new Date(Date.parse(ENDS) - lastMonths * 30.44 * 86_400_000).toISOString().slice(0, 10)
  const sides = { exposed: { events: 0, pieces: 0 }, others: { events: 0, pieces: 0 } }
  for (const firing of ring.firings) {
    const report = outcomeOf(firing)
    if (
      !report ||
      report.wholeLoadFailed ||
      firing.localDate < from ||
      !faultRule(fault)?.seenIn.includes(firing.kind)
    )
      continue
    for (const lot of firing.lots) {
      const held = holds(firing, report.openingTemperatureC, lot, when)
      if (held === null) continue
      const side = held ? sides.exposed : sides.others
      side.pieces += lot.pieces
      for (const loss of report.lots.find((each) => each.lot === lot.uid)?.losses ?? [])
        if (faults.has(loss.fault)) side.events += loss.pieces
    }
  }
  return sides.exposed.events / sides.exposed.pieces / (sides.others.events / sides.others.pieces)
}

/** Null where a factor is not recorded. */
function holds(
  firing: DemoFiring,
  temperature: number | null,
  lot: DemoLot,
  when: When,
): boolean | null {
  let all = true
  for (const [factor, level] of Object.entries(when)) {
    if (factor === 'kiln') all &&= firing.kiln === level
    else if (factor === 'opening_temperature') {
      if (temperature === null) return null
      all &&= temperature >= 150
    } else {
      const held = lot.levels[factor]
      if (held === undefined) return null
      all &&= [held].flat().includes(level)
    }
  }
  return all
}

describe('what is true of the demo', () => {
  it.each(
    DEMO_TRUTH.effects.map((effect) => ({
      ...effect,
      of: Object.values(effect.when).join(' and '),
    })),
  )('$fault is raised with $of in a crude count', ({ fault, when, ratio, lastMonths }) => {
    const crude = crudeRatio(fault, when, lastMonths)
    expect(crude).toBeGreaterThan(1.4)
    expect(crude).toBeLessThan(2.2 * ratio)
  })

  it('raises the confounded null in a crude count, since its glaze is used almost only in one kiln', () => {
    const [{ fault, when }] = DEMO_TRUTH.confounded
    expect(crudeRatio(fault, when)).toBeGreaterThan(1.5)
    const north = ring.firings.filter(({ kiln }) => kiln === 'north')
    const lots = ring.firings.flatMap((firing) =>
      firing.lots.filter(({ levels }) => [levels.glaze ?? []].flat().includes('iron-red')),
    )
    const there = north.flatMap((firing) =>
      firing.lots.filter(({ levels }) => [levels.glaze ?? []].flat().includes('iron-red')),
    )
    expect(there.length / lots.length).toBeGreaterThan(0.75)
  })

  it.each([...DEMO_TRUTH.nulls].map((each) => ({ ...each, of: Object.values(each.when).join() })))(
    '$fault is not far from even with $of',
    ({ fault, when }) => {
      expect(crudeRatio(fault, when)).toBeGreaterThan(0.6)
      expect(crudeRatio(fault, when)).toBeLessThan(1.5)
    },
  )
})
