import { parse } from 'csv-parse/sync'
import { v7 } from 'uuid'
import { describe, expect, it } from 'vitest'
import { fixedClock } from '../../server/clock.js'
import { runStudy } from '../../server/commands/runStudy.js'
import { findingOutput, findingsOutput } from '../../server/contract/findings.js'
import type { FindingView } from '../../server/contract/findings.js'
import type { Level, Network, Studio, User } from '../../server/models/index.js'
import { createTestApp, fill, PATHS, signedIn } from '../support/api.js'
import type { Agent } from '../support/api.js'
import {
  makeLevel,
  makeMembership,
  makeNetwork,
  makePerson,
  makeScope,
  makeStudio,
} from '../support/factories.js'
import { plantFirings } from '../support/plantedFirings.js'

interface World {
  network: Network
  /** S-cracks on the network's porcelain. */
  quay: Studio
  /** S-cracks on a clay body of its own list. */
  yard: Studio
  porcelain: Level
  own: Level
  as: (person: User) => Promise<Agent>
  admin: User
  ownerOfQuay: User
}

async function world(): Promise<World> {
  const network = await makeNetwork()
  const [quay, yard] = [
    await makeStudio({ network, name: 'Quayside' }),
    await makeStudio({ network, name: 'Old Yard' }),
  ]
  const buff = await makeLevel({ network, name: 'Buff stoneware' })
  const own = await makeLevel({ studio: yard, name: 'Yard blend' })
  const { risky } = await plantFirings({ studio: quay, lastDay: '2026-03-09', safe: buff })
  await plantFirings({ studio: yard, lastDay: '2026-03-09', risky: own, safe: buff })
  const { app, deps } = await createTestApp({ clock: fixedClock('2026-03-10T12:00:00Z') })
  await runStudy(await makeScope(network), deps)
  return {
    network,
    quay,
    yard,
    porcelain: risky,
    own,
    as: (person) => signedIn(app, person),
    admin: await makePerson({ network, roles: [{ role: 'network-admin' }] }),
    ownerOfQuay: await makePerson({ network, roles: [{ role: 'owner', studio: quay }] }),
  }
}

let shared: Promise<World> | undefined

/** One world for the tests that only read it. */
function readWorld(): Promise<World> {
  shared ??= world()
  return shared
}

const listPath = ({ network }: World) => fill(PATHS.findings, { network: network.slug })
const onePath = ({ network }: World, finding: string) =>
  fill(PATHS.finding, { network: network.slug, finding })

async function list(browser: Agent, at: World, query: Record<string, string> = {}) {
  const { body } = await browser.get(listPath(at)).query(query).expect(200)
  return findingsOutput.parse(body)
}

const about = (rows: readonly FindingView[], level: Level) =>
  rows.filter((row) => row.level.uid === level.uid)

describe('GET /findings', () => {
  it('lists the newest study of the network with its counts and the number of comparisons', async () => {
    const at = await readWorld()
    const { study, rows, total, scopes } = await list(await at.as(at.admin), at)
    expect(study).toMatchObject({ studio: null, firings: 40, lots: 80, windowTo: '2026-03-10' })
    expect(study?.comparisons).toBeGreaterThanOrEqual(rows.length)
    expect(total).toBe(rows.length)
    expect(scopes).toEqual([
      { key: 'network', name: 'All studios' },
      { key: at.yard.uid, name: 'Old Yard' },
      { key: at.quay.uid, name: 'Quayside' },
    ])
    expect(about(rows, at.porcelain)).toEqual([
      expect.objectContaining({
        studio: null,
        fault: 's-crack',
        factor: 'clay_body',
        comparison: 'within-firing',
        exposed: { events: 120, units: 400 },
        unexposed: { events: 10, units: 400 },
        mixedStrata: 20,
        firstSeenOn: '2026-03-10',
        verdict: null,
      }),
    ])
  })

  it('shows a finding about a studio’s own level to those who may read that studio, and to nobody else', async () => {
    const at = await readWorld()
    const everything = await list(await at.as(at.admin), at)
    const lead = await list(
      await at.as(await makePerson({ network: at.network, roles: [{ role: 'education-lead' }] })),
      at,
    )
    const quay = await list(await at.as(at.ownerOfQuay), at)
    expect(about(everything.rows, at.own)).toHaveLength(1)
    expect(about(lead.rows, at.own)).toHaveLength(1)
    expect(about(quay.rows, at.own)).toHaveLength(0)
    expect(about(quay.rows, at.porcelain)).toHaveLength(1)
    expect(quay.total).toBe(everything.total - 1)
    expect(quay.scopes.map(({ name }) => name)).toEqual(['All studios', 'Quayside'])
  })

  it('lists the study of a studio of one’s own; another studio’s is a 404 like one that is not there', async () => {
    const at = await readWorld()
    const browser = await at.as(at.ownerOfQuay)
    const own = await list(browser, at, { scope: at.quay.uid })
    expect(own.study).toMatchObject({ studio: { name: 'Quayside' }, firings: 20 })
    expect(own.rows.map(({ studio }) => studio?.uid)).toEqual(own.rows.map(() => at.quay.uid))
    const foreign = await browser.get(listPath(at)).query({ scope: at.yard.uid }).expect(404)
    const missing = await browser.get(listPath(at)).query({ scope: v7() }).expect(404)
    expect({ ...foreign.body.error, requestId: '' }).toEqual({
      ...missing.body.error,
      requestId: '',
    })
  })

  it('filters by a fault and those below it, by factor, by q and by direction', async () => {
    const at = await readWorld()
    const browser = await at.as(at.admin)
    const all = (await list(browser, at)).total
    expect(all).toBeGreaterThan(0)
    expect((await list(browser, at, { fault: 'crack-not-named' })).total).toBe(all)
    expect((await list(browser, at, { fault: 's-crack' })).total).toBe(all)
    expect((await list(browser, at, { fault: 'dunt' })).total).toBe(0)
    expect((await list(browser, at, { factor: 'glaze' })).total).toBe(0)
    const raised = await list(browser, at, { direction: 'raised' })
    const lowered = await list(browser, at, { direction: 'lowered' })
    expect(raised.total + lowered.total).toBe(all)
    expect(raised.rows.every(({ ratio }) => ratio === null || ratio > 1)).toBe(true)
    expect(lowered.rows.every(({ ratio }) => ratio !== null && ratio <= 1)).toBe(true)
    for (const { qValue } of (await list(browser, at, { q: '0.001' })).rows)
      expect(qValue).toBeLessThanOrEqual(0.001)
  })

  it('gives a page at a time, surest first', async () => {
    const at = await readWorld()
    const browser = await at.as(at.admin)
    const whole = await list(browser, at)
    const qs = whole.rows.map(({ qValue }) => qValue)
    expect(qs).toEqual([...qs].sort((a, b) => a - b))
    const second = await list(browser, at, { page: '2', pageSize: '1' })
    expect(second).toMatchObject({ page: 2, pageSize: 1, total: whole.total })
    expect(second.rows).toEqual([whole.rows[1]])
  })

  it('names the field of a filter that cannot be', async () => {
    const at = await readWorld()
    const { body } = await (
      await at.as(at.admin)
    )
      .get(listPath(at))
      .query({ q: '2', direction: 'up' })
      .expect(422)
    expect(Object.keys(body.error.fields)).toEqual(['q', 'direction'])
  })

  it('has no study before the first night', async () => {
    const network = await makeNetwork()
    const { app } = await createTestApp()
    const admin = await makePerson({ network, roles: [{ role: 'network-admin' }] })
    const { body } = await (
      await signedIn(app, admin)
    )
      .get(fill(PATHS.findings, { network: network.slug }))
      .expect(200)
    expect(body).toMatchObject({ study: null, rows: [], total: 0 })
  })
})

describe('GET /findings/:finding', () => {
  it('gives the table by level, the firings behind it, what to check and what to beware of', async () => {
    const at = await readWorld()
    const browser = await at.as(at.ownerOfQuay)
    const [finding] = about((await list(browser, at)).rows, at.porcelain)
    const detail = findingOutput.parse(
      (await browser.get(onePath(at, finding?.uid ?? '')).expect(200)).body,
    )
    expect(detail.study.comparisons).toBeGreaterThan(0)
    expect(detail.levels[0]).toMatchObject({
      level: { uid: at.porcelain.uid, name: 'Porcelain' },
      exposed: true,
      rate: { events: 120, pieces: 400, firings: 20, note: 'ok' },
    })
    expect(detail.levels[0]?.rate.lower).toBeLessThan(0.3)
    // Not the clay body of the other studio's own list.
    expect(detail.levels.map(({ level }) => level.name)).toEqual(['Porcelain', 'Buff stoneware'])
    expect(detail.firingFilters).toMatchObject({
      fault: 's-crack',
      level: at.porcelain.uid,
      status: 'reported',
      from: '2025-03-11',
      to: '2026-03-10',
      kind: 'bisque,glaze,single,raku',
    })
    // facts.json: the clay body's way to S-cracks, from memory of a publication.
    expect(detail.checks[0]?.text).toMatch(/^Fine, very plastic body/)
    expect(detail.checks[0]?.source).toMatch(/^from memory of .*; common practice, no source$/)
    expect(detail.cautions[0]).toEqual({
      text: 'Through-cracks leak hot liquid and hold food; do not pass as functional ware.',
      source: 'common practice, no source',
    })
    expect(detail.cautions.at(-1)?.text).toMatch(/local codes/i)
  })

  it('shows the whole table to those who may read every studio', async () => {
    const at = await readWorld()
    const browser = await at.as(at.admin)
    const [finding] = about((await list(browser, at)).rows, at.porcelain)
    const { body } = await browser.get(onePath(at, finding?.uid ?? ''))
    expect(body.levels.map(({ level }: { level: { name: string } }) => level.name)).toContain(
      'Yard blend',
    )
  })

  it('goes by the present name of a level', async () => {
    const at = await world()
    const browser = await at.as(at.admin)
    await at.porcelain.update({ name: 'Fine porcelain' })
    const [finding] = about((await list(browser, at)).rows, at.porcelain)
    const { body } = await browser.get(onePath(at, finding?.uid ?? ''))
    expect(body.levels[0].level.name).toBe('Fine porcelain')
  })

  it('answers the same 404 to a stranger, to another studio and for what is not there', async () => {
    const at = await readWorld()
    const everything = await at.as(at.admin)
    const [ofOwnLevel] = about((await list(everything, at)).rows, at.own)
    const [ofYard] = (await list(everything, at, { scope: at.yard.uid })).rows
    const quay = await at.as(at.ownerOfQuay)
    const stranger = await at.as(
      await makePerson({ network: await makeNetwork(), roles: [{ role: 'network-admin' }] }),
    )
    const answers = [
      await quay.get(onePath(at, ofOwnLevel?.uid ?? '')),
      await quay.get(onePath(at, ofYard?.uid ?? '')),
      await quay.get(onePath(at, v7())),
      await quay.get(onePath(at, 'not-a-uid')),
      await stranger.get(onePath(at, ofOwnLevel?.uid ?? '')),
      await stranger.get(listPath(at)),
    ]
    expect(answers.map(({ status }) => status)).toEqual(answers.map(() => 404))
    expect(new Set(answers.map(({ body }) => body.error.message)).size).toBe(1)
  })

  it('does not find a finding under the path of another network of the same person', async () => {
    const [one, two] = [await world(), await world()]
    await makeMembership(one.admin, { role: 'network-admin' }, two.network)
    const browser = await one.as(one.admin)
    const [finding] = (await list(browser, one)).rows
    await browser.get(onePath(one, finding?.uid ?? '')).expect(200)
    await browser.get(onePath(two, finding?.uid ?? '')).expect(404)
  })
})

describe('GET /findings.csv', () => {
  it('gives every finding of the list with its sentence and unrounded numbers', async () => {
    const at = await readWorld()
    const browser = await at.as(at.ownerOfQuay)
    const path = fill(PATHS.findingsCsv, { network: at.network.slug })
    const { text, headers } = await browser.get(path).query({ fault: 's-crack' }).expect(200)
    expect(headers['content-type']).toMatch(/^text\/csv/)
    expect(headers['content-disposition']).toBe(
      `attachment; filename=findings-${at.network.slug}-2026-03-10.csv`,
    )
    const rows = parse(text, { columns: true, bom: true }) as unknown as Record<string, string>[]
    const { rows: listed } = await list(browser, at, { fault: 's-crack' })
    expect(rows).toHaveLength(listed.length)
    const row = rows.find(({ level }) => level === 'Porcelain')
    expect(row?.finding).toBe(
      'S-cracks show 12 times as often on ware of porcelain, compared with other ware in the same firings.',
    )
    expect(Number(row?.ratio)).toBeCloseTo(12, 10)
    expect(row?.['pieces, with the level']).toBe('400')
    await browser.get(path).query({ scope: at.yard.uid }).expect(404)
  })
})
