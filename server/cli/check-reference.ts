/**
 * Runs every file of reference values in a folder against server/statistics:
 *   check-reference FOLDER [--json]
 * Exit 1 when a case fails, 2 when the folder or a file cannot be read; a missing method is listed, not a failure.
 */
import { readdirSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import { checkReference, type FileResult } from '../statistics/checkReference.js'
import './endOfPipe.js'

type Listed = FileResult & { file: string }

function main(args: readonly string[]): number {
  const json = args.includes('--json')
  const folders = args.filter((arg) => !arg.startsWith('--'))
  const unknown = args.find((arg) => arg.startsWith('--') && arg !== '--json')
  const [folder] = folders
  if (unknown !== undefined || folder === undefined || folders.length > 1) {
    console.error(unknown ? `Unknown option ${unknown}.` : 'Name one folder of reference files.')
    console.error('Usage: npm run check:reference -- FOLDER [--json]')
    return 2
  }
  const results = read(folder)
  if (results === null) return 2
  const failed = results.flatMap((result) => result.cases).filter((one) => !one.passes).length
  if (json) console.log(JSON.stringify({ folder, failed, files: results.map(summary) }, null, 2))
  else print(results)
  return failed > 0 ? 1 : 0
}

function read(folder: string): Listed[] | null {
  let names: string[]
  try {
    names = readdirSync(folder)
      .filter((name) => name.endsWith('.json'))
      .sort()
  } catch (error) {
    console.error(`Cannot read the folder ${folder}: ${(error as Error).message}`)
    return null
  }
  if (names.length === 0) {
    console.error(`No JSON files in ${folder}.`)
    return null
  }
  const results: Listed[] = []
  for (const file of names) {
    try {
      results.push({
        file,
        ...checkReference(JSON.parse(readFileSync(join(folder, file), 'utf8'))),
      })
    } catch (error) {
      console.error(`Cannot read ${file}: ${(error as Error).message}`)
      return null
    }
  }
  return results
}

function summary(result: Listed) {
  const passed = result.cases.filter((one) => one.passes).length
  return { ...result, passed, failed: result.cases.length - passed }
}

function print(results: readonly Listed[]): void {
  for (const result of results) {
    const passed = result.cases.filter((one) => one.passes).length
    const count = `${passed} passed, ${result.cases.length - passed} failed`
    console.log(`${result.file.padEnd(32)} ${result.status === 'checked' ? count : result.status}`)
    for (const one of result.cases.filter((item) => !item.passes)) {
      console.log(`  FAILED ${one.name} (${one.source})`)
      for (const problem of one.problems) console.log(`    ${problem}`)
    }
  }
  const cases = results.flatMap((result) => result.cases)
  const passed = cases.filter((one) => one.passes).length
  const missing = results
    .filter((result) => result.status === 'missing')
    .map((result) => result.method)
  if (missing.length > 0) console.log(`Missing: ${missing.join(', ')}`)
  console.log(
    `${passed} passed, ${cases.length - passed} failed, ${missing.length} methods missing`,
  )
}

process.exitCode = main(process.argv.slice(2))
