/** What the launcher tells the person at the terminal: short lines, on stdout unless told otherwise. */

let out = process.stdout

/** Tools with a result of their own keep stdout for it. */
export function speakOnStderr() {
  out = process.stderr
}

export function say(line) {
  out.write(`${line}\n`)
}

export function complain(line) {
  process.stderr.write(`${line}\n`)
}

const seconds = (since) => `${((Date.now() - since) / 1000).toFixed(1)} s`

/**
 * Says what begins, does it, and says what came of it and how long it took.
 *
 * @template T
 * @param {string} doing "Installing the packages"
 * @param {string} done "Packages installed"
 * @param {() => Promise<T>} work
 * @returns {Promise<T>}
 */
export async function step(doing, done, work) {
  const since = Date.now()
  say(`${doing} ...`)
  const result = await work()
  say(`${done} in ${seconds(since)}`)
  return result
}

/** Something that the person has to put right: a message of one line, then what a program said. */
export class Stop extends Error {
  /**
   * @param {string} message
   * @param {string} [detail]
   * @param {number} [code] exit code
   */
  constructor(message, detail = '', code = 1) {
    super(message)
    this.name = 'Stop'
    this.detail = detail
    this.code = code
  }
}

/** The last lines of what a program wrote. */
export function lastLines(text, count = 20) {
  return text.trimEnd().split('\n').slice(-count).join('\n')
}

/** The beginning and the end of what a program wrote: the cause is in one of the two. */
export function gist(text, count = 24) {
  const lines = text.trimEnd().split('\n')
  if (lines.length <= count) return lines.join('\n')
  const half = count / 2
  return [...lines.slice(0, half), '...', ...lines.slice(-half)].join('\n')
}
