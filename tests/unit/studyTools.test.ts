/** The tools that people and scripts call from outside: exit codes and what goes where. */
import { execFile } from 'node:child_process'
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join, resolve } from 'node:path'
import { afterAll, describe, expect, it } from 'vitest'

const folder = mkdtempSync(join(tmpdir(), 'duntless-tools-'))
afterAll(() => rmSync(folder, { recursive: true }))

function run(tool: string, ...args: string[]): Promise<{ code: number; out: string; err: string }> {
  return new Promise((done) => {
    const file = resolve('server/cli', `${tool}.ts`)
    execFile(process.execPath, ['--import', 'tsx', file, ...args], (error, out, err) => {
      done({ code: typeof error?.code === 'number' ? error.code : 0, out, err })
    })
  })
}

const write = (name: string, text: string): string => {
  const file = join(folder, name)
  writeFileSync(file, text)
  return file
}

describe('check-reference', { timeout: 30_000 }, () => {
  it('passes our own reference files', async () => {
    const { code, out } = await run('check-reference', 'tests/unit/statistics/reference')
    expect(out).toMatch(/withinStrataTest\.json +6 passed, 0 failed/)
    expect(code).toBe(0)
  })

  it('exits 1 on a failing case, and lists a missing method without failing for it', async () => {
    const one = {
      name: 'wrong',
      input: { events: 1, units: 2, level: 0.95 },
      expected: { lower: 0.5 },
      tolerance: 1e-6,
    }
    write('wilsonInterval.json', JSON.stringify({ method: 'wilsonInterval', cases: [one] }))
    write('tarot.json', JSON.stringify({ method: 'tarot', cases: [one] }))
    const { code, out } = await run('check-reference', folder, '--json')
    expect(code).toBe(1)
    expect(JSON.parse(out)).toMatchObject({
      failed: 1,
      files: [
        { file: 'tarot.json', status: 'missing' },
        { file: 'wilsonInterval.json', status: 'checked', passed: 0, failed: 1 },
      ],
    })
  })

  it('exits 2 and says so when there is no such folder', async () => {
    const { code, err } = await run('check-reference', join(folder, 'nowhere'))
    expect(code).toBe(2)
    expect(err).toContain('Cannot read the folder')
  })
})

describe('study', { timeout: 30_000 }, () => {
  it('says its findings in words', async () => {
    const { code, out } = await run('study', '--csv', 'tests/unit/study/cohort.csv')
    expect(code).toBe(0)
    expect(out).toMatch(/^300 firings, 2,451 lots, 23,769 pieces; \d+ comparisons, \d+ findings\./)
    expect(out).toContain('joint-crack, drying_practice = fan dried')
  })

  it('studies one studio alone and answers in JSON', async () => {
    const { code, out } = await run(
      'study',
      '--csv',
      'tests/unit/study/cohort.csv',
      '--studio',
      'Studio A',
      '--json',
    )
    expect(code).toBe(0)
    expect(JSON.parse(out)).toMatchObject({ lots: 798 })
  })

  it('exits 1 and names line and column of a wrong cell', async () => {
    const { code, err } = await run('study', '--csv', write('bad.csv', 'firing,pieces\nF1,many'))
    expect(code).toBe(1)
    expect(err).toContain('line 2, column pieces: “many” is not a whole number of pieces.')
  })

  it.each([
    [[]],
    [['--csv', 'nowhere.csv']],
    [['--csv', 'tests/unit/study/cohort.csv', '--studio', 'Studio Z']],
  ])('exits 2 for %j', async (args) => {
    expect((await run('study', ...args)).code).toBe(2)
  })
})
