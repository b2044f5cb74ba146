import { beforeAll, describe, expect, it } from 'vitest'
import { fixedClock } from '../../server/clock.js'
import type { FiringRow } from '../../server/contract/firings.js'
import { createTestApp, fill, PATHS, signedIn } from '../support/api.js'
import type { Agent, TestApp } from '../support/api.js'
import {
  fixedLevel,
  makeKiln,
  makeLevel,
  makeNetwork,
  makePerson,
  makeStudio,
} from '../support/factories.js'
import { makeFiring } from '../support/firings.js'

let test: TestApp
beforeAll(async () => {
  test = await createTestApp({ clock: fixedClock('2026-03-04T12:00:00Z') })
})

async function setting() {
  const network = await makeNetwork()
  const studio = await makeStudio({ network })
  const kiln = await makeKiln({ studio })
  const agent = await signedIn(
    test.app,
    await makePerson({ roles: [{ role: 'technician', studio }] }),
  )
  const list = async (query: object = {}) => {
    const { body } = await agent
      .get(fill(PATHS.firings, { network: network.slug }))
      .query(query)
      .expect(200)
    return body as { rows: FiringRow[]; total: number; page: number; pageSize: number }
  }
  const uids = async (query: object = {}) => (await list(query)).rows.map(({ uid }) => uid)
  return { network, studio, kiln, agent, list, uids }
}

const csvOf = (agent: Agent, network: string, query: object = {}) =>
  agent.get(fill(PATHS.firingsCsv, { network })).query(query).expect(200)

describe('the list of firings', () => {
  it('is newest first, page by page, with the total', async () => {
    const { kiln, list } = await setting()
    const made = []
    for (const day of ['01', '02', '03', '04', '05']) {
      made.push(
        (await makeFiring({ kiln, status: 'packed', localDate: `2026-02-${day}`, pieces: 9 }))
          .firing.uid,
      )
    }
    const first = await list({ pageSize: 2 })
    expect(first).toMatchObject({ total: 5, page: 1, pageSize: 2 })
    expect(first.rows.map(({ uid }) => uid)).toEqual([made[4], made[3]])
    expect((await list({ pageSize: 2, page: 3 })).rows.map(({ uid }) => uid)).toEqual([made[0]])
    expect((await list({ pageSize: 2, page: 4 })).rows).toEqual([])
  })

  it('names studio, kiln and programme and what the person may do', async () => {
    const { studio, kiln, list } = await setting()
    const programme = await makeLevel({ studio, factor: 'programme' })
    await makeFiring({
      kiln,
      programme: programme.uid,
      cone: '6',
      kilnNumber: 14,
      about: true,
      pieces: 30,
      rest: { losses: [{ pieces: 2 }] },
    })
    expect((await list()).rows).toMatchObject([
      {
        studio: { uid: studio.uid, name: studio.name },
        kiln: { uid: kiln.uid, name: kiln.name },
        programme: { uid: programme.uid, name: programme.name },
        cone: '6',
        kilnNumber: 14,
        about: true,
        localDate: '2026-03-02',
        pieces: 30,
        wasters: 2,
        abilities: { 'firings.amend': true, 'firings.void': false },
      },
    ])
  })

  it('is sorted by lost pieces, pieces and kiln', async () => {
    const { studio, kiln, uids } = await setting()
    const other = await makeKiln({ studio, name: 'A first kiln' })
    const few = (await makeFiring({ kiln, pieces: 50, rest: { losses: [{ pieces: 1 }] } })).firing
      .uid
    const many = (
      await makeFiring({
        kiln: other,
        pieces: 20,
        rest: { losses: [{ pieces: 2, outcome: 'refire' }, { pieces: 2 }] },
      })
    ).firing.uid
    expect(await uids({ sort: '-lost' })).toEqual([many, few])
    expect(await uids({ sort: 'lost' })).toEqual([few, many])
    expect(await uids({ sort: '-pieces' })).toEqual([few, many])
    expect(await uids({ sort: 'kiln' })).toEqual([many, few])
  })

  it('is filtered by studio, kiln, kind, status, days and losses', async () => {
    const { studio, kiln, uids } = await setting()
    const other = await makeKiln({ studio })
    const a = (await makeFiring({ kiln, localDate: '2026-01-10', rest: {}, pieces: 10 })).firing.uid
    const b = (
      await makeFiring({
        kiln: other,
        kind: 'bisque',
        localDate: '2026-02-10',
        pieces: 10,
        rest: { losses: [{ pieces: 1 }] },
      })
    ).firing.uid
    const c = (
      await makeFiring({
        kiln: other,
        kind: 'raku',
        status: 'packed',
        localDate: '2026-03-01',
        pieces: 10,
      })
    ).firing.uid
    expect(await uids({ studio: studio.uid })).toEqual([c, b, a])
    expect(await uids({ kiln: other.uid })).toEqual([c, b])
    expect(await uids({ kiln: `${kiln.uid},${other.uid}` })).toEqual([c, b, a])
    expect(await uids({ kind: 'glaze,raku' })).toEqual([c, a])
    expect(await uids({ status: 'packed' })).toEqual([c])
    expect(await uids({ from: '2026-02-01', to: '2026-02-28' })).toEqual([b])
    expect(await uids({ lost: 'some' })).toEqual([b])
    expect(await uids({ lost: 'none', status: 'reported' })).toEqual([a])
  })

  it('finds a fault by any mention of it or of one below it', async () => {
    const { kiln, uids } = await setting()
    const main = (
      await makeFiring({ kiln, pieces: 10, rest: { losses: [{ pieces: 1, fault: 's-crack' }] } })
    ).firing.uid
    const also = (
      await makeFiring({
        kiln,
        pieces: 10,
        rest: { losses: [{ pieces: 1, fault: 'warping', also: ['star-base-crack'] }] },
      })
    ).firing.uid
    await makeFiring({ kiln, pieces: 10, rest: { losses: [{ pieces: 1, fault: 'crazing' }] } })
    expect(await uids({ fault: 'base-crack', sort: 'date' })).toEqual([main, also])
    expect(await uids({ fault: 'star-base-crack' })).toEqual([also])
    expect(await uids({ fault: 'bad-luck' })).toEqual([])
  })

  it('finds levels of lots and of the firing: of one factor either, of several all', async () => {
    const { network, studio, kiln, uids } = await setting()
    const [buff, black] = [await makeLevel({ studio }), await makeLevel({ studio })]
    const [celadon, tenmoku] = [
      await makeLevel({ studio, factor: 'glaze' }),
      await makeLevel({ studio, factor: 'glaze' }),
    ]
    const rack = await makeLevel({ studio, factor: 'rack' })
    const programme = await makeLevel({ studio, factor: 'programme' })
    const fan = await fixedLevel(network, 'cooling', 'fan')
    const warm = await fixedLevel(network, 'opening_temperature', '100-149')
    const a = (
      await makeFiring({
        kiln,
        lots: [{ pieces: 5, levels: { clay_body: buff, glaze: [celadon, tenmoku], rack } }],
        programme: programme.uid,
        levels: { cooling: fan.uid },
        report: { openingTemperatureC: 100 },
      })
    ).firing.uid
    const b = (
      await makeFiring({
        kiln,
        lots: [{ pieces: 5, levels: { clay_body: black, glaze: celadon } }],
        report: { openingTemperatureC: 150 },
      })
    ).firing.uid
    expect(await uids({ level: `${buff.uid},${black.uid}`, sort: 'date' })).toEqual([a, b])
    expect(await uids({ level: `${buff.uid},${celadon.uid}` })).toEqual([a])
    for (const level of [tenmoku, rack, programme, fan, warm])
      expect(await uids({ level: level.uid })).toEqual([a])
    expect(await uids({ level: kiln.uid })).toEqual([])
  })

  it('leaves void firings out unless they are asked for', async () => {
    const { network, studio, kiln, uids } = await setting()
    const owner = await signedIn(test.app, await makePerson({ roles: [{ role: 'owner', studio }] }))
    const { firing } = await makeFiring({ kiln })
    await owner
      .post(fill(PATHS.firingVoid, { network: network.slug, firing: firing.uid }))
      .send({ base: 2, reason: 'twice' })
      .expect(200)
    expect(await uids()).toEqual([])
    expect(await uids({ status: 'void' })).toEqual([firing.uid])
  })

  it('holds nothing of other studios, whatever the filter says', async () => {
    const { network, uids } = await setting()
    const far = await makeKiln({ studio: await makeStudio({ network }) })
    await makeFiring({ kiln: far })
    expect(await uids()).toEqual([])
    expect(await uids({ kiln: far.uid })).toEqual([])
  })
})

describe('the list as CSV', () => {
  it('holds exactly what is filtered, in the order asked for', async () => {
    const { network, kiln, agent } = await setting()
    await makeFiring({
      kiln,
      localDate: '2026-01-10',
      kilnNumber: 7,
      pieces: 30,
      rest: {
        turnedAway: [{ pieces: 1 }],
        notLookedAt: 2,
        losses: [{ pieces: 3 }, { pieces: 1, outcome: 'second' }],
      },
    })
    await makeFiring({ kiln, localDate: '2026-02-10', pieces: 10 })
    await makeFiring({ kiln, localDate: '2026-02-11', kind: 'bisque', pieces: 10 })
    const { text, headers } = await csvOf(agent, network.slug, { kind: 'glaze', sort: 'date' })
    const [head, first, second, end] = text.split('\n')
    expect(headers['content-disposition']).toContain(`firings-${network.slug}.csv`)
    expect(head).toMatch(/^\uFEFFdate,studio,kiln,firing number,kind,/)
    expect(first).toMatch(/^2026-01-10,.*,7,glaze,,,reported,30,,1,29,23,1,0,3,0,2,,/)
    expect(second).toMatch(/^2026-02-10,/)
    expect(end).toBe('')
  })

  it('makes plain text of what a spreadsheet would run', async () => {
    const { network, studio, agent } = await setting()
    await makeFiring({ kiln: await makeKiln({ studio, name: '=cmd()' }), pieces: 10 })
    const { text } = await csvOf(agent, network.slug)
    expect(text).toContain(",'=cmd(),")
  })

  it('is of the studios that the person may read', async () => {
    const { network, agent } = await setting()
    await makeFiring({ kiln: await makeKiln({ studio: await makeStudio({ network }) }) })
    expect((await csvOf(agent, network.slug)).text.trim().split('\n')).toHaveLength(1)
  })
})
