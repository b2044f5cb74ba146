import { spawnSync } from 'node:child_process'
import { mkdtempSync, readdirSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { KINDS, readTestArguments } from '../../server/launch/arguments.mjs'
import { playwrightCount, requireTests, total, vitestCounts } from '../../server/launch/counts.mjs'
import { readLock, tryLock } from '../../server/launch/lock.mjs'
import { startOf } from '../../server/launch/programs.mjs'

describe('a lock', () => {
  let folder = ''
  let file = ''
  beforeEach(() => {
    folder = mkdtempSync(join(tmpdir(), 'duntless-lock-'))
    file = join(folder, 'launch.lock')
  })
  afterEach(() => rmSync(folder, { recursive: true }))

  /** What a launcher leaves that was killed: the pid of a process that has ended. */
  const dead = () => ({ pid: spawnSync('true').pid, started: '1', runFolder: 'left' })

  it('is taken once; the second learns who has it and where', () => {
    tryLock(file, { address: 'http://127.0.0.1:3000' })
    expect(tryLock(file).holder).toMatchObject({
      pid: process.pid,
      address: 'http://127.0.0.1:3000',
    })
  })

  it('tells what its holder adds later', () => {
    const { lock } = tryLock(file, { command: 'start' })
    lock?.tell({ ready: true })
    expect(readLock(file)).toMatchObject({ command: 'start', ready: true })
  })

  it('can be taken again after its release, and leaves no file', () => {
    tryLock(file).lock?.release()
    expect(readdirSync(folder)).toEqual([])
    expect(tryLock(file).lock).toBeDefined()
  })

  it('of a dead process is taken over, with what that one left', () => {
    writeFileSync(file, JSON.stringify(dead()))
    const got = tryLock(file)
    expect(got.lock?.stillMine()).toBe(true)
    expect(got).toMatchObject({ stale: { runFolder: 'left' } })
  })

  it('is taken over from a pid that now belongs to another process', () => {
    writeFileSync(file, JSON.stringify({ pid: process.pid, started: 'before' }))
    expect(tryLock(file).lock).toBeDefined()
  })

  it('that cannot be read is taken over', () => {
    writeFileSync(file, '{"pid":')
    expect(tryLock(file).lock).toBeDefined()
  })

  it('that another took over is not released by the one who lost it', () => {
    const { lock } = tryLock(file)
    writeFileSync(file, JSON.stringify({ pid: 1, started: startOf(1) }))
    lock?.release()
    expect(readLock(file)?.pid).toBe(1)
  })
})

describe('the arguments of a test run', () => {
  it('choose every kind when there are none', () => {
    expect(readTestArguments([])).toEqual({ kinds: KINDS, keep: null, extra: [] })
  })

  it('choose kinds by commas and by repetition, in the order of the summary', () => {
    const { kinds } = readTestArguments(['--only', 'e2e,unit', '--only=lint'])
    expect(kinds).toEqual(['lint', 'unit', 'e2e'])
  })

  it('pass on what stands after --', () => {
    const { extra } = readTestArguments(['--only', 'unit', '--', 'tests/unit/a.test.ts', '-t', 'x'])
    expect(extra).toEqual(['tests/unit/a.test.ts', '-t', 'x'])
  })

  it('are not passed on to two programs at once', () => {
    expect(() => readTestArguments(['--', '-t', 'x'])).toThrow('choose kinds of one')
  })

  it('name a kind that does not exist', () => {
    expect(() => readTestArguments(['--only', 'units'])).toThrow('no kind of test "units"')
  })

  it('name an option that does not exist', () => {
    expect(() => readTestArguments(['--watch'])).toThrow('does not know "--watch"')
  })
})

describe('the counts of a test run', () => {
  const file = (name: string, status: string, ...statuses: string[]) => ({
    name: `/srv/duntless/tests/${name}.test.ts`,
    status,
    assertionResults: statuses.map((each) => ({ status: each })),
  })

  it('are kept for each kind, by the folder of the file', () => {
    const report = {
      testResults: [
        file('unit/a', 'failed', 'passed', 'failed'),
        file('api/b', 'passed', 'passed'),
        file('unit/c', 'passed', 'passed', 'pending'),
      ],
    }
    expect(vitestCounts(report)).toEqual([
      { kind: 'unit', passed: 2, failed: 1, skipped: 1 },
      { kind: 'api', passed: 1, failed: 0, skipped: 0 },
    ])
  })

  it('hold a file that could not be loaded as one failure', () => {
    expect(vitestCounts({ testResults: [file('unit/a', 'failed')] })).toEqual([
      { kind: 'unit', passed: 0, failed: 1, skipped: 0 },
    ])
  })

  it('hold a browser test that passed only when repeated as failed', () => {
    const stats = { expected: 3, unexpected: 1, flaky: 1, skipped: 2 }
    expect(playwrightCount({ stats })).toEqual({ kind: 'e2e', passed: 3, failed: 2, skipped: 2 })
  })

  it('hold a browser run that broke before its first test as one failure', () => {
    expect(playwrightCount({ errors: [{}] })).toMatchObject({ passed: 0, failed: 1 })
  })

  it('hold a kind that ran nothing as one failure', () => {
    const counts = requireTests(
      ['unit', 'api'],
      [{ kind: 'unit', passed: 4, failed: 0, skipped: 0 }],
    )
    expect(total(counts)).toEqual({ passed: 4, failed: 1, skipped: 0 })
  })
})
