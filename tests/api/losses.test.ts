import { beforeAll, describe, expect, it } from 'vitest'
import { fixedClock } from '../../server/clock.js'
import type { Rate } from '../../server/contract/common.js'
import type { LossBreakdown, LossSummary } from '../../server/contract/losses.js'
import type { Kiln, Network } from '../../server/models/index.js'
import { Loss, Lot } from '../../server/models/index.js'
import {
  faultRule,
  FAULT_TREE,
  overOffered,
  withAncestors,
} from '../../server/shared/faults/index.js'
import { eventsFor, isEvent, MEASURES, piecesFor } from '../../server/shared/counts.js'
import type { Measure } from '../../server/shared/counts.js'
import { clusteredRate } from '../../server/statistics/index.js'
import { createTestApp, fill, PATHS, signedIn } from '../support/api.js'
import type { Agent, TestApp } from '../support/api.js'
import {
  fixedLevel,
  makeKiln,
  makeLevel,
  makeNetwork,
  makePerson,
  makeScope,
  makeStudio,
} from '../support/factories.js'
import { makeFiring } from '../support/firings.js'
import type { LossOver } from '../support/firings.js'

let test: TestApp
beforeAll(async () => {
  test = await createTestApp({ clock: fixedClock('2026-03-04T12:00:00Z') })
})

async function setting() {
  const network = await makeNetwork()
  const studio = await makeStudio({ network })
  const kiln = await makeKiln({ studio })
  const agent = await signedIn(test.app, await makePerson({ roles: [{ role: 'owner', studio }] }))
  return { network, studio, kiln, agent }
}

async function summary(agent: Agent, network: Network, query: object = {}): Promise<LossSummary> {
  const { body } = await agent
    .get(fill(PATHS.losses, { network: network.slug }))
    .query(query)
    .expect(200)
  return body
}

async function by(
  agent: Agent,
  network: Network,
  dimension: string,
  query: object = {},
): Promise<LossBreakdown> {
  const { body } = await agent
    .get(fill(PATHS.lossesBy, { network: network.slug, dimension }))
    .query(query)
    .expect(200)
  return body
}

const loses = (...losses: LossOver[]) => [{ pieces: 20, losses }]

/** Six glaze firings of 20 pieces with 0, 1, 2, 3, 4 and 5 wasters by S-crack, one a month from October on. */
async function sixFirings(kiln: Kiln) {
  const months = ['2025-10', '2025-11', '2025-12', '2026-01', '2026-02', '2026-03']
  for (const [pieces, month] of months.entries()) {
    await makeFiring({
      kiln,
      localDate: `${month}-02`,
      lots: loses(...(pieces > 0 ? [{ pieces }] : [])),
    })
  }
}

describe('the summary', () => {
  it('is clusteredRate of the firings, with counts', async () => {
    const { network, kiln, agent } = await setting()
    await sixFirings(kiln)
    const { rates, counts, from, to } = await summary(agent, network)
    const expected = clusteredRate({
      clusters: [0, 1, 2, 3, 4, 5].map((events) => ({ events, units: 20 })),
      level: 0.95,
    })
    expect(rates.loss).toEqual({
      events: 15,
      pieces: 120,
      firings: 6,
      rate: 0.125,
      lower: expected.lower,
      upper: expected.upper,
      note: 'ok',
    })
    expect(rates.blemish).toMatchObject({ events: 0, pieces: 120, rate: 0 })
    expect(counts).toEqual({
      pieces: 120,
      turnedAway: 0,
      seconds: 0,
      refires: 0,
      wasters: 15,
      undecided: 0,
      notLookedAt: 0,
    })
    expect([from, to]).toEqual(['2025-04-01', '2026-03-31'])
  })

  it('tells waste, loss and blemish apart, over pieces fired and looked at', async () => {
    const { network, kiln, agent } = await setting()
    const lot = {
      pieces: 20,
      turnedAway: [{ pieces: 2 }],
      notLookedAt: 3,
      losses: [
        { pieces: 1 },
        { pieces: 2, outcome: 'refire' as const },
        { pieces: 4, outcome: 'second' as const },
        { pieces: 1, outcome: 'undecided' as const },
      ],
    }
    await makeFiring({ kiln, lots: [lot] })
    await makeFiring({ kiln, lots: [lot] })
    const { rates } = await summary(agent, network)
    expect(rates.waste).toMatchObject({ events: 2, pieces: 30 })
    expect(rates.loss).toMatchObject({ events: 6, pieces: 30 })
    expect(rates.blemish).toMatchObject({ events: 8, pieces: 30 })
  })

  it('says in words when there is too little: none, one firing, few firings', async () => {
    const { network, kiln, agent } = await setting()
    expect((await summary(agent, network)).rates.loss).toEqual({
      events: 0,
      pieces: 0,
      firings: 0,
      rate: null,
      lower: null,
      upper: null,
      note: 'none',
    })
    await makeFiring({ kiln, lots: loses({ pieces: 3 }) })
    expect((await summary(agent, network)).rates.loss).toMatchObject({
      events: 3,
      pieces: 20,
      rate: null,
      lower: null,
      note: 'one-firing',
    })
    await makeFiring({ kiln, lots: loses() })
    const few = (await summary(agent, network)).rates.loss
    expect(few).toMatchObject({ rate: 0.075, note: 'few-firings' })
    expect(few.upper).toBeGreaterThan(0.075)
  })

  it('never pools kinds', async () => {
    const { network, kiln, agent } = await setting()
    await makeFiring({ kiln, kind: 'bisque', lots: loses({ pieces: 5 }) })
    await makeFiring({ kiln, lots: loses({ pieces: 1 }) })
    expect((await summary(agent, network)).rates.loss.events).toBe(1)
    expect((await summary(agent, network, { kind: 'bisque' })).rates.loss.events).toBe(5)
  })

  it('keeps pieces that had been fired before apart', async () => {
    const { network, kiln, agent } = await setting()
    await makeFiring({
      kiln,
      lots: [
        { pieces: 10, losses: [{ pieces: 1 }] },
        { pieces: 5, refireCount: 1, losses: [{ pieces: 4 }] },
      ],
    })
    const { rates, refired, counts } = await summary(agent, network)
    expect(rates.loss).toMatchObject({ events: 1, pieces: 10 })
    expect(refired.loss).toMatchObject({ events: 4, pieces: 5 })
    expect(counts).toMatchObject({ pieces: 10, wasters: 1 })
  })

  it('follows an amendment and a void', async () => {
    const { network, kiln, agent } = await setting()
    const { firing, report } = await makeFiring({ kiln, lots: loses({ pieces: 3 }) })
    const [lot, rest] = report.lots
    const amended = { ...report, lots: [{ ...lot, losses: [] }, rest] }
    const path = (revision: string) =>
      fill(PATHS.firingRevision, { network: network.slug, firing: firing.uid, revision })
    await agent
      .put(path('0196e3b5-0000-7000-8000-000000000001'))
      .send({ kind: 'amend', base: 2, reason: 'washed off', report: amended })
      .expect(200)
    expect((await summary(agent, network)).rates.loss).toMatchObject({ events: 0, pieces: 20 })
    await agent
      .post(fill(PATHS.firingVoid, { network: network.slug, firing: firing.uid }))
      .send({ base: 3, reason: 'twice' })
      .expect(200)
    expect((await summary(agent, network)).rates.loss.note).toBe('none')
  })

  it('refuses months in the wrong order and a fault that is not in the tree', async () => {
    const { network, agent } = await setting()
    const path = fill(PATHS.losses, { network: network.slug })
    const months = await agent.get(path).query({ from: '2026-02', to: '2026-01' }).expect(422)
    expect(months.body.error.fields).toEqual({ to: 'The last month is before the first.' })
    const fault = await agent.get(path).query({ fault: 'bad-luck' }).expect(422)
    expect(fault.body.error.fields).toEqual({ fault: 'Not a fault of the tree.' })
  })
})

describe('narrowed to a fault', () => {
  it('counts any mention, main or also, of the fault or one below it', async () => {
    const { network, kiln, agent } = await setting()
    await makeFiring({
      kiln,
      lots: loses(
        { pieces: 1, fault: 's-crack' },
        { pieces: 2, fault: 'warping', also: ['star-base-crack'] },
        { pieces: 4, fault: 'pinholing' },
      ),
    })
    expect((await summary(agent, network, { fault: 'base-crack' })).rates.loss.events).toBe(3)
    expect((await summary(agent, network, { fault: 's-crack' })).rates.loss.events).toBe(1)
    expect((await summary(agent, network, { fault: 'glaze-surface' })).rates.loss.events).toBe(4)
  })

  it('is over pieces offered for making and drying faults, over pieces fired for others', async () => {
    const { network, kiln, agent } = await setting()
    await makeFiring({
      kiln,
      lots: [
        {
          pieces: 20,
          turnedAway: [{ pieces: 3, fault: 's-crack' }],
          losses: [
            { pieces: 1, fault: 's-crack' },
            { pieces: 2, fault: 'star-base-crack' },
          ],
        },
      ],
    })
    expect((await summary(agent, network, { fault: 's-crack' })).rates.loss).toMatchObject({
      events: 4,
      pieces: 20,
    })
    expect((await summary(agent, network, { fault: 'star-base-crack' })).rates.loss).toMatchObject({
      events: 2,
      pieces: 17,
    })
    expect((await summary(agent, network)).rates.loss).toMatchObject({ events: 3, pieces: 17 })
  })

  it('leaves out lots that cannot show it, and only by what is recorded', async () => {
    const { network, kiln, agent } = await setting()
    const bare = await fixedLevel(network, 'glaze_sides', 'none')
    await makeFiring({
      kiln,
      pieces: 45,
      lots: [
        { pieces: 10, levels: { glaze_sides: bare }, losses: [{ pieces: 1, fault: 'crawling' }] },
        { pieces: 15 },
      ],
      rest: { losses: [{ pieces: 2, fault: 'crawling' }] },
    })
    expect((await summary(agent, network, { fault: 'crawling' })).rates.loss).toMatchObject({
      events: 2,
      pieces: 35,
    })
  })

  it('has no pieces in a kind of firing that cannot show it', async () => {
    const { network, kiln, agent } = await setting()
    await makeFiring({ kiln, kind: 'bisque', lots: loses({ pieces: 1, fault: 'crazing' }) })
    expect(
      (await summary(agent, network, { kind: 'bisque', fault: 'crazing' })).rates.loss.note,
    ).toBe('none')
  })
})

interface Counted {
  firingIds: number[]
  lots: Lot[]
  losses: Loss[]
}

/** Units and events of every firing from the rows themselves, one lot at a time: the definition, not the roll-up. */
function byHand(
  { firingIds, lots, losses }: Counted,
  lotsOf: (lot: Lot) => boolean,
  fault: string | null,
  measure: Measure,
) {
  const rule = fault === null ? null : faultRule(fault)
  return firingIds.map((firingId) => {
    let [units, events] = [0, 0]
    for (const lot of lots.filter((each) => each.firingId === firingId && lotsOf(each))) {
      if (!rule) {
        units += piecesFor(lot)
        events += eventsFor(lot, measure)
        continue
      }
      // The one lot with a forming is coiled and without glaze; no lot had been fired before.
      const ruledOut =
        lot.formingId !== null &&
        (rule.needsGlaze || (rule.forming.length > 0 && !rule.forming.includes('coil')))
      if (!rule.seenIn.includes('glaze') || rule.needsRefire || ruledOut) continue
      units += piecesFor(lot, overOffered(rule) ? 'offered' : 'fired')
      for (const loss of losses.filter(({ lotId }) => lotId === lot.id)) {
        const mentions = [loss.fault, ...loss.alsoFaults].some((id) =>
          withAncestors(id).includes(rule.id),
        )
        const before = loss.outcome === 'turned-away' && !overOffered(rule)
        if (mentions && !before && isEvent(loss.outcome, measure)) events += loss.pieces
      }
    }
    return { units, events }
  })
}

describe('rates', () => {
  it('are those of the lots, for every fault, measure and level', async () => {
    const { network, kiln, agent } = await setting()
    const [bare, coil] = [
      await fixedLevel(network, 'glaze_sides', 'none'),
      await fixedLevel(network, 'forming', 'coil'),
    ]
    const scope = await makeScope(network)
    const ids: number[] = []
    const faults = FAULT_TREE.filter(({ leaf }) => leaf).map(({ id }) => id)
    for (let i = 0; i < 6; i += 1) {
      const pick = (k: number): string => faults[(7 * i + 11 * k) % faults.length] as string
      const { firing } = await makeFiring({
        kiln,
        scope,
        pieces: 50 + i,
        lots: [
          {
            pieces: 12,
            levels: { glaze_sides: bare, forming: coil },
            losses: [{ pieces: 1 + (i % 3), fault: pick(1), also: [pick(2)] }],
          },
          {
            pieces: 15,
            turnedAway: [{ pieces: i % 4 || 1, fault: pick(3) }],
            losses: [
              { pieces: 2, fault: pick(4), outcome: 'refire' },
              { pieces: 1, fault: pick(5), outcome: 'second' },
            ],
          },
        ],
        rest: { notLookedAt: i, losses: [{ pieces: 1 + i, fault: pick(6) }] },
      })
      ids.push(firing.id)
    }

    const where = { networkId: network.id }
    const counted = {
      firingIds: ids,
      lots: await Lot.findAll({ where }),
      losses: await Loss.findAll({ where }),
    }
    const expectRate = (
      rate: Rate,
      lots: (lot: Lot) => boolean,
      fault: string | null,
      measure: Measure,
    ) => {
      const clusters = byHand(counted, lots, fault, measure)
      const { rate: wanted, lower, upper } = clusteredRate({ clusters, level: 0.95 })
      const label = `${fault ?? 'all'} ${measure}`
      const sum = (key: 'units' | 'events') =>
        clusters.reduce((total, each) => total + each[key], 0)
      expect([label, rate.events, rate.pieces], label).toEqual([label, sum('events'), sum('units')])
      if (rate.rate === null) return
      expect(rate.rate, label).toBeCloseTo(wanted ?? NaN, 12)
      expect(rate.lower, label).toBeCloseTo(lower ?? NaN, 10)
      expect(rate.upper, label).toBeCloseTo(upper ?? NaN, 10)
    }

    for (const fault of [null, ...FAULT_TREE.map(({ id }) => id)]) {
      const query = fault ? { fault } : {}
      const { rates } = await summary(agent, network, query)
      const { rows } = await by(agent, network, 'forming', query)
      for (const measure of MEASURES) {
        expectRate(rates[measure], () => true, fault, measure)
        const row = rows.find(({ uid }) => uid === coil.uid)
        if (row) expectRate(row.rates[measure], (lot) => lot.formingId === coil.id, fault, measure)
      }
    }
  }, 120_000)
})

describe('breakdowns', () => {
  it('by month are in time order, empty months among them', async () => {
    const { network, kiln, agent } = await setting()
    await makeFiring({ kiln, localDate: '2025-12-31', lots: loses({ pieces: 1 }) })
    await makeFiring({ kiln, localDate: '2026-02-01', lots: loses({ pieces: 2 }) })
    const { rows } = await by(agent, network, 'month', { from: '2025-11', to: '2026-02' })
    expect(rows.map(({ key, rates }) => [key, rates.loss.events, rates.loss.note])).toEqual([
      ['2025-11', 0, 'none'],
      ['2025-12', 1, 'one-firing'],
      ['2026-01', 0, 'none'],
      ['2026-02', 2, 'one-firing'],
    ])
    expect(rows[1]?.label).toBe('December 2025')
  })

  it('by kiln and studio add up and are sorted by lost pieces', async () => {
    const { network, studio, kiln } = await setting()
    const second = await makeKiln({ studio })
    const far = await makeKiln({ studio: await makeStudio({ network }) })
    const lead = await signedIn(
      test.app,
      await makePerson({ network, roles: [{ role: 'education-lead' }] }),
    )
    await makeFiring({ kiln, lots: loses({ pieces: 1 }) })
    await makeFiring({ kiln: second, lots: loses({ pieces: 2 }) })
    await makeFiring({ kiln: far, lots: loses({ pieces: 9 }) })
    const kilns = await by(lead, network, 'kiln')
    expect(kilns.rows.map(({ uid, rates }) => [uid, rates.loss.events])).toEqual([
      [far.uid, 9],
      [second.uid, 2],
      [kiln.uid, 1],
    ])
    const studios = await by(lead, network, 'studio')
    expect(studios.rows.map(({ rates }) => [rates.loss.events, rates.loss.firings])).toEqual([
      [9, 1],
      [3, 2],
    ])
  })

  it('by fault list every node that was mentioned', async () => {
    const { network, kiln, agent } = await setting()
    await makeFiring({
      kiln,
      lots: loses(
        { pieces: 2, fault: 's-crack' },
        { pieces: 1, fault: 'pinholing', outcome: 'second' },
      ),
    })
    const { rows } = await by(agent, network, 'fault')
    expect(rows.map(({ key, rates }) => [key, rates.loss.events, rates.blemish.events])).toEqual([
      ['crack-not-named', 2, 0],
      ['base-crack', 2, 0],
      ['s-crack', 2, 0],
      ['glaze-surface', 0, 1],
      ['holes-or-bubbles', 0, 1],
      ['pinholing', 0, 1],
    ])
    const narrowed = await by(agent, network, 'fault', { fault: 'base-crack' })
    expect(narrowed.rows.map(({ key }) => key)).toEqual(['base-crack', 's-crack'])
  })

  it('by a factor say for what share of the pieces it is recorded', async () => {
    const { network, studio, kiln, agent } = await setting()
    const glazes = [
      await makeLevel({ studio, factor: 'glaze', name: 'celadon' }),
      await makeLevel({ studio, factor: 'glaze', name: 'tenmoku' }),
    ]
    await makeFiring({
      kiln,
      pieces: 40,
      lots: [{ pieces: 10, levels: { glaze: glazes }, losses: [{ pieces: 2 }] }],
    })
    await makeFiring({
      kiln,
      pieces: 60,
      lots: [{ pieces: 15, levels: { glaze: glazes[1] as never } }],
    })
    const { rows, coverage } = await by(agent, network, 'glaze')
    expect(
      rows.map(({ label, rates }) => [
        label,
        rates.loss.events,
        rates.loss.pieces,
        rates.loss.firings,
      ]),
    ).toEqual([
      ['celadon', 2, 10, 1],
      ['tenmoku', 2, 25, 2],
    ])
    expect(coverage.recordedShare).toBe(0.25)
  })

  it('by a factor of the firing are over whole firings', async () => {
    const { network, studio, kiln, agent } = await setting()
    const programme = await makeLevel({ studio, factor: 'programme', name: 'slow' })
    const fan = await fixedLevel(network, 'cooling', 'fan')
    await makeFiring({
      kiln,
      programme: programme.uid,
      levels: { cooling: fan.uid },
      lots: loses({ pieces: 2 }),
      report: { openingTemperatureC: 130 },
    })
    await makeFiring({ kiln, lots: loses({ pieces: 5 }) })
    for (const [dimension, label] of [
      ['programme', 'slow'],
      ['cooling', 'fan'],
      ['opening_temperature', '100 to 149 °C'],
    ] as const) {
      const { rows, coverage } = await by(agent, network, dimension)
      expect(rows.map((row) => [row.label, row.rates.loss.events, row.rates.loss.pieces])).toEqual([
        [label, 2, 20],
      ])
      expect(coverage.recordedShare).toBe(0.5)
    }
  })

  it('show no class with under 5 pieces or 3 firings outside its studio', async () => {
    const { network, studio, kiln, agent } = await setting()
    const [thin, thick] = [
      await makeLevel({ studio, factor: 'class' }),
      await makeLevel({ studio, factor: 'class' }),
    ]
    for (let i = 0; i < 3; i += 1) {
      await makeFiring({
        kiln,
        lots: [
          { pieces: 6, levels: { class: thick } },
          ...(i < 2 ? [{ pieces: 6, levels: { class: thin } }] : []),
        ],
      })
    }
    const lead = await signedIn(
      test.app,
      await makePerson({ network, roles: [{ role: 'education-lead' }] }),
    )
    expect((await by(lead, network, 'class')).rows.map(({ uid }) => uid)).toEqual([thick.uid])
    expect((await by(agent, network, 'class')).rows).toHaveLength(2)
  })

  it('are saved as CSV', async () => {
    const { network, studio, kiln, agent } = await setting()
    const level = await makeLevel({ studio, name: '=speckled, "buff"' })
    await makeFiring({
      kiln,
      lots: [{ pieces: 20, levels: { clay_body: level }, losses: [{ pieces: 5 }] }],
    })
    const path = fill(PATHS.lossesByCsv, { network: network.slug, dimension: 'clay_body' })
    const { text, headers } = await agent.get(path).expect(200)
    const [head, row] = text.split('\n')
    expect(headers['content-type']).toBe('text/csv; charset=utf-8')
    expect(headers['content-disposition']).toContain(`losses-by-clay-body-${network.slug}.csv`)
    expect(head).toMatch(/^\uFEFFclay body,loss: pieces,loss: of pieces/)
    expect(row).toMatch(/^"'=speckled, ""buff""",5,20,1,,,,one-firing/)
  })
})

describe('coverage', () => {
  it("sets firings that are reported against the kiln's own counter", async () => {
    const { network, studio, kiln, agent } = await setting()
    for (const kilnNumber of [3, 4, 7])
      await makeFiring({ kiln, kilnNumber, lots: loses({ pieces: 2 }) })
    await makeFiring({ kiln, kind: 'bisque', kilnNumber: 8, lots: loses() })
    await makeFiring({ kiln, kilnNumber: 10, status: 'packed' })
    await makeFiring({ kiln: await makeKiln({ studio }), lots: loses({ pieces: 2 }) })
    const { coverage } = await summary(agent, network)
    // Kiln one says 3 to 10, eight firings, and four are reported; the other has no counter.
    expect(coverage).toMatchObject({ reported: 5, expected: 9, recordedShare: null })
    // 8 of 80 pieces in 4 glaze firings; 4 missing firings, 4 in 5 of them glaze firings of 20 pieces.
    expect(coverage.rateIfMissingClean).toBeCloseTo(8 / (80 + 4 * (4 / 5) * 20), 12)
  })

  it('is not known without a number', async () => {
    const { network, kiln, agent } = await setting()
    await makeFiring({ kiln })
    expect((await summary(agent, network)).coverage).toEqual({
      reported: 1,
      expected: null,
      rateIfMissingClean: null,
      recordedShare: null,
    })
  })
})

describe('who sees which losses', () => {
  it('is those of the studios that the person may read', async () => {
    const { network, kiln, agent } = await setting()
    const far = await makeKiln({ studio: await makeStudio({ network }) })
    await makeFiring({ kiln, lots: loses({ pieces: 1 }) })
    await makeFiring({ kiln: far, lots: loses({ pieces: 9 }) })
    expect((await summary(agent, network)).rates.loss.events).toBe(1)
    expect((await summary(agent, network, { kiln: far.uid })).rates.loss.note).toBe('none')
    expect((await by(agent, network, 'kiln')).rows.map(({ uid }) => uid)).toEqual([kiln.uid])
  })

  it('is nobody of another network', async () => {
    const { network, kiln } = await setting()
    await makeFiring({ kiln })
    const stranger = await signedIn(test.app, await makePerson())
    await stranger.get(fill(PATHS.losses, { network: network.slug })).expect(404)
    await stranger
      .get(fill(PATHS.lossesByCsv, { network: network.slug, dimension: 'month' }))
      .expect(404)
  })
})
