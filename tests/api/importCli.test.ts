import { execFile } from 'node:child_process'
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { Network } from '../../server/models/index.js'
import { testDatabase, testDatabaseUrl } from '../support/database.js'
import { unique } from '../support/factories.js'

const folder = mkdtempSync(join(tmpdir(), 'duntless-import-'))
afterAll(() => rmSync(folder, { recursive: true }))
beforeAll(async () => void (await testDatabase()))

/** Runs a tool as `npm run` does. */
function run(
  tool: string,
  args: string[],
): Promise<{ code: number; stdout: string; stderr: string }> {
  const env = {
    ...process.env,
    DATABASE_URL: testDatabaseUrl(),
    // Vitest has a BASE_URL of its own.
    BASE_URL: 'http://127.0.0.1:3000',
    DATA_DIR: '/nonexistent',
    LOG_LEVEL: 'error',
  }
  return new Promise((done) => {
    execFile(
      process.execPath,
      ['--import', 'tsx', `server/cli/${tool}.ts`, ...args],
      { env },
      (error, stdout, stderr) => {
        done({ code: typeof error?.code === 'number' ? error.code : 0, stdout, stderr })
      },
    )
  })
}

function file(name: string, content: string | Buffer): string {
  const path = join(folder, name)
  writeFileSync(path, content)
  return path
}

const HEAD = 'studio,kiln,firing,kind,date,pieces,lost_dunt'
const GOOD = `${HEAD}\nQuay,North,1,glaze,2026-01-05,12,1\nQuay,North,1,glaze,2026-01-05,6,0\n`

describe('npm run import', { timeout: 60_000 }, () => {
  it('prints counts and new names, and makes the network when told to', async () => {
    const network = unique('cli')
    const { code, stdout } = await run('import', [
      file('good.csv', GOOD),
      '--network',
      network,
      '--create',
      '--time-zone',
      'Europe/Lisbon',
    ])
    expect(stdout).toContain(
      `Imported 1 firing, 2 lots, 18 pieces, 1 lost into ${network} (a new network).`,
    )
    expect(stdout).toContain('New, kiln: North (Quay)')
    expect(code).toBe(0)
    expect(await Network.findOne({ where: { slug: network } })).toMatchObject({
      name: network,
      timeZone: 'Europe/Lisbon',
    })
  })

  it('says line and column of every problem on stderr, exits 1 and writes nothing', async () => {
    const network = unique('cli')
    const bad = file(
      'bad.csv',
      `${GOOD}Quay,North,2,salt,2026-01-06,3,0\nQuay,North,3,glaze,2026-01-07,3,4\n`,
    )
    const { code, stdout, stderr } = await run('import', [bad, '--network', network, '--create'])
    expect(stderr).toContain('line 4, column kind: “salt” is no kind of firing')
    expect(stderr).toContain('line 5, column lost_dunt: 4 of 3 pieces cannot have been lost.')
    expect(stderr).toContain('2 problems. Nothing was written.')
    expect(stdout).toBe('')
    expect(code).toBe(1)
    expect(await Network.count({ where: { slug: network } })).toBe(0)
  })

  it('shows a hundred problems and counts the others', async () => {
    const lines = Array.from({ length: 120 }, (_, i) => `Quay,North,${i},salt,2026-01-06,3,0`)
    const { stderr } = await run('import', [
      file('many.csv', [HEAD, ...lines].join('\n')),
      '--network',
      unique('cli'),
      '--create',
    ])
    expect(stderr.match(/^line /gm)).toHaveLength(100)
    expect(stderr).toContain('… and 20 more.')
    expect(stderr).toContain('120 problems.')
  })

  it('answers a dry run in JSON on stdout alone and writes nothing', async () => {
    const network = unique('cli')
    const { code, stdout, stderr } = await run('import', [
      file('dry.csv', GOOD),
      '--network',
      network,
      '--create',
      '--dry-run',
      '--json',
    ])
    expect(JSON.parse(stdout)).toMatchObject({
      network,
      dryRun: true,
      firings: 1,
      lots: 2,
      pieces: 18,
      losses: 1,
    })
    expect(stderr).toBe('')
    expect(code).toBe(0)
    expect(await Network.count({ where: { slug: network } })).toBe(0)
  })

  it.each([
    ['no network', [], /--network SLUG/],
    ['a short name that is no address', ['--network', 'Clay Ring'], /--network: use small letters/],
    [
      'a time zone that there is not',
      ['--network', 'ring', '--create', '--time-zone', 'Atlantis/Quay'],
      /--time-zone: Not a time zone/,
    ],
    ['a pair without an equals sign', ['--network', 'ring', '--as', 'period'], /COLUMN=NAME/],
  ])('exits 2 for %s', async (_, args, message) => {
    const { code, stderr } = await run('import', [file('usage.csv', GOOD), ...args])
    expect(stderr).toMatch(message)
    expect(code).toBe(2)
  })

  it('refuses a file that is not in UTF-8 rather than guess', async () => {
    const { code, stderr } = await run('import', [
      file('latin1.csv', Buffer.from(`${HEAD}\nCaf\xe9,K,1,glaze,2026-01-05,1,0`, 'latin1')),
      '--network',
      'ring',
    ])
    expect(stderr).toMatch(/not in UTF-8/)
    expect(code).toBe(2)
  })
})

describe('npm run demo', { timeout: 60_000 }, () => {
  it('prints the same hash for the same seed and end, without a database', async () => {
    const args = ['--hash', '--seed', '7', '--ends', '2026-03-04']
    const [once, again] = await Promise.all([run('demo', args), run('demo', [...args, '--json'])])
    expect(once.stdout).toMatch(/^[0-9a-f]{64}\n$/)
    expect(JSON.parse(again.stdout)).toEqual({
      seed: 7,
      ends: '2026-03-04',
      hash: once.stdout.trim(),
    })
  })

  it.each([
    ['neither hash nor database', []],
    ['a day that there is not', ['--hash', '--ends', '2026-02-30']],
    ['a seed that is no number', ['--hash', '--seed', 'blue']],
  ])('exits 2 for %s', async (_, args) => {
    expect(await run('demo', args)).toMatchObject({ code: 2, stdout: '' })
  })
})
