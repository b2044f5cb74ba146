import { createHash } from 'node:crypto'
import { readdirSync, readFileSync, statSync } from 'node:fs'
import { tmpdir, userInfo } from 'node:os'
import { join, resolve } from 'node:path'
import { fileURLToPath } from 'node:url'

/** Where things are. Every path starts from the project's top folder, wherever we were called from. */

export const TOP = resolve(fileURLToPath(import.meta.url), '../../..')

export const at = (...parts) => join(TOP, ...parts)

/** Guards node_modules and dist, which all launchers of this checkout share. */
export const projectLock = join(
  tmpdir(),
  `duntless-${userInfo().uid}-${createHash('sha256').update(TOP).digest('hex').slice(0, 12)}.lock`,
)

/** The script of an installed package. */
export const packageScript = {
  eslint: at('node_modules/eslint/bin/eslint.js'),
  playwright: at('node_modules/@playwright/test/cli.js'),
  prettier: at('node_modules/prettier/bin/prettier.cjs'),
  tsx: at('node_modules/tsx/dist/cli.mjs'),
  vite: at('node_modules/vite/bin/vite.js'),
  vitest: at('node_modules/vitest/vitest.mjs'),
  vueTsc: at('node_modules/vue-tsc/bin/vue-tsc.js'),
}

/** All files below the given files and folders, sorted; what is missing is left out. */
export function filesBelow(places) {
  return places.flatMap(walk).sort()
}

function walk(place) {
  const found = statSync(place, { throwIfNoEntry: false })
  if (!found) return []
  if (!found.isDirectory()) return [place]
  return readdirSync(place).flatMap((name) => walk(join(place, name)))
}

/** One hash over names and contents. */
export function hashOf(files, ...more) {
  const hash = createHash('sha256')
  for (const file of files) hash.update(`${file.slice(TOP.length)}\0`).update(readFileSync(file))
  for (const text of more) hash.update(`\0${text}`)
  return hash.digest('hex')
}

/** @returns {string | null} the text of a file, null when it cannot be read */
export function textOf(file) {
  try {
    return readFileSync(file, 'utf8')
  } catch {
    return null
  }
}
