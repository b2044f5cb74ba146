import { chmodSync, existsSync, mkdirSync, mkdtempSync, readdirSync, rmSync } from 'node:fs'
import { availableParallelism, tmpdir } from 'node:os'
import { basename, join, resolve } from 'node:path'
import { KINDS, readTestArguments, VITEST_KINDS } from './arguments.mjs'
import { buildStale } from './build.mjs'
import { lint, typeProjects, types } from './checks.mjs'
import { migrateSource, toolArgs } from './cli.mjs'
import { playwrightCount, requireTests, total, vitestCounts } from './counts.mjs'
import { openDatabase } from './database.mjs'
import { atEnd, end, isEnding } from './ending.mjs'
import { alone, chromium, installPackages, needChromium, needMariadb } from './install.mjs'
import { endMarked, newMark } from './leftovers.mjs'
import { readLock, tryLock } from './lock.mjs'
import { freePort } from './ports.mjs'
import { at, packageScript, textOf } from './places.mjs'
import { isAlive, launch, node } from './programs.mjs'
import { complain, gist, say, step, Stop } from './say.mjs'
import { makeDemoBuilt, migrateBuilt, serve, serverEnv } from './serve.mjs'
import { readSettings } from './settings.mjs'

/**
 * `npm test` and `npm run bench`: a database, ports and a folder of their own, all gone at the end.
 */

const DATABASE_KINDS = ['api', 'jobs', 'e2e']
const BUILT_KINDS = ['sizes', 'e2e']
/** What the product reads from the environment must not reach its tests. */
const PRODUCT_VARIABLES =
  /^(PORT|HOST|DATA_DIR|DATABASE_URL|DB_BUFFER_MB|BASE_URL|SESSION_SECRET|DEMO|TRUST_PROXY|LOG_LEVEL|NODE_ENV|API_URL)$/
const BUFFER_MB = 128
const PREFIX = 'duntless-test-'
const OWNER = 'run.lock'
const SHOWN_LINES = 240

export async function test(args) {
  const { kinds, keep, extra } = readTestArguments(args)
  const bench = makeBench(keep)
  const counts = []
  try {
    counts.push(...(await runKinds(kinds, extra, bench)))
  } catch (error) {
    if (isEnding()) await new Promise(() => {})
    complain(error instanceof Stop ? error.message : error.stack)
    if (error.detail) complain(error.detail.replace(/^/gm, '    '))
    counts.push({ kind: 'start', passed: 0, failed: 1, skipped: 0 })
  }
  await bench.clear()
  const { passed, failed } = summary(counts)
  say(`${passed} passed, ${failed} failed`)
  await end(failed === 0 && passed > 0 ? 0 : 1)
}

function summary(counts) {
  say('')
  for (const { kind, passed, failed, skipped } of counts) {
    const left = skipped > 0 ? `, ${skipped} not run` : ''
    say(
      `${kind.padEnd(12)}${String(passed).padStart(6)} passed${failed > 0 ? `, ${failed} failed` : ''}${left}`,
    )
  }
  say('')
  return total(counts)
}

/**
 * The place a run works in: a temporary folder, an environment that keeps every program's leavings in
 * it, and a mark by which programs that outlive their parents are found and ended.
 */
function makeBench(keep) {
  removeKilledRuns()
  const folder = mkdtempSync(join(tmpdir(), PREFIX))
  // The database's user must be able to pass through.
  chmodSync(folder, 0o711)
  tryLock(join(folder, OWNER))
  const mark = newMark()
  const closing = []
  const clear = async () => {
    while (closing.length > 0) await closing.pop()()
    await endMarked(mark)
    rmSync(folder, { recursive: true, force: true })
  }
  atEnd(clear)
  const base = Object.fromEntries(
    Object.entries(process.env).filter(([name]) => !PRODUCT_VARIABLES.test(name)),
  )
  const inside = (name) => {
    const path = join(folder, name)
    mkdirSync(path, { recursive: true })
    return path
  }
  const env = {
    ...base,
    ...mark,
    NO_COLOR: '1',
    TMPDIR: inside('tmp'),
    XDG_CONFIG_HOME: inside('config'),
    XDG_CACHE_HOME: inside('cache'),
    PWTEST_CACHE_DIR: inside('playwright'),
  }
  delete env.FORCE_COLOR
  return { folder, inside, env, keep, clear, close: (duty) => closing.push(duty) }
}

/** Clears what runs left that were killed before they could. */
function removeKilledRuns() {
  for (const name of readdirSync(tmpdir()).filter((each) => each.startsWith(PREFIX))) {
    const folder = join(tmpdir(), name)
    const owner = readLock(join(folder, OWNER))
    if (!owner || isAlive(owner)) continue
    const runFolder = readLock(join(folder, 'data/launch.lock'))?.runFolder
    if (runFolder) rmSync(runFolder, { recursive: true, force: true })
    rmSync(folder, { recursive: true, force: true })
  }
}

async function runKinds(kinds, extra, bench) {
  const needs = (some) => kinds.some((kind) => some.includes(kind))
  const prepare = alone(async (project) => {
    await installPackages(project)
    if (needs(BUILT_KINDS)) await buildStale(project)
  })
  const provide = async () => {
    if (kinds.includes('e2e')) await needChromium()
    return needs(DATABASE_KINDS) ? openTemporary(bench) : null
  }
  const [database] = await Promise.all([provide(), prepare])
  const vitestKinds = kinds.filter((kind) => VITEST_KINDS.includes(kind))
  const [checked, tested] = await Promise.all([
    runChecks(kinds, bench),
    vitestKinds.length > 0 ? runVitest(vitestKinds, extra, bench, database) : [],
  ])
  const browsed = kinds.includes('e2e') ? await runPlaywright(extra, bench, database) : []
  const counts = [...checked, ...tested, ...browsed]
  return KINDS.flatMap((kind) => counts.filter((count) => count.kind === kind))
}

async function openTemporary(bench) {
  await needMariadb()
  const dataDir = bench.inside('data')
  const { lock } = tryLock(join(dataDir, 'launch.lock'))
  const database = await openDatabase({ dataDir, bufferMb: BUFFER_MB, demo: 'due', lock })
  bench.close(async () => {
    await database.stop()
    database.remove()
  })
  const server = new URL(database.url)
  server.pathname = '/'
  return { ...database, dataDir, lock, serverUrl: server.href }
}

const one = (kind, ok) => ({ kind, passed: ok ? 1 : 0, failed: ok ? 0 : 1, skipped: 0 })

function showFailure(what, output) {
  complain(`\n--- ${what} ---\n${gist(output, SHOWN_LINES)}\n`)
}

/** Lint, types and sizes, one after the other, beside the tests. */
async function runChecks(kinds, { env }) {
  const counts = []
  const check = async (kind, what, work) => {
    if (!kinds.includes(kind)) return
    const { ok, output } = await step(`Checking ${what}`, `Checked ${what}`, work)
    if (!ok) showFailure(what, output)
    counts.push(one(kind, ok))
  }
  await check('lint', 'lint and format', () => lint({ env }))
  for (const project of typeProjects) {
    await check('types', `types of ${project}`, () => types(project, env))
  }
  await check('sizes', 'sizes of the first load', async () => {
    const { code, output } = await node(toolArgs('sizes'), { cwd: at(), env, check: false })
    return { ok: code === 0, output }
  })
  const typed = total(counts.filter(({ kind }) => kind === 'types'))
  return [...counts.filter(({ kind }) => kind !== 'types'), { kind: 'types', ...typed }].filter(
    ({ kind }) => kinds.includes(kind),
  )
}

async function runVitest(kinds, extra, bench, database) {
  const file = join(bench.folder, 'vitest.json')
  const projects = kinds.flatMap((kind) => ['--project', kind])
  const reporters = ['--reporter=default', '--reporter=json', `--outputFile.json=${file}`]
  // Vitest leaves one core alone; on two cores half the time would go by waiting for the database.
  const workers = [`--maxWorkers=${Math.max(2, availableParallelism() - 1)}`]
  const env = { ...bench.env, ...(database && { TEST_DATABASE_URL: database.serverUrl }) }
  const { code, output } = await step(`Testing ${kinds.join(', ')}`, 'Tested those', () =>
    node([packageScript.vitest, 'run', ...projects, ...reporters, ...workers, ...extra], {
      cwd: at(),
      env,
      check: false,
    }),
  )
  const counts = requireTests(kinds, vitestCounts(JSON.parse(textOf(file) ?? '{}')))
  const failed = total(counts).failed
  if (code !== 0 || failed > 0) showFailure('unit, component, API and job tests', failures(output))
  // Vitest also fails on an error outside every test.
  return code !== 0 && failed === 0 ? [...counts.slice(1), { ...counts[0], failed: 1 }] : counts
}

/** Vitest lists what failed after everything else. */
function failures(output) {
  const place = output.search(/⎯+ (Failed|Unhandled)/)
  return place < 0 ? output : output.slice(place)
}

async function runPlaywright(extra, bench, database) {
  const server = await serveForTests(bench, database)
  const file = join(bench.folder, 'playwright.json')
  const env = {
    ...bench.env,
    CHROMIUM_PATH: chromium(),
    E2E_BASE_URL: server.address,
    E2E_DATABASE_URL: database.url,
    E2E_REPORT: file,
    E2E_OUTPUT: bench.keep ? resolve(bench.keep) : bench.inside('e2e'),
  }
  const script = [packageScript.playwright, 'test', '--config', '.config/playwright.config.ts']
  const { code, output } = await step('Testing in the browser', 'Tested in the browser', () =>
    node([...script, ...extra], { cwd: at(), env, check: false }),
  )
  await server.stop()
  const count = playwrightCount(JSON.parse(textOf(file) ?? '{}'))
  if (code !== 0) {
    showFailure('browser tests', output)
    if (!bench.keep) complain('For pictures of the failures: npm test -- --only e2e --keep FOLDER')
  }
  const [checked] = requireTests(['e2e'], [count])
  return [code !== 0 && checked.failed === 0 ? { ...checked, failed: 1 } : checked]
}

/** The built server with the demo, as `npm start` runs it, on a free port. */
async function serveForTests(bench, { dataDir, url, lock, state }) {
  const settings = readSettings({ DATA_DIR: dataDir, DEMO: 'on', LOG_LEVEL: 'warn' })
  const port = await freePort()
  const env = serverEnv({ settings, port, databaseUrl: url, demo: true, base: bench.env })
  await migrateBuilt(env)
  if (state.demo === 'due') await makeDemoBuilt(env)
  const server = await serve({ env, lock, onHopeless: () => {} })
  bench.close(() => server.stop())
  return server
}

/** `bench [NAME] [ARGS]`: one measurement of tests/bench, with a migrated database of its own. */
export async function bench([name, ...args]) {
  const folder = at('tests/bench')
  const names = existsSync(folder)
    ? readdirSync(folder).flatMap((file) =>
        /^\w[\w-]*\.ts$/.test(file) ? [basename(file, '.ts')] : [],
      )
    : []
  if (!names.includes(name)) {
    if (name) throw new Stop(`There is no measurement "${name}"; there are ${names.join(', ')}.`)
    say(names.length > 0 ? `Measurements: ${names.join(', ')}` : 'There are no measurements yet.')
    return end(0)
  }
  await alone(installPackages)
  const place = makeBench(null)
  const { dataDir, url, serverUrl } = await openTemporary(place)
  const settings = readSettings({ DATA_DIR: dataDir })
  const env = serverEnv({ settings, port: 3000, databaseUrl: url, demo: false, base: place.env })
  await migrateSource(env)
  const script = ['--import', 'tsx', join(folder, `${name}.ts`), ...args]
  const tool = launch(process.execPath, script, {
    cwd: at(),
    env: { ...env, TEST_DATABASE_URL: serverUrl },
    stdio: 'inherit',
    foreground: true,
  })
  const { code } = await tool.ended
  await place.clear()
  await end(code ?? 1)
}
