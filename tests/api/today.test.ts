import { v7 } from 'uuid'
import { beforeAll, describe, expect, it } from 'vitest'
import { fixedClock } from '../../server/clock.js'
import type { Today } from '../../server/contract/today.js'
import { Finding, Study } from '../../server/models/index.js'
import type { Level, Network, User } from '../../server/models/index.js'
import { createTestApp, fill, PATHS, signedIn } from '../support/api.js'
import type { TestApp } from '../support/api.js'
import { makeKiln, makeLevel, makeNetwork, makePerson, makeStudio } from '../support/factories.js'
import { makeFiring } from '../support/firings.js'

let test: TestApp
beforeAll(async () => {
  test = await createTestApp({ clock: fixedClock('2026-03-04T12:00:00Z') })
})

async function setting() {
  const network = await makeNetwork()
  const studio = await makeStudio({ network })
  const kiln = await makeKiln({ studio })
  const technician = await makePerson({ roles: [{ role: 'technician', studio }] })
  return { network, studio, kiln, technician }
}

async function todayOf(network: Network, person: User): Promise<Today> {
  const agent = await signedIn(test.app, person)
  const { body } = await agent.get(fill(PATHS.today, { network: network.slug })).expect(200)
  return body
}

describe('today', () => {
  it('lists what is to be reported, oldest first, and what is undecided', async () => {
    const { network, kiln, technician } = await setting()
    const late = await makeFiring({ kiln, status: 'packed', localDate: '2026-03-03', pieces: 10 })
    const early = await makeFiring({ kiln, status: 'packed', localDate: '2026-02-20', pieces: 10 })
    const doubtful = await makeFiring({
      kiln,
      pieces: 10,
      rest: { losses: [{ pieces: 1, outcome: 'undecided' }] },
    })
    const today = await todayOf(network, technician)
    expect(today.toReport?.total).toBe(2)
    expect(today.toReport?.rows.map(({ uid }) => uid)).toEqual([early.firing.uid, late.firing.uid])
    expect(today.undecided?.rows.map(({ uid }) => uid)).toEqual([doubtful.firing.uid])
  })

  it('lists at most 20 of them and says how many there are', async () => {
    const { network, kiln, technician } = await setting()
    for (let i = 0; i < 21; i += 1) await makeFiring({ kiln, status: 'packed', pieces: 10 })
    const { toReport } = await todayOf(network, technician)
    expect([toReport?.total, toReport?.rows.length]).toEqual([21, 20])
  })

  it('shows the last reports, newest first', async () => {
    const { network, kiln, technician } = await setting()
    const first = await makeFiring({ kiln, pieces: 10 })
    const second = await makeFiring({ kiln, localDate: '2026-01-01', pieces: 10 })
    const { recent } = await todayOf(network, technician)
    expect(recent.map(({ uid }) => uid)).toEqual([second.firing.uid, first.firing.uid])
  })

  it('names kilns whose counter is ahead of the firings that are here', async () => {
    const { network, studio, kiln, technician } = await setting()
    const whole = await makeKiln({ studio })
    await makeFiring({ kiln, kilnNumber: 11, pieces: 10 })
    await makeFiring({ kiln, kilnNumber: 14, status: 'packed', pieces: 10 })
    await makeFiring({ kiln: whole, kilnNumber: 3, pieces: 10 })
    const { gaps } = await todayOf(network, technician)
    expect(gaps).toEqual([
      {
        kiln: { uid: kiln.uid, name: kiln.name },
        studio: { uid: studio.uid, name: studio.name },
        kilnNumber: 14,
        missing: 2,
      },
    ])
  })

  it('sets the last 30 days beside the 12 weeks before, by kind', async () => {
    const { network, kiln, technician } = await setting()
    const lose = (pieces: number) => ({ pieces: 20, rest: { losses: [{ pieces }] } })
    // 30 days to 4 March begin on 3 February; 84 days before that on 11 November.
    await makeFiring({ kiln, localDate: '2026-02-03', ...lose(1) })
    await makeFiring({ kiln, localDate: '2026-03-04', ...lose(2) })
    await makeFiring({ kiln, localDate: '2026-02-02', ...lose(4) })
    await makeFiring({ kiln, localDate: '2025-11-11', ...lose(8) })
    await makeFiring({ kiln, localDate: '2025-11-10', ...lose(16) })
    await makeFiring({ kiln, kind: 'bisque', localDate: '2026-03-01', ...lose(5) })
    const { rates } = await todayOf(network, technician)
    expect(
      rates.map(({ kind, last30, before }) => [
        kind,
        last30.events,
        last30.pieces,
        before.events,
        before.pieces,
      ]),
    ).toEqual([
      ['bisque', 5, 20, 0, 0],
      ['glaze', 3, 40, 12, 40],
    ])
    expect(rates[1]?.last30).toMatchObject({ rate: 0.075, note: 'few-firings' })
  })

  it('leaves pieces that had been fired before out of its rates', async () => {
    const { network, kiln, technician } = await setting()
    await makeFiring({
      kiln,
      lots: [
        { pieces: 10, losses: [{ pieces: 1 }] },
        { pieces: 10, refireCount: 1, losses: [{ pieces: 9 }] },
      ],
    })
    expect((await todayOf(network, technician)).rates[0]?.last30).toMatchObject({
      events: 1,
      pieces: 10,
    })
  })

  it('gives the education lead rates of every studio and nothing to report', async () => {
    const { network, studio, kiln } = await setting()
    const other = await makeStudio({ network })
    await makeFiring({ kiln, pieces: 10 })
    await makeFiring({ kiln: await makeKiln({ studio: other }), pieces: 10 })
    await makeFiring({ kiln, status: 'packed', pieces: 10, kilnNumber: 9 })
    const today = await todayOf(
      network,
      await makePerson({ network, roles: [{ role: 'education-lead' }] }),
    )
    expect(today).toMatchObject({ toReport: null, undecided: null, gaps: [] })
    expect(today.rates.map(({ studio: of }) => of.uid).sort()).toEqual(
      [studio.uid, other.uid].sort(),
    )
    expect(today.findings).toEqual({ study: null, rows: [] })
  })

  it('holds nothing of studios where the person does not work', async () => {
    const { network, technician } = await setting()
    const far = await makeKiln({ studio: await makeStudio({ network }) })
    await makeFiring({ kiln: far, status: 'packed', kilnNumber: 1, pieces: 10 })
    await makeFiring({
      kiln: far,
      kilnNumber: 5,
      pieces: 10,
      rest: { losses: [{ pieces: 1, outcome: 'undecided' }] },
    })
    expect(await todayOf(network, technician)).toMatchObject({
      toReport: { total: 0, rows: [] },
      undecided: { total: 0, rows: [] },
      recent: [],
      gaps: [],
      rates: [],
    })
  })

  it('shows the five surest of the leading findings', async () => {
    const { network, technician } = await setting()
    const level = await makeLevel({ network })
    const study = await makeStudy(network)
    for (const qValue of [0.05, 0.001, 0.02, 0.002, 0.09, 0.003])
      await makeFinding(study, level, qValue)
    for (const person of [
      technician,
      await makePerson({ network, roles: [{ role: 'education-lead' }] }),
    ]) {
      const { findings } = await todayOf(network, person)
      expect(findings?.study?.uid).toBe(study.uid)
      expect(findings?.rows.map((each) => each.qValue)).toEqual([0.001, 0.002, 0.003, 0.02, 0.05])
    }
  })
})

/** A study of the whole network. */
function makeStudy(network: Network): Promise<Study> {
  const at = new Date('2026-03-04T02:00:00Z')
  return Study.create({
    networkId: network.id,
    uid: v7(),
    windowFrom: '2025-03-05',
    windowTo: '2026-03-04',
    firings: 40,
    lots: 200,
    pieces: 3000,
    comparisons: 100,
    findings: 6,
    parameters: {},
    watermark: 0,
    seed: 1,
    codeVersion: 'test',
    startedAt: at,
    finishedAt: at,
  })
}

function makeFinding(study: Study, level: Level, qValue: number): Promise<Finding> {
  return Finding.create({
    networkId: study.networkId,
    uid: v7(),
    studyId: study.id,
    identity: `s-crack ${qValue}`,
    fault: 's-crack',
    factor: 'clay_body',
    levelId: level.id,
    comparison: 'within-firing',
    ratio: 2,
    lowerLimit: 1.2,
    upperLimit: 3,
    pValue: qValue / 10,
    qValue,
    exposedUnits: 100,
    exposedEvents: 20,
    unexposedUnits: 100,
    unexposedEvents: 10,
    mixedStrata: 12,
    informativeStrata: 10,
    recordedShare: 0.9,
    levels: [],
    firstSeenOn: '2026-03-04',
  })
}
