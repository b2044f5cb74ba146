import { randomBytes } from 'node:crypto'
import { renameSync, statSync, writeSync, openSync, closeSync } from 'node:fs'
import { join } from 'node:path'
import { createInterface } from 'node:readline'
import { writeWhole } from './lock.mjs'
import { at, textOf } from './places.mjs'
import { launch, node } from './programs.mjs'
import { freePort, isFree } from './ports.mjs'
import { complain, gist, say, step, Stop } from './say.mjs'
import { addressOf } from './settings.mjs'
import { supervise } from './supervise.mjs'

/** Runs the built server and the steps before it. `server/config.ts` describes the agreement. */

const READY_MS = 120_000
const STOP_MS = 10_000
const LOG_BYTES = 10_000_000
const WARN = 40
const EXIT_CONFIG = 78

/** The demo never joins networks that are in use. */
export const INTO_EMPTY = ['--into-database', '--if-empty']

/** The secret that signs sessions: given, or made once and kept in DATA_DIR. */
export function sessionSecret(settings) {
  if (settings.sessionSecret) return settings.sessionSecret
  if (settings.databaseUrl && settings.production) {
    throw new Stop('SESSION_SECRET must be set with DATABASE_URL and NODE_ENV=production.')
  }
  const file = join(settings.dataDir, 'session-secret')
  const kept = textOf(file)?.trim()
  if (kept) return kept
  const made = randomBytes(32).toString('hex')
  writeWhole(file, `${made}\n`)
  return made
}

/** The port that the server will use: 0 becomes a free one; a taken one stops the start. */
export async function choosePort(settings) {
  const { port, host } = settings
  if (port === 0) return freePort(host)
  if (await isFree(port, host)) return port
  throw new Stop(`PORT ${port} is in use by another program: end it, or set PORT to another.`)
}

/** What every process of ours is given, besides what the person's shell holds (`base`). */
export function serverEnv({ settings, port, databaseUrl, demo, baseUrl, base = process.env }) {
  return {
    ...base,
    NODE_ENV: base.NODE_ENV || 'production',
    PORT: String(port),
    HOST: settings.host,
    DATA_DIR: settings.dataDir,
    DATABASE_URL: databaseUrl,
    BASE_URL:
      baseUrl ?? (settings.baseUrlGiven ? settings.baseUrl : addressOf(settings.host, port)),
    SESSION_SECRET: sessionSecret(settings),
    DEMO: demo ? 'on' : 'off',
    TRUST_PROXY: base.TRUST_PROXY || 'off',
    LOG_LEVEL: settings.logLevel,
  }
}

/**
 * Runs the migrations by `script`, the built tool or its source.
 *
 * @param {string[]} script arguments of Node
 */
export async function migrate(script, env) {
  const { code, output } = await node(script, { cwd: at(), env, check: false })
  if (code === 0) return
  if (code === EXIT_CONFIG) throw new Stop(output.trim())
  throw new Stop('The database could not be brought up to date.', gist(output))
}

export const migrateBuilt = (env) => migrate([at('dist/server/cli/migrate.js')], env)

/**
 * Whether this run is in demo mode, and makes the demo where one is due.
 *
 * @param {{ settings: object, state?: import('./database.mjs').State, makeDemo: () => Promise<void> }} of
 */
export async function prepareDemo({ settings, state, makeDemo }) {
  const wanted = settings.demo ?? (state && state.demo !== 'off' ? 'on' : 'off')
  if (wanted === 'on' && (!state || state.demo !== 'made')) {
    if (state?.demo === 'due') state.change({ demo: 'making' })
    await makeDemo()
    state?.change({ demo: 'made' })
  }
  return wanted === 'on'
}

export async function makeDemoBuilt(env) {
  const tool = at('dist/server/cli/demo.js')
  await step('Making the demo networks', 'Demo networks made', () =>
    node([tool, ...INTO_EMPTY], { cwd: at(), env, failure: 'The demo could not be made.' }),
  )
}

/**
 * Starts the built server and keeps it running.
 *
 * @returns {Promise<{ address: string, stop(): Promise<void> }>}
 */
export async function serve({ env, lock, onHopeless }) {
  const log = openLog(join(env.DATA_DIR, 'server.log'))
  const address = addressOf(env.HOST, env.PORT)
  const server = await supervise({
    name: 'The server',
    launch: () => {
      const program = launch(
        process.execPath,
        ['--enable-source-maps', at('dist/server/index.js')],
        { cwd: at(), env, patience: STOP_MS },
      )
      log.follow(program.child)
      return program
    },
    onStart: (program) => lock.note(program),
    isReady: () => isReady(address),
    patience: READY_MS,
    lastWords: () => log.recent().join('\n'),
    hopeless: EXIT_CONFIG,
    onHopeless,
  })
  return { address: env.BASE_URL, stop: () => server.stop() }
}

export async function isReady(address) {
  try {
    const answer = await fetch(`${address}/readyz`, { signal: AbortSignal.timeout(2000) })
    return answer.status === 200
  } catch {
    return false
  }
}

/** Writes the server's lines into a file of bounded size and shows the ones that matter. */
function openLog(file) {
  let size = statSync(file, { throwIfNoEntry: false })?.size ?? 0
  let handle = openSync(file, 'a', 0o600)
  const recent = []
  const take = (line) => {
    if (size > LOG_BYTES) {
      closeSync(handle)
      renameSync(file, `${file}.1`)
      handle = openSync(file, 'a', 0o600)
      size = 0
    }
    size += writeSync(handle, `${line}\n`)
    recent.push(line)
    if (recent.length > 40) recent.shift()
    const shown = worthShowing(line)
    if (shown) complain(shown)
  }
  return {
    recent: () => recent,
    follow(child) {
      for (const stream of [child.stdout, child.stderr]) {
        createInterface({ input: stream }).on('line', take)
      }
    },
  }
}

/** @returns {string | null} the line for the terminal, or null */
export function worthShowing(line) {
  try {
    const entry = JSON.parse(line)
    if (!(entry.level >= WARN)) return null
    const cause =
      entry.err?.message && entry.err.message !== entry.msg ? `: ${entry.err.message}` : ''
    return `server: ${entry.msg ?? ''}${cause}`
  } catch {
    return line.trim() ? `server: ${line}` : null
  }
}

export function sayWhoCanReach(settings) {
  if (settings.baseUrlGiven || /^(127\.|::1$|localhost$)/.test(settings.host)) return
  say(
    'People on other machines can sign in only at the address that BASE_URL names; it is not set.',
  )
}
