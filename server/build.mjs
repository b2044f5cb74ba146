import { existsSync, readdirSync } from 'node:fs'
import { join } from 'node:path'
import { build } from 'esbuild'

/**
 * Bundles the server: one call, one file for each process that may be started (the server, its study
 * worker, the command-line tools). Packages stay outside.
 *
 * `node server/build.mjs OUT_FOLDER`, from the project's top folder.
 */
const [outdir = 'dist/server'] = process.argv.slice(2)

const tools = readdirSync('server/cli')
  .filter((name) => /^[a-z][a-z-]*\.ts$/.test(name))
  .map((name) => join('server/cli', name))

await build({
  entryPoints: ['server/index.ts', 'server/study/worker.ts', ...tools].filter((file) =>
    existsSync(file),
  ),
  outbase: 'server',
  outdir,
  bundle: true,
  platform: 'node',
  format: 'esm',
  target: 'node20',
  packages: 'external',
  sourcemap: true,
  logLevel: 'warning',
})
