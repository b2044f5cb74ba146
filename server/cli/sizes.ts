import { readFileSync } from 'node:fs'
import { resolve } from 'node:path'
import { gzipSync } from 'node:zlib'
import { BUDGETS, overBudget, pageSizes, type Manifest, type PageSize } from './pageSizes.js'
import './endOfPipe.js'

/**
 * What a browser loads before a page shows: `npm run sizes [-- --json]`. Fails when a page is over its
 * budget or the charts are part of every page's first load.
 */
const client = resolve('dist/client')
const manifest = JSON.parse(
  readFileSync(resolve(client, '.vite/manifest.json'), 'utf8'),
) as Manifest

const contentOf = (file: string): Buffer => readFileSync(resolve(client, file))
const pages = pageSizes(manifest, (file) => gzipSync(contentOf(file)).length)
// A class name that ApexCharts sets on its canvas: chunk names do not tell what is inside.
const problems = overBudget(pages, (file) => contentOf(file).includes('apexcharts-canvas'))

if (process.argv.includes('--json')) {
  console.log(JSON.stringify({ pages, budgets: BUDGETS, problems }))
} else {
  print(pages)
  for (const problem of problems) console.error(problem)
}
process.exitCode = problems.length > 0 ? 1 : 0

function print(sizes: PageSize[]): void {
  const width = Math.max(...sizes.map(({ page }) => page.length))
  console.log('First load of JavaScript, gzip')
  for (const { page, bytes, files } of sizes) {
    const kB = (bytes / 1000).toFixed(1).padStart(7)
    console.log(`${page.padEnd(width)} ${kB} kB in ${files.length} files`)
  }
}
