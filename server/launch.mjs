import { end, endOnSignals, isEnding } from './launch/ending.mjs'
import { complain, speakOnStderr, Stop } from './launch/say.mjs'
import { readSettings, SettingError } from './launch/settings.mjs'
import { TOP } from './launch/places.mjs'

/**
 * `node server/launch.mjs [COMMAND] [ARGS]`: what the scripts of package.json run. Node built-ins
 * alone, so that it works before a package is installed.
 *
 * (none)              install, build, database, migrate, serve
 * dev                 the same with the sources watched
 * build               build what is stale
 * lint | types        check the sources
 * test [--only KIND]  everything that can fail, with a database of its own
 * bench [NAME]        a measurement from tests/bench
 * cli NAME [ARGS]     a tool from server/cli, with a database where it needs one
 */

const SIGNAL_CODES = { SIGINT: 130, SIGTERM: 143, SIGHUP: 129 }

const commands = {
  start: async () => (await import('./launch/start.mjs')).start(readSettings(process.env, TOP)),
  dev: async () => (await import('./launch/dev.mjs')).dev(readSettings(process.env, TOP)),
  build: async () => (await import('./launch/checks.mjs')).buildOnly(),
  lint: async (args) => (await import('./launch/checks.mjs')).lintOnly(args),
  types: async () => (await import('./launch/checks.mjs')).typesOnly(),
  test: async (args) => (await import('./launch/test.mjs')).test(args),
  bench: async (args) => (await import('./launch/test.mjs')).bench(args),
  cli: async (args) => (await import('./launch/cli.mjs')).cli(readSettings(process.env, TOP), args),
}

/** Commands that serve until told to stop: being told is their good end. */
const SERVING = ['start', 'dev']

async function main([command = 'start', ...args]) {
  if (!Object.hasOwn(commands, command)) {
    throw new Stop(
      `There is no command "${command}"; there are ${Object.keys(commands).join(', ')}.`,
    )
  }
  const serving = SERVING.includes(command)
  if (!serving) speakOnStderrWhere(command)
  endOnSignals({
    code: (signal) => (serving ? 0 : SIGNAL_CODES[signal]),
    word: serving ? 'Stopping ...' : undefined,
  })
  const { checkNode } = await import('./launch/install.mjs')
  checkNode()
  await commands[command](args)
}

/** A tool's result may be read by a program: only the result goes to stdout. */
function speakOnStderrWhere(command) {
  if (command === 'cli') speakOnStderr()
}

try {
  await main(process.argv.slice(2))
} catch (error) {
  if (isEnding()) await new Promise(() => {})
  const expected = error instanceof Stop || error instanceof SettingError
  complain(expected ? error.message : error.stack)
  if (error.detail) complain(error.detail.replace(/^/gm, '    '))
  await end(error instanceof Stop ? error.code : 1)
}
