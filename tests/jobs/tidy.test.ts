import { v7 } from 'uuid'
import { QueryTypes } from 'sequelize'
import { describe, expect, it } from 'vitest'
import { tidy } from '../../jobs/tidy.js'
import { fixedClock } from '../../server/clock.js'
import { JobSlot, OneTimeLink } from '../../server/models/index.js'
import { testDeps } from '../support/deps.js'
import { makeNetwork, makePerson } from '../support/factories.js'

const NOW = '2026-09-01T03:30:00Z'

async function runTidy(): Promise<string> {
  const deps = await testDeps({ clock: fixedClock(NOW) })
  return tidy({
    networkId: 0,
    deps,
    signal: new AbortController().signal,
    progress: async () => undefined,
  })
}

async function insert(sql: string, replacements: Record<string, unknown>): Promise<void> {
  const { sequelize } = await testDeps()
  await sequelize.query(sql, { replacements })
}

async function columnOf(sql: string, replacements: Record<string, unknown>): Promise<unknown[]> {
  const { sequelize } = await testDeps()
  const rows = await sequelize.query<{ value: unknown }>(sql, {
    type: QueryTypes.SELECT,
    replacements,
  })
  return rows.map(({ value }) => value)
}

describe('tidying', () => {
  it('removes sessions that have expired and keeps the others', async () => {
    const [old, valid] = [v7(), v7()]
    for (const [sid, expires] of [
      [old, '2026-09-01 03:29:59'],
      [valid, '2026-09-01 03:30:01'],
    ]) {
      await insert(
        "INSERT INTO sessions (sid, expires, data, created_at, updated_at) VALUES (:sid, :expires, '{}', NOW(), NOW())",
        { sid, expires },
      )
    }
    await runTidy()
    expect(
      await columnOf('SELECT sid AS value FROM sessions WHERE sid IN (:both)', {
        both: [old, valid],
      }),
    ).toEqual([valid])
  })

  it('removes links a month after they expired', async () => {
    const { id: userId } = await makePerson()
    const made = ['2026-07-30T00:00:00Z', '2026-08-20T00:00:00Z'].map((expiresAt, i) => ({
      userId,
      kind: 'invite' as const,
      tokenHash: String(i).repeat(8) + v7().replaceAll('-', '').repeat(2).slice(8),
      expiresAt: new Date(expiresAt),
    }))
    for (const link of made) await OneTimeLink.create(link)
    await runTidy()
    const left = await OneTimeLink.findAll({ where: { userId } })
    expect(left.map(({ tokenHash }) => tokenHash)).toEqual([made[1]?.tokenHash])
  })

  it('removes guesses whose window is over', async () => {
    const subjects = [`account:${v7()}`, `account:${v7()}`]
    const at = ['2026-09-01 02:00:00', '2026-09-01 03:20:00']
    for (const [i, subject] of subjects.entries()) {
      await insert(
        'INSERT INTO sign_in_attempts (subject, failures, window_started_at) VALUES (:subject, 3, :at)',
        { subject, at: at[i] },
      )
    }
    await runTidy()
    expect(
      await columnOf('SELECT subject AS value FROM sign_in_attempts WHERE subject IN (:subjects)', {
        subjects,
      }),
    ).toEqual([subjects[1]])
  })

  it('removes old records of runs, but neither open ones nor the last scheduled one', async () => {
    const { id: networkId } = await makeNetwork()
    const old = { job: 'study', networkId, finishedAt: new Date('2026-01-10T02:16:00Z') }
    await JobSlot.bulkCreate([
      { ...old, slot: '2026-01-09', status: 'done' },
      { ...old, slot: '2026-01-10', status: 'done' },
      { ...old, slot: 'now:2026-01-10T12:00:00.000Z', status: 'failed' },
      { ...old, slot: 'now:2026-01-11T12:00:00.000Z', status: 'waiting', finishedAt: null },
      {
        ...old,
        slot: 'now:2026-08-11T12:00:00.000Z',
        status: 'done',
        finishedAt: new Date('2026-08-11T12:00:00Z'),
      },
    ])
    expect(await runTidy()).toMatch(/2 records of runs\.$/)
    const left = await JobSlot.findAll({ where: { networkId }, order: ['id'] })
    expect(left.map(({ slot }) => slot)).toEqual([
      '2026-01-10',
      'now:2026-01-11T12:00:00.000Z',
      'now:2026-08-11T12:00:00.000Z',
    ])
  })
})
