import { existsSync, writeFileSync } from 'node:fs'
import { dirname, join } from 'node:path'
import { waitForLock } from './lock.mjs'
import { at, hashOf, projectLock, textOf } from './places.mjs'
import { find, run } from './programs.mjs'
import { say, step, Stop } from './say.mjs'

/** Brings the packages of npm and the programs of Debian that are missing. */

const STAMP = at('node_modules/.stamp')
const APT = ['-o', 'DPkg::Lock::Timeout=120', '-q']

/** Stops when this Node is older than package.json asks for. */
export function checkNode() {
  const wanted = JSON.parse(textOf(at('package.json'))).engines.node.replace(/^>=/, '')
  const parts = (version) => version.split('.').map(Number)
  const [major, minor = 0] = parts(wanted)
  const [ownMajor, ownMinor] = parts(process.versions.node)
  if (ownMajor > major || (ownMajor === major && ownMinor >= minor)) return
  throw new Stop(`Node ${wanted} or later is needed; this is Node ${process.versions.node}.`)
}

/** Does `work(lock)` while no other launcher of this checkout installs or builds. */
export async function alone(work) {
  const lock = await waitForLock(projectLock, {}, ({ pid }) =>
    say(`Waiting for process ${pid}, which installs or builds in this folder ...`),
  )
  try {
    return await work(lock)
  } finally {
    lock.release()
  }
}

/** `npm ci` when the lock file, .npmrc or the Node version changed since the last one. */
export async function installPackages(lock) {
  const due = hashOf([at('package-lock.json'), at('.npmrc')], process.versions.node)
  const done = textOf(STAMP)
  if (done === due) return
  if (done === null && matchesLock()) return writeFileSync(STAMP, due)
  await step('Installing the packages (about a minute)', 'Packages installed', () =>
    run(...npm(['ci', '--include=dev', '--loglevel=error', '--no-audit', '--no-fund']), {
      cwd: at(),
      lock,
      failure: 'The packages could not be installed (npm ci).',
    }),
  )
  writeFileSync(STAMP, due)
}

/** Whether somebody ran npm by hand: what npm noted in node_modules is what the lock file asks for. */
function matchesLock() {
  const noted = JSON.parse(textOf(at('node_modules/.package-lock.json')) ?? 'null')?.packages
  if (!noted) return false
  const asked = JSON.parse(textOf(at('package-lock.json'))).packages
  delete asked['']
  const same = (name) => noted[name]?.integrity === asked[name]?.integrity
  return (
    Object.keys(noted).every((name) => name in asked && same(name)) &&
    Object.keys(asked).every((name) => (name in noted ? same(name) : asked[name].optional))
  )
}

/** npm as a command line; the one that started us, or the one beside this Node. */
function npm(args) {
  const candidates = [
    process.env.npm_execpath,
    join(dirname(process.execPath), '../lib/node_modules/npm/bin/npm-cli.js'),
  ]
  const script = candidates.find((path) => path?.endsWith('npm-cli.js') && existsSync(path))
  if (script) return [process.execPath, [script, ...args]]
  const command = find('npm')
  if (command) return [command, args]
  throw new Stop('npm is missing: install it beside Node, then start again.')
}

/**
 * Makes sure of programs that Debian packages bring: installs them as root, otherwise says what to
 * install.
 *
 * @param {{ what: string, packages: string[], isThere: () => boolean }} need
 */
export async function needProgram({ what, packages, isThere }) {
  if (isThere()) return
  const apt = find('apt-get')
  const command = `apt-get install ${packages.join(' ')}`
  if (!apt || process.getuid?.() !== 0) {
    throw new Stop(`${what} is missing. Install it (on Debian: sudo ${command}), then start again.`)
  }
  const env = { ...process.env, DEBIAN_FRONTEND: 'noninteractive' }
  const failure = `${what} could not be installed (${command}).`
  await step(`Installing ${what} from Debian's packages`, `${what} installed`, async () => {
    // An outdated list may still serve, so only the installation decides.
    await run(apt, [...APT, 'update'], { env, check: false })
    await run(apt, [...APT, 'install', '-y', '--no-install-recommends', ...packages], {
      env,
      failure,
    })
  })
  if (!isThere()) throw new Stop(failure)
}

export const needMariadb = () =>
  needProgram({
    what: 'MariaDB',
    packages: ['mariadb-server'],
    isThere: () => Boolean(find('mariadbd') && find('mariadb-install-db')),
  })

/** The Chromium for browser tests; CHROMIUM_PATH names another. */
export const chromium = () => process.env.CHROMIUM_PATH ?? find('chromium')

export const needChromium = () =>
  needProgram({
    what: 'Chromium',
    packages: ['chromium'],
    isThere: () => existsSync(chromium() ?? ''),
  })
