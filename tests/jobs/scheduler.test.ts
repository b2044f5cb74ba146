import { spawn } from 'node:child_process'
import { once } from 'node:events'
import { createInterface } from 'node:readline'
import { beforeEach, describe, expect, it, vi } from 'vitest'
import { requestRun, whenRunRequested } from '../../server/commands/requestRun.js'
import { JobSlot } from '../../server/models/index.js'
import { createScheduler, startScheduler } from '../../server/scheduling/index.js'
import { LEASE_MS, MOST_TRIES, claimNext, ownerName } from '../../server/scheduling/slots.js'
import type { JobContext, Runner } from '../../server/scheduling/types.js'
import { testDatabaseUrl } from '../support/database.js'
import { testDeps } from '../support/deps.js'
import { makeNetwork, makePerson, makeScope } from '../support/factories.js'

/** A clock that tests move. */
function movableClock(at: string) {
  let now = Date.parse(at)
  return {
    now: () => new Date(now),
    set: (to: string) => (now = Date.parse(to)),
    pass: (ms: number) => (now += ms),
  }
}

const EVENING = '2026-03-09T20:00:00Z'
const NIGHT = '2026-03-10T02:15:30Z'

/** Says when networks were made, by the clock of a test: what fell due before does not concern them. */
async function madeAt(at: string, ids: readonly number[] | 'all'): Promise<void> {
  const { sequelize } = await testDeps()
  const where = ids === 'all' ? '' : 'WHERE id IN (:ids)'
  await sequelize.query(`UPDATE networks SET created_at = :at ${where}`, {
    replacements: { at: new Date(at), ids },
  })
}

/** Schedulers look over all networks: those that other tests of this schema left are made to owe nothing. */
beforeEach(async () => {
  await madeAt('2099-01-01T00:00:00Z', 'all')
  await JobSlot.destroy({ where: {} })
})

async function setUp(at = EVENING) {
  const clock = movableClock(at)
  const network = await makeNetwork()
  await madeAt(EVENING, [network.id])
  const deps = await testDeps({ clock })
  return { clock, network, deps, scope: await makeScope(network) }
}

const slotsOf = (networkId: number, job = 'study') =>
  JobSlot.findAll({ where: { networkId, job }, order: ['id'] })

/** A runner that notes each run and does what it is told. */
function noting(work: (context: JobContext) => Promise<string> = async () => 'Done.') {
  const runs: number[] = []
  const runner: Runner = async (context) => {
    runs.push(context.networkId)
    return work(context)
  }
  return {
    runs,
    runners: { study: runner, 'roll-up': async () => 'Right.', tidy: async () => 'Clean.' },
  }
}

describe('the scheduler', () => {
  it('runs what is due once, however many servers look at the same minute', async () => {
    const { clock, deps, network } = await setUp()
    clock.set(NIGHT)
    const { runs, runners } = noting()
    const servers = Array.from({ length: 4 }, () => createScheduler(deps, runners))
    await Promise.all(servers.map((server) => server.tick()))
    await Promise.all(servers.map((server) => server.tick()))
    expect(runs).toEqual([network.id])
    const [slot, ...more] = await slotsOf(network.id)
    expect(more).toEqual([])
    expect(slot).toMatchObject({
      slot: '2026-03-10',
      status: 'done',
      outcome: 'Done.',
      attempt: 1,
      progress: 100,
      owner: null,
    })
    expect(slot?.finishedAt).toEqual(new Date(NIGHT))
  })

  it('runs each of many waiting runs once when two servers race for them', async () => {
    const { clock, deps, network } = await setUp()
    const networks = [
      network,
      ...(await Promise.all(Array.from({ length: 7 }, () => makeNetwork()))),
    ]
    const ids = networks.map(({ id }) => id)
    await madeAt(EVENING, ids)
    clock.set(NIGHT)
    const { runs, runners } = noting()
    await Promise.all([
      createScheduler(deps, runners).tick(),
      createScheduler(deps, runners).tick(),
    ])
    expect([...runs].sort((a, b) => a - b)).toEqual([...ids].sort((a, b) => a - b))
  })

  it('makes up one night after a week of downtime', async () => {
    const { clock, deps, network } = await setUp()
    const { runs, runners } = noting()
    clock.set(NIGHT)
    await createScheduler(deps, runners).tick()
    clock.set('2026-03-17T09:00:00Z')
    await createScheduler(deps, runners).tick()
    expect(runs).toHaveLength(2)
    expect((await slotsOf(network.id)).map(({ slot }) => slot)).toEqual([
      '2026-03-10',
      '2026-03-17',
    ])
  })

  it('stores progress while it runs', async () => {
    const { clock, deps, network } = await setUp()
    clock.set(NIGHT)
    const seen: number[] = []
    const { runners } = noting(async ({ progress }) => {
      await progress(41.6)
      seen.push((await slotsOf(network.id))[0]?.progress ?? -1)
      return 'Done.'
    })
    await createScheduler(deps, runners).tick()
    expect(seen).toEqual([42])
  })

  it('tries a failed run again after a pause, three times in all, and keeps what went wrong', async () => {
    const { clock, deps, network } = await setUp()
    clock.set(NIGHT)
    const { runs, runners } = noting(async () => {
      throw new Error(`the disk is full (${runs.length})`)
    })
    const server = createScheduler(deps, runners)
    await server.tick()
    await server.tick()
    expect(runs).toHaveLength(1)
    expect((await slotsOf(network.id))[0]).toMatchObject({
      status: 'waiting',
      attempt: 1,
      error: 'the disk is full (1)',
    })
    clock.pass(61_000)
    await server.tick()
    clock.pass(301_000)
    await server.tick()
    clock.pass(3_600_000)
    await server.tick()
    expect(runs).toHaveLength(MOST_TRIES)
    expect((await slotsOf(network.id))[0]).toMatchObject({
      status: 'failed',
      attempt: MOST_TRIES,
      error: 'the disk is full (3)',
    })
  })

  it('forgets the error of a run that succeeds at its second try', async () => {
    const { clock, deps, network } = await setUp()
    clock.set(NIGHT)
    const { runs, runners } = noting(async () => {
      if (runs.length === 1) throw new Error('no connection')
      return 'Done.'
    })
    const server = createScheduler(deps, runners)
    await server.tick()
    clock.pass(61_000)
    await server.tick()
    expect((await slotsOf(network.id))[0]).toMatchObject({
      status: 'done',
      attempt: 2,
      error: null,
      outcome: 'Done.',
    })
  })

  it('takes the run of a killed process over once its lease has run out, not before', async () => {
    const { clock, deps, network, scope } = await setUp()
    await requestRun(scope, 'study', deps)
    const dying = spawn(process.execPath, ['--import', 'tsx', 'tests/support/claimAndHang.ts'], {
      env: { ...process.env, DATABASE_URL: testDatabaseUrl(), NOW: clock.now().toISOString() },
      stdio: ['ignore', 'pipe', 'inherit'],
    })
    const [line] = (await once(createInterface({ input: dying.stdout }), 'line')) as [string]
    expect(JSON.parse(line)).toMatchObject({ job: 'study', networkId: network.id, attempt: 1 })
    dying.kill('SIGKILL')
    await once(dying, 'exit')

    const { runs, runners } = noting()
    const server = createScheduler(deps, runners)
    clock.pass(LEASE_MS - 1000)
    await server.tick()
    expect(runs).toEqual([])
    clock.pass(2000)
    await server.tick()
    expect(runs).toEqual([network.id])
    expect((await slotsOf(network.id))[0]).toMatchObject({ status: 'done', attempt: 2 })
  })

  it('does not let a process that lost its run finish it', async () => {
    const { clock, deps, network } = await setUp()
    clock.set(NIGHT)
    const { runners } = noting(async ({ progress }) => {
      // Asleep for longer than the lease: another server takes over and finishes meanwhile.
      clock.pass(LEASE_MS + 1000)
      await createScheduler(deps, noting(async () => 'By the other.').runners).drain()
      await progress(50)
      return 'By the first.'
    })
    await createScheduler(deps, runners).tick()
    expect((await slotsOf(network.id))[0]).toMatchObject({
      status: 'done',
      outcome: 'By the other.',
      attempt: 2,
    })
  })

  it('gives up a run whose holders died at every try', async () => {
    const { clock, deps, network, scope } = await setUp()
    await requestRun(scope, 'study', deps)
    for (let tries = 0; tries < MOST_TRIES; tries += 1) {
      expect(await claimNext(ownerName(), deps)).not.toBeNull()
      clock.pass(LEASE_MS + 1000)
    }
    expect(await claimNext(ownerName(), deps)).toBeNull()
    expect((await slotsOf(network.id))[0]).toMatchObject({
      status: 'failed',
      error: 'The server stopped during each of 3 tries.',
    })
  })

  it('gives a run back when the server stops, for another to begin afresh', async () => {
    const { clock, deps, network } = await setUp()
    clock.set(NIGHT)
    let server = createScheduler(deps)
    const { runners } = noting(async ({ signal }) => {
      void server.stop()
      signal.throwIfAborted()
      return 'Not reached.'
    })
    server = createScheduler(deps, runners)
    await server.tick()
    expect((await slotsOf(network.id))[0]).toMatchObject({
      status: 'waiting',
      attempt: 0,
      owner: null,
      error: null,
    })
    await createScheduler(deps, noting().runners).tick()
    expect((await slotsOf(network.id))[0]).toMatchObject({ status: 'done', attempt: 1 })
  })

  it('does not run a job twice at the same time in a network', async () => {
    const { clock, deps, network, scope } = await setUp()
    clock.set(NIGHT)
    const holder = createScheduler(deps, noting().runners)
    await requestRun(scope, 'study', deps)
    expect(await claimNext(ownerName(), deps)).toMatchObject({ networkId: network.id })
    await holder.tick()
    expect((await slotsOf(network.id)).map(({ status }) => status)).toEqual(['running', 'waiting'])
  })
})

describe('startScheduler', () => {
  it('runs what is asked for in its process without waiting for the next minute, and what waited before it started', async () => {
    const { deps, network, scope } = await setUp()
    await requestRun(scope, 'study', deps)
    const scheduler = startScheduler(deps)
    const ended = (runs: number) =>
      vi.waitFor(
        async () =>
          expect((await slotsOf(network.id)).map(({ status }) => status)).toEqual(
            Array(runs).fill('done'),
          ),
        { timeout: 20_000 },
      )
    await ended(1)
    await requestRun(scope, 'study', deps)
    await ended(2)
    await scheduler.stop()
    expect((await slotsOf(network.id))[1]?.outcome).toBe(
      '0 firings, 0 lots, 0 comparisons: 0 findings.',
    )
    await requestRun(scope, 'study', deps)
    expect((await slotsOf(network.id)).map(({ status }) => status)).toEqual([
      'done',
      'done',
      'waiting',
    ])
  })
})

describe('requestRun', () => {
  it('makes one run of many requests at once, and tells who listens in this process', async () => {
    const { deps, network, scope } = await setUp()
    let told = 0
    const forget = whenRunRequested(deps, () => (told += 1))
    const asked = await Promise.all(
      Array.from({ length: 8 }, () => requestRun(scope, 'study', deps)),
    )
    forget()
    await requestRun(scope, 'study', deps)
    expect(told).toBe(8)
    const slots = await slotsOf(network.id)
    expect(slots).toHaveLength(1)
    expect(new Set(asked.map(({ id }) => id))).toEqual(new Set([slots[0]?.id]))
  })

  it('asks for another run when the last one has ended, even in the same millisecond', async () => {
    const { deps, network, scope } = await setUp()
    const server = createScheduler(deps, noting().runners)
    await requestRun(scope, 'study', deps)
    await server.drain()
    await requestRun(scope, 'study', deps)
    await server.drain()
    expect((await slotsOf(network.id)).map(({ slot, status }) => `${slot} ${status}`)).toEqual([
      'now:2026-03-09T20:00:00.000Z done',
      'now:2026-03-09T20:00:00.001Z done',
    ])
  })

  it('ends the pause of a run that failed', async () => {
    const { deps, network, scope } = await setUp()
    const { runs, runners } = noting(async () => {
      throw new Error('no')
    })
    const server = createScheduler(deps, runners)
    await requestRun(scope, 'study', deps)
    await server.drain()
    await requestRun(scope, 'study', deps)
    await server.drain()
    expect(runs).toHaveLength(2)
    expect(await slotsOf(network.id)).toHaveLength(1)
  })

  it('knows no job of that name, and no job of the installation', async () => {
    const { deps, scope, network } = await setUp()
    await expect(requestRun(scope, 'nothing', deps)).rejects.toMatchObject({ code: 'not-found' })
    await expect(requestRun(scope, 'tidy', deps)).rejects.toMatchObject({ code: 'not-found' })
    expect(await JobSlot.count({ where: { networkId: network.id } })).toBe(0)
  })

  it('keeps who asked', async () => {
    const { deps, network } = await setUp()
    const admin = await makePerson({ network, roles: [{ role: 'network-admin' }] })
    await requestRun(await makeScope(network, admin), 'study', deps)
    expect((await slotsOf(network.id))[0]?.requestedBy).toBe(admin.id)
  })
})
