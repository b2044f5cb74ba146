/**
 * Lists every route of the server: path, method and the ability that it asks for.
 *   routes [--json]
 */
import { healthRoutes } from '../routes/health.js'
import { ROUTES } from '../routes/index.js'
import { sessionRoutes } from '../routes/session.js'
import './endOfPipe.js'

const NOBODY = () => Promise.reject(new Error('This tool signs nobody in'))

const rows = [...healthRoutes, ...sessionRoutes(NOBODY), ...ROUTES]
  .map(({ path, method, ability, csrf }) => ({ path, method: method.toUpperCase(), ability, csrf }))
  .sort((a, b) => a.path.localeCompare(b.path) || a.method.localeCompare(b.method))

function print(): void {
  const width = Math.max(...rows.map(({ path }) => path.length))
  for (const { path, method, ability } of rows) {
    console.log(`${path.padEnd(width)}  ${method.padEnd(6)}  ${ability}`)
  }
}

const [option, ...more] = process.argv.slice(2)
if (more.length > 0 || (option !== undefined && option !== '--json')) {
  console.error('Usage: npm run routes [-- --json]')
  process.exitCode = 2
} else if (option === '--json') {
  console.log(JSON.stringify(rows, null, 2))
} else {
  print()
}
