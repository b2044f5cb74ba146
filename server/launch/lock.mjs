import { randomBytes } from 'node:crypto'
import { linkSync, readFileSync, renameSync, rmSync, writeFileSync } from 'node:fs'
import { atEnd } from './ending.mjs'
import { isAlive, pause, sessionOf, startOf, untilGone } from './programs.mjs'

/**
 * Lock files. The file holds who has the lock as JSON: `pid` and `started` (so that a pid used again
 * is not taken for the holder), and whatever the holder wants others to know. A holder that died
 * leaves a stale file; the next one takes it over.
 */

const POLL_MS = 250
const LEFTOVER_MS = 30_000

/** @returns {Record<string, any> | null} what the file says; null when it is missing or unreadable */
export function readLock(file) {
  try {
    const holder = JSON.parse(readFileSync(file, 'utf8'))
    return typeof holder?.pid === 'number' ? holder : null
  } catch {
    return null
  }
}

/** Writes a file so that no reader ever sees half of it. */
export function writeWhole(file, text, mode = 0o600) {
  const temporary = `${file}.${process.pid}.${randomBytes(4).toString('hex')}`
  writeFileSync(temporary, text, { mode })
  renameSync(temporary, file)
}

/**
 * Takes the lock if nobody has it.
 *
 * @param {string} file
 * @param {Record<string, unknown>} [facts] for others to read
 * @returns {{ lock: Lock, stale: Record<string, any> | null } | { holder: Record<string, any> }}
 *   `stale` is what a dead holder left
 */
export function tryLock(file, facts = {}) {
  let stale = null
  for (;;) {
    const mine = { pid: process.pid, started: startOf(process.pid), ...facts }
    if (create(file, mine)) return { lock: new Lock(file, mine), stale }
    const holder = readLock(file)
    if (isAlive(holder)) return { holder }
    stale = takeAway(file) ?? stale
  }
}

/** A hard link appears whole or not at all, and never replaces what is there. */
function create(file, content) {
  const temporary = `${file}.${process.pid}.${randomBytes(4).toString('hex')}`
  writeFileSync(temporary, JSON.stringify(content), { mode: 0o600 })
  try {
    linkSync(temporary, file)
    return true
  } catch (error) {
    if (error.code === 'EEXIST') return false
    throw error
  } finally {
    rmSync(temporary, { force: true })
  }
}

/** Two may find the same stale file: a rename succeeds for one of them. */
function takeAway(file) {
  const aside = `${file}.${process.pid}.stale`
  try {
    renameSync(file, aside)
  } catch (error) {
    if (error.code === 'ENOENT') return null
    throw error
  }
  const left = readLock(aside)
  try {
    // Somebody made a fresh one in between: put it back.
    if (isAlive(left)) linkSync(aside, file)
  } catch {
    // A third has made theirs already; whoever lost theirs finds out by `stillMine`.
  }
  rmSync(aside, { force: true })
  return isAlive(left) ? null : left
}

/**
 * Waits until the programs of a holder that was killed have ended. They are told to by the system when
 * it dies; what they started themselves may not be.
 *
 * @param {Record<string, any> | null} stale
 */
export async function clearLeft(stale) {
  const leaders = stale?.programs ?? []
  await untilGone(() => leaders.flatMap(sessionOf), LEFTOVER_MS)
}

/** Waits for the lock; `waiting` is told once who has it. */
export async function waitForLock(file, facts, waiting) {
  for (let told = false; ; told = true) {
    const got = tryLock(file, facts)
    if (got.lock) await clearLeft(got.stale)
    if (got.lock) return got.lock
    if (!told) waiting(got.holder)
    await pause(POLL_MS)
  }
}

export class Lock {
  #file
  #facts
  #forget

  constructor(file, facts) {
    this.#file = file
    this.#facts = facts
    this.#forget = atEnd(() => this.release())
  }

  /** Tells others more. */
  tell(facts) {
    Object.assign(this.#facts, facts)
    if (this.stillMine()) writeWhole(this.#file, JSON.stringify(this.#facts))
  }

  /** Notes a program, so that the next holder can wait for its end should we be killed. */
  note({ pid, started }) {
    const programs = (this.#facts.programs ?? []).filter(isAlive)
    this.tell({ programs: [...programs, { pid, started }] })
  }

  stillMine() {
    const holder = readLock(this.#file)
    return holder?.pid === this.#facts.pid && holder?.started === this.#facts.started
  }

  release() {
    this.#forget()
    if (this.stillMine()) rmSync(this.#file, { force: true })
  }
}
