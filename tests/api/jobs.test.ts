import { describe, expect, it } from 'vitest'
import { fixedClock } from '../../server/clock.js'
import { jobsOutput } from '../../server/contract/jobs.js'
import { JobSlot } from '../../server/models/index.js'
import { createScheduler } from '../../server/scheduling/index.js'
import { createTestApp, fill, PATHS, signedIn, visitor } from '../support/api.js'
import { makeNetwork, makePerson, makeStudio } from '../support/factories.js'
import { plantFirings } from '../support/plantedFirings.js'

async function setUp() {
  const network = await makeNetwork({ timeZone: 'America/New_York' })
  const studio = await makeStudio({ network })
  const test = await createTestApp({ clock: fixedClock('2026-03-10T12:00:00Z') })
  const admin = await makePerson({ network, roles: [{ role: 'network-admin' }] })
  const path = fill(PATHS.jobs, { network: network.slug })
  const run = (job: string) => fill(PATHS.jobRuns, { network: network.slug, job })
  return { ...test, network, studio, admin, path, run, browser: await signedIn(test.app, admin) }
}

describe('GET /jobs', () => {
  it('lists the jobs of the network with their schedule in its zone and the next time', async () => {
    const { browser, path } = await setUp()
    const { body } = await browser.get(path).expect(200)
    const { jobs, runs } = jobsOutput.parse(body)
    expect(
      jobs.map(({ job, schedule, nextAt, last }) => ({ job, schedule, nextAt, last })),
    ).toEqual([
      {
        job: 'study',
        schedule: 'every night at 02:15, America/New_York time',
        nextAt: '2026-03-11T06:15:00.000Z',
        last: null,
      },
      {
        job: 'roll-up',
        schedule: 'every Sunday at 03:00, America/New_York time',
        nextAt: '2026-03-15T07:00:00.000Z',
        last: null,
      },
    ])
    expect(runs).toEqual([])
  })

  it('shows runs of its own network alone', async () => {
    const { browser, path } = await setUp()
    const { browser: other, run: otherRun } = await setUp()
    await other.post(otherRun('study')).expect(202)
    expect((await browser.get(path)).body.runs).toEqual([])
  })
})

describe('POST /jobs/:job/runs', () => {
  it('makes a waiting run with the name of who asked, and answers the same one to a second press', async () => {
    const { browser, run, path, admin, network } = await setUp()
    const first = await browser.post(run('study')).expect(202)
    expect(first.body.run).toMatchObject({
      job: 'study',
      status: 'waiting',
      progress: 0,
      requestedBy: admin.name,
      slot: 'now:2026-03-10T12:00:00.000Z',
    })
    const second = await browser.post(run('study')).expect(202)
    expect(second.body.run).toEqual(first.body.run)
    expect(await JobSlot.count({ where: { networkId: network.id } })).toBe(1)
    const { body } = await browser.get(path)
    expect(body.jobs[0].last).toEqual(first.body.run)
    expect(body.runs).toEqual([first.body.run])
  })

  it('leads to findings and an outcome in words once the scheduler has run it', async () => {
    const { browser, run, path, studio, deps, network } = await setUp()
    await plantFirings({ studio, lastDay: '2026-03-09' })
    await browser.post(run('study')).expect(202)
    await createScheduler(deps).drain()
    const { body } = await browser.get(path)
    expect(body.runs[0]).toMatchObject({ status: 'done', progress: 100, error: null })
    expect(body.runs[0].outcome).toBe(
      '20 firings, 40 lots, 1 comparison: 1 finding; 1 more in 1 studio studied alone.',
    )
    const findings = await browser.get(fill(PATHS.findings, { network: network.slug })).expect(200)
    expect(findings.body.total).toBe(1)
  })

  it('answers 404 for a job that networks do not have', async () => {
    const { browser, run } = await setUp()
    await browser.post(run('tidy')).expect(404)
    await browser.post(run('nothing')).expect(404)
  })

  it('is refused to owners, technicians and education leads, and changes nothing then', async () => {
    const { app, run, path, studio, network } = await setUp()
    for (const roles of [
      [{ role: 'owner' as const, studio }],
      [{ role: 'technician' as const, studio }],
      [{ role: 'education-lead' as const }],
    ]) {
      const browser = await signedIn(app, await makePerson({ network, roles }))
      await browser.get(path).expect(403)
      await browser.post(run('study')).expect(403)
    }
    expect(await JobSlot.count({ where: { networkId: network.id } })).toBe(0)
  })

  it('answers 404 to strangers of another network and 401 to nobody', async () => {
    const { app, run, path, network } = await setUp()
    const stranger = await signedIn(
      app,
      await makePerson({ network: await makeNetwork(), roles: [{ role: 'network-admin' }] }),
    )
    await stranger.get(path).expect(404)
    await stranger.post(run('study')).expect(404)
    await visitor(app).get(path).expect(401)
    expect(await JobSlot.count({ where: { networkId: network.id } })).toBe(0)
  })
})
