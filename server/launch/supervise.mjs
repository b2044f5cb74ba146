import { isEnding } from './ending.mjs'
import { pause, until } from './programs.mjs'
import { complain, lastLines, Stop } from './say.mjs'

const LONGEST_PAUSE_MS = 30_000
const STEADY_MS = 60_000
const OUTPUT_LINES = 15

/**
 * Keeps a program running: waits until it is ready the first time, then starts it again whenever it
 * ends by itself, after a pause that doubles up to 30 s and is forgotten after a steady minute.
 *
 * @param {object} how
 * @param {string} how.name as people call it: "The database"
 * @param {() => import('./programs.mjs').Program} how.launch
 * @param {() => Promise<boolean>} how.isReady
 * @param {number} how.patience ms until ready
 * @param {() => string} how.lastWords what it wrote, for the person
 * @param {(program: import('./programs.mjs').Program) => void} [how.onStart]
 * @param {number} [how.hopeless] exit code after which starting again is no use
 * @param {(code: number) => unknown} [how.onHopeless]
 * @returns {Promise<{ stop(): Promise<void>, current(): import('./programs.mjs').Program }>}
 */
export async function supervise(how) {
  let program = begin(how)
  let stopping = false
  await firstStart(how, program)
  void keep()

  async function keep() {
    for (let wait = 1000; ;) {
      const since = Date.now()
      const result = await program.ended
      if (stopping || isEnding()) return
      if (how.hopeless !== undefined && result.code === how.hopeless) return how.onHopeless?.(1)
      if (Date.now() - since > STEADY_MS) wait = 1000
      complain(`${how.name} ended (${reason(result)}); starting it again in ${wait / 1000} s.`)
      await pause(wait)
      wait = Math.min(wait * 2, LONGEST_PAUSE_MS)
      if (stopping || isEnding()) return
      program = begin(how)
      void until(how.isReady, how.patience).then((ready) => {
        if (ready && !stopping) complain(`${how.name} is running again.`)
      })
    }
  }

  return {
    current: () => program,
    async stop() {
      stopping = true
      await program.stop()
    },
  }
}

function begin(how) {
  const program = how.launch()
  how.onStart?.(program)
  return program
}

export const reason = ({ code, signal, error }) =>
  error?.message ?? (signal ? `by ${signal}` : `exit code ${code}`)

async function firstStart(how, program) {
  let result = null
  void program.ended.then((ended) => {
    result = ended
  })
  const ready = await until(async () => result !== null || (await how.isReady()), how.patience)
  if (ready && result === null) return
  if (isEnding()) await new Promise(() => {})
  await program.stop()
  const why = result ? `ended at once (${reason(result)})` : 'did not answer in time'
  throw new Stop(`${how.name} ${why}.`, lastLines(how.lastWords(), OUTPUT_LINES))
}
