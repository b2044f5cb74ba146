import { mkdirSync, rmSync } from 'node:fs'
import { join } from 'node:path'
import { buildStale } from './build.mjs'
import { openDatabase } from './database.mjs'
import { atEnd, end } from './ending.mjs'
import { alone, installPackages, needMariadb } from './install.mjs'
import { clearLeft, tryLock } from './lock.mjs'
import { say, step, Stop } from './say.mjs'
import {
  choosePort,
  makeDemoBuilt,
  migrateBuilt,
  prepareDemo,
  sayWhoCanReach,
  serve,
  serverEnv,
  sessionSecret,
} from './serve.mjs'
import { addressOf } from './settings.mjs'

export const lockFile = (dataDir) => join(dataDir, 'launch.lock')

/**
 * Takes DATA_DIR for this process, or says who has it. What a launcher left that was killed is waited
 * for (its children end by themselves) and cleared.
 *
 * @returns {ReturnType<typeof tryLock>}
 */
export async function takeDataDir(dataDir, facts) {
  try {
    mkdirSync(dataDir, { recursive: true, mode: 0o711 })
  } catch (error) {
    throw new Stop(`DATA_DIR cannot be used: ${error.message}`)
  }
  const got = tryLock(lockFile(dataDir), facts)
  if (got.stale) await clearUp(got.stale)
  return got
}

/** Waits for what a killed launcher left to end, and removes its folder for sockets. */
async function clearUp(stale) {
  await clearLeft(stale)
  const { runFolder } = stale
  if (/\/duntless-db-\w+$/.test(runFolder ?? ''))
    rmSync(runFolder, { recursive: true, force: true })
}

/** What a second start says. */
export function aboutHolder({ pid, command, address, ready }) {
  if (!address) return `Duntless is busy with "${command}" (process ${pid}) in this DATA_DIR.`
  return ready
    ? `Duntless is already running: ${address} (process ${pid})`
    : `Duntless is already starting (process ${pid}); it will be at ${address}`
}

/** `npm start`: from whatever is there to a running server. */
export async function start(settings) {
  const got = await takeDataDir(settings.dataDir, { command: 'start' })
  if (got.holder) {
    say(aboutHolder(got.holder))
    return end(got.holder.address ? 0 : 1)
  }
  const { lock } = got
  const port = await choosePort(settings)
  sessionSecret(settings)
  const address = settings.baseUrlGiven ? settings.baseUrl : addressOf(settings.host, port)
  lock.tell({ host: settings.host, port, address })
  // Neither needs the other, and on a fresh machine each takes a while.
  const [opened] = await Promise.all([
    openOrGiven(settings, lock, settings.demo === 'off' ? 'off' : 'due'),
    alone(async (project) => {
      await installPackages(project)
      await buildStale(project)
    }),
  ])
  const env = serverEnv({ settings, port, databaseUrl: opened.url, demo: false })
  await step('Bringing the database up to date', 'Database is up to date', () => migrateBuilt(env))
  const demo = await prepareDemo({
    settings,
    state: opened.state,
    makeDemo: () => makeDemoBuilt(env),
  })
  env.DEMO = demo ? 'on' : 'off'
  const server = await serve({ env, lock, onHopeless: end })
  atEnd(() => server.stop())
  lock.tell({ ready: true })
  sayWhoCanReach(settings)
  say(`Duntless is ready: ${server.address}`)
}

/**
 * The database of DATABASE_URL, or the private one.
 *
 * @returns {Promise<{ url: string, state?: object, stop(): Promise<void> }>}
 */
export async function openOrGiven(settings, lock, demo) {
  if (settings.databaseUrl) return { url: settings.databaseUrl, stop: async () => {} }
  await needMariadb()
  const database = await openDatabase({
    dataDir: settings.dataDir,
    bufferMb: settings.dbBufferMb,
    demo,
    lock,
  })
  lock.tell({ databasePort: database.state.port })
  return database
}
