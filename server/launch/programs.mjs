import { spawn } from 'node:child_process'
import { accessSync, constants, existsSync, readdirSync, readFileSync } from 'node:fs'
import { delimiter, join } from 'node:path'
import { atEnd, isEnding } from './ending.mjs'
import { gist, Stop } from './say.mjs'

/** Starting, watching and stopping other programs. */

const SBIN = ['/usr/local/sbin', '/usr/sbin', '/sbin', '/usr/local/bin', '/usr/bin', '/bin']
const KEPT_OUTPUT = 400_000

/** The path of a program, or null. Looks in the sbin folders too, which users often lack in PATH. */
export function find(name) {
  for (const folder of [...(process.env.PATH ?? '').split(delimiter), ...SBIN]) {
    if (!folder) continue
    const path = join(folder, name)
    try {
      accessSync(path, constants.X_OK)
      return path
    } catch {
      // Not here.
    }
  }
  return null
}

/**
 * When a process started, in clock ticks since the machine did: with it a pid names one process for
 * good. Null when no such process lives (a zombie does not).
 */
export function startOf(pid) {
  const fields = statOf(pid)
  if (fields) return fields[START]
  return existsSync('/proc/self') ? null : startWithoutProc(pid)
}

/** Places in /proc/PID/stat, counted from the state, which stands behind the name. */
const STATE = 0
const SESSION = 3
const START = 19

/** @returns {string[] | null} what the system says of a living process */
function statOf(pid) {
  try {
    const stat = readFileSync(`/proc/${pid}/stat`, 'utf8')
    const fields = stat.slice(stat.lastIndexOf(')') + 2).split(' ')
    return 'ZX'.includes(fields[STATE]) ? null : fields
  } catch {
    return null
  }
}

/** Systems without /proc only tell whether the pid is in use. */
function startWithoutProc(pid) {
  try {
    process.kill(pid, 0)
    return 'unknown'
  } catch {
    return null
  }
}

/** @param {{ pid: number, started: string | null } | null | undefined} who */
export const isAlive = (who) => Boolean(who?.started) && startOf(who.pid) === who.started

/**
 * A program that `launch` started, with all that it started itself: they share its session, whoever of
 * them still lives. Nobody's pid is used again while the session has members; a leader with another
 * start means that it has none.
 */
export function sessionOf(leader) {
  const start = startOf(leader.pid)
  if (start !== null && start !== leader.started) return []
  return processes().filter((pid) => statOf(pid)?.[SESSION] === String(leader.pid))
}

/** The pids of all processes that /proc shows. */
export function processes() {
  if (!existsSync('/proc/self')) return []
  return readdirSync('/proc')
    .filter((name) => /^\d+$/.test(name))
    .map(Number)
}

/** Waits until the processes that `list` finds have ended; kills them when they take too long. */
export async function untilGone(list, patience) {
  const gone = () => list().length === 0
  if (await until(gone, patience)) return
  for (const pid of list()) {
    try {
      process.kill(pid, 'SIGKILL')
    } catch {
      // Ended meanwhile.
    }
  }
  await until(gone, patience)
}

export const pause = (ms) => new Promise((done) => setTimeout(done, ms))

/** Waits until `test` is true, at most `ms`; says whether it became true. */
export async function until(test, ms, every = 50) {
  const limit = Date.now() + ms
  while (!(await test())) {
    if (Date.now() > limit) return false
    await pause(every)
  }
  return true
}

/**
 * Starts a program that ends when we do, even by SIGKILL (its parent-death signal), and that Ctrl-C
 * reaches through us only, so that the order of stopping is ours.
 *
 * @param {string} command
 * @param {string[]} args
 * @param {object} [options]
 * @param {Record<string, string | undefined>} [options.env]
 * @param {string} [options.cwd]
 * @param {string} [options.user] run as this user (when we are root)
 * @param {import('node:child_process').StdioOptions} [options.stdio]
 * @param {boolean} [options.foreground] shares our terminal, for tools that may ask something
 * @param {number} [options.patience] ms that SIGTERM is given before SIGKILL
 */
export function launch(command, args, options = {}) {
  const {
    user,
    foreground = false,
    patience = 10_000,
    stdio = ['ignore', 'pipe', 'pipe'],
  } = options
  const setpriv = find('setpriv')
  const asUser = user ? ['--reuid', user, '--regid', user, '--init-groups'] : []
  const wrapped = setpriv
    ? [setpriv, ...asUser, '--pdeathsig', 'TERM', '--', command, ...args]
    : [command, ...args]
  const child = spawn(wrapped[0], wrapped.slice(1), {
    cwd: options.cwd,
    env: options.env ?? process.env,
    stdio,
    detached: !foreground,
  })
  const ended = new Promise((done) => {
    child.once('error', (error) => done({ code: 127, signal: null, error }))
    child.once('exit', (code, signal) => done({ code, signal }))
  })
  const send = (signal) => {
    try {
      process.kill(foreground ? child.pid : -child.pid, signal)
    } catch {
      // Gone already.
    }
  }
  const stop = async () => {
    if (!child.pid || child.exitCode !== null || child.signalCode !== null) return ended
    send('SIGTERM')
    const timer = setTimeout(send, patience, 'SIGKILL')
    const result = await ended
    clearTimeout(timer)
    return result
  }
  const forget = atEnd(stop)
  void ended.then(forget)
  return { child, pid: child.pid, started: child.pid ? startOf(child.pid) : null, ended, stop }
}

/** @typedef {ReturnType<typeof launch>} Program */

/**
 * Runs a program to its end and returns what it wrote (stdout and stderr together, the last part).
 *
 * @param {string} command
 * @param {string[]} args
 * @param {Parameters<typeof launch>[2] & { failure?: string, check?: boolean }} [options] `failure` is
 *   the line for the person when it fails; with `check: false` a failure is returned, not thrown
 */
export async function run(command, args, { failure, check = true, lock, ...options } = {}) {
  const program = launch(command, args, options)
  lock?.note(program)
  let output = ''
  const keep = (chunk) => {
    output = (output + chunk).slice(-KEPT_OUTPUT)
  }
  program.child.stdout?.setEncoding('utf8').on('data', keep)
  program.child.stderr?.setEncoding('utf8').on('data', keep)
  const closed = new Promise((done) => program.child.once('close', done))
  const { code, signal, error } = await program.ended
  if (!error) await Promise.race([closed, pause(2000)])
  if (error) output += error.message
  // Stopped because we are told to end: nobody waits for the result any more.
  if (isEnding()) await new Promise(() => {})
  if (check && code !== 0) {
    throw new Stop(failure ?? `${command} failed (${signal ?? `exit code ${code}`})`, gist(output))
  }
  return { code, signal, output }
}

/** Runs a script of an installed package with this Node. */
export const node = (args, options) => run(process.execPath, args, options)
