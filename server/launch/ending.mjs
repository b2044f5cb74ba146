import { say } from './say.mjs'

/** The one way out: whatever was started is stopped in reverse order, then the process exits. */

const FORWARDED_TWICE_MS = 1500
const PARENT_CHECK_MS = 1000

const duties = []
let ending = null

export const isEnding = () => ending !== null

/**
 * Registers what must happen before the process ends.
 *
 * @param {() => unknown} duty
 * @returns {() => void} takes it back
 */
export function atEnd(duty) {
  duties.push(duty)
  return () => {
    const place = duties.indexOf(duty)
    if (place >= 0) duties.splice(place, 1)
  }
}

/** Stops everything and exits; a second call changes nothing. */
export function end(code) {
  ending ??= finish(code)
  return ending
}

async function finish(code) {
  while (duties.length > 0) {
    try {
      await duties.pop()()
    } catch (error) {
      process.stderr.write(`${error.message}\n`)
      code ||= 1
    }
  }
  process.exit(code)
}

/**
 * Ends on SIGINT, SIGTERM and SIGHUP, and when npm, which started us, is gone without a word.
 *
 * npm and the terminal both pass a Ctrl-C on, so a repeat within 1.5 s is the same one; a later one
 * is impatience and ends at once (the children end with us, by their parent-death signal).
 *
 * @param {{ code: (signal: string) => number, word?: string }} options
 */
export function endOnSignals({ code, word }) {
  let first = 0
  for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP']) {
    process.on(signal, () => {
      if (first && Date.now() - first > FORWARDED_TWICE_MS) process.exit(1)
      if (first) return
      first = Date.now()
      if (word) say(word)
      void end(code(signal))
    })
  }
  if (!process.env.npm_lifecycle_event) return
  const parent = process.ppid
  const watch = setInterval(() => {
    if (process.ppid !== parent) void end(code('SIGHUP'))
  }, PARENT_CHECK_MS)
  watch.unref()
}
