import { existsSync } from 'node:fs'
import { buildStale } from './build.mjs'
import { end } from './ending.mjs'
import { alone, installPackages } from './install.mjs'
import { at, packageScript } from './places.mjs'
import { node } from './programs.mjs'
import { complain, say } from './say.mjs'

/** Checks of the sources: lint with format, and the three type projects. */

const FOLDERS = ['src', 'server', 'jobs', 'tests', '.config']
const FORMATTED = [
  ...['src', 'server', 'jobs', 'tests'].map((folder) => `${folder}/**/*.{ts,mts,mjs,vue,css}`),
  ...['*.{ts,json,html}', '.config/*'],
]
const PROJECTS = ['src', 'server', 'tests']

const quiet = { cwd: at(), check: false }

/**
 * ESLint and Prettier over everything; `--fix` repairs what they can.
 *
 * @returns {Promise<{ ok: boolean, output: string }>}
 */
export async function lint({ args = [], env = process.env } = {}) {
  const fix = args.includes('--fix')
  const folders = FOLDERS.filter((folder) => existsSync(at(folder)))
  const rules = await node(
    [
      ...[packageScript.eslint, '--config', '.config/eslint.config.js', '--max-warnings', '0'],
      ...[
        '--no-error-on-unmatched-pattern',
        ...(fix ? ['--fix'] : []),
        ...folders,
        'vite.config.ts',
      ],
    ],
    { ...quiet, env },
  )
  const format = await node(
    [
      ...[packageScript.prettier, '--config', '.config/prettier.json', '--log-level', 'warn'],
      ...['--no-error-on-unmatched-pattern', fix ? '--write' : '--check', ...FORMATTED],
    ],
    { ...quiet, env },
  )
  return { ok: rules.code === 0 && format.code === 0, output: rules.output + format.output }
}

/** @returns {Promise<{ ok: boolean, output: string }>} of one type project */
export async function types(project, env = process.env) {
  const script = [packageScript.vueTsc, '--noEmit', '-p', `${project}/tsconfig.json`]
  const { code, output } = await node(script, { ...quiet, env })
  return { ok: code === 0, output }
}

export const typeProjects = PROJECTS

export async function lintOnly(args) {
  await alone(installPackages)
  await report('lint', await lint({ args }))
}

export async function typesOnly() {
  await alone(installPackages)
  const results = []
  for (const project of PROJECTS) results.push(await types(project))
  await report('types', {
    ok: results.every(({ ok }) => ok),
    output: results.map(({ output }) => output).join(''),
  })
}

export async function buildOnly() {
  await alone(async (project) => {
    await installPackages(project)
    await buildStale(project)
  })
  say('The build in dist is up to date')
  await end(0)
}

async function report(what, { ok, output }) {
  if (output.trim()) complain(output.trimEnd())
  say(`${what}: ${ok ? 'no problem' : 'failed'}`)
  await end(ok ? 0 : 1)
}
