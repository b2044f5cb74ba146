import { randomBytes } from 'node:crypto'
import { readFileSync } from 'node:fs'
import { processes, untilGone } from './programs.mjs'

/**
 * Programs that start others (a browser, say) do not always take them along when they end. A test run
 * marks the environment of everything that it starts, and by that mark finds what is left.
 */

const NAME = 'DUNTLESS_TEST_RUN'
const GRACE_MS = 2000

/** @returns {Record<string, string>} variables for the environment of every program of the run */
export const newMark = () => ({ [NAME]: randomBytes(12).toString('hex') })

/** Ends whatever still carries the mark. */
export async function endMarked(mark) {
  const needle = `${NAME}=${mark[NAME]}`
  await untilGone(() => processes().filter((pid) => carries(pid, needle)), GRACE_MS)
}

function carries(pid, needle) {
  try {
    return readFileSync(`/proc/${pid}/environ`, 'latin1').split('\0').includes(needle)
  } catch {
    return false
  }
}
