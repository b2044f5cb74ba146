import { existsSync, renameSync, rmSync, writeFileSync } from 'node:fs'
import { at, filesBelow, hashOf, packageScript, textOf } from './places.mjs'
import { node } from './programs.mjs'
import { step } from './say.mjs'

/**
 * Builds what is stale. Each part is made in a folder of its own and put in place by a rename, so that
 * a server that runs meanwhile never serves half a build; its stamp is written last.
 */

const PARTS = [
  {
    name: 'client',
    sources: ['src', 'server/shared', 'server/contract', 'index.html', 'vite.config.ts'],
    proof: 'index.html',
    build: (folder) => [packageScript.vite, 'build', '--logLevel', 'warn', '--outDir', folder],
  },
  {
    name: 'server',
    sources: ['server', 'jobs'],
    proof: 'index.js',
    build: (folder) => [at('server/build.mjs'), folder],
  },
]

/** The launcher itself is not built, but for the rules that server/config.ts imports. */
const isSource = (file) => !/\/server\/launch(\.mjs|\/(?!settings))/.test(file)

/** @param {'client' | 'server'} [only] */
export async function buildStale(lock, only) {
  for (const part of PARTS.filter(({ name }) => !only || name === only)) {
    const stamp = at(`dist/${part.name}.stamp`)
    const files = filesBelow([...part.sources, 'package-lock.json'].map((place) => at(place)))
    const due = hashOf(files.filter(isSource), process.versions.node)
    const whole = existsSync(at(`dist/${part.name}`, part.proof))
    if (whole && textOf(stamp) === due) continue
    await step(`Building the ${part.name}`, `Built the ${part.name}`, () =>
      build(part, stamp, due, lock),
    )
  }
}

async function build(part, stamp, due, lock) {
  const fresh = at(`dist/${part.name}.new`)
  const place = at(`dist/${part.name}`)
  rmSync(fresh, { recursive: true, force: true })
  await node(part.build(fresh), {
    cwd: at(),
    lock,
    env: { ...process.env, NODE_ENV: 'production' },
    failure: `The ${part.name} could not be built.`,
  })
  rmSync(stamp, { force: true })
  rmSync(place, { recursive: true, force: true })
  renameSync(fresh, place)
  writeFileSync(stamp, due)
}
