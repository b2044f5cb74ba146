/**
 * Imports a lot sheet (CSV, one line a lot; the columns are known by their names):
 *   import FILE --network SLUG [--create [--time-zone ZONE]] [--dry-run] [--again]
 *          [--studio NAME] [--kiln NAME] [--kind KIND] [--date YYYY-MM-DD] [--as COLUMN=NAME]... [--json]
 * All or nothing. What is wrong goes to stderr with line and column; exit 1 then, or for a sheet that
 * was imported before; 2 for a file that cannot be read or an argument that cannot be used.
 */
import { randomBytes } from 'node:crypto'
import { readFileSync, statSync } from 'node:fs'
import { basename } from 'node:path'
import { parseArgs } from 'node:util'
import { z } from 'zod'
import { systemClock } from '../clock.js'
import { ImportRefused, importLots } from '../commands/importLots.js'
import type { ImportRequest, ImportSummary } from '../commands/importLots.js'
import { readConfig } from '../config.js'
import { day, kind, timeZone } from '../contract/common.js'
import { createDatabase } from '../database/connect.js'
import { migrate } from '../database/migrate.js'
import { createLogger } from '../logger.js'
import { factor as factorOf } from '../shared/factors.js'
import { plural } from '../shared/plural.js'
import { slugProblem } from '../shared/slugs.js'
import './endOfPipe.js'

const USAGE = `Usage: npm run import -- FILE --network SLUG [--create [--time-zone ZONE]] [--dry-run] [--again]
         [--studio NAME] [--kiln NAME] [--kind KIND] [--date YYYY-MM-DD] [--as COLUMN=NAME]... [--json]`
const MOST_BYTES = 64 * 1024 * 1024
const MOST_SHOWN = 100

const text = (max: number) =>
  z.string().trim().min(1, 'is empty').max(max, `is longer than ${max} characters`)

/** By the names of the options. */
const options = z.object({
  network: text(60).superRefine((slug, context) => {
    const problem = slugProblem(slug)
    if (problem) context.addIssue(problem)
  }),
  'time-zone': timeZone,
  studio: text(120).optional(),
  kiln: text(80).optional(),
  kind: kind.optional(),
  date: day.optional(),
  as: z.array(z.string().regex(/^[^=]+=[^=]+$/, 'must look like COLUMN=NAME')),
})

interface Asked {
  request: ImportRequest
  json: boolean
}

/** @throws Error with one line on what is wrong */
function read(args: string[]): Asked {
  const given = { type: 'string' } as const
  const flag = { type: 'boolean', default: false } as const
  const { values, positionals } = parseArgs({
    args,
    allowPositionals: true,
    options: {
      network: given,
      create: flag,
      'time-zone': { ...given, default: 'UTC' },
      'dry-run': flag,
      again: flag,
      studio: given,
      kiln: given,
      kind: given,
      date: given,
      as: { ...given, multiple: true, default: [] },
      json: flag,
    },
  })
  const [path] = positionals
  if (path === undefined || positionals.length > 1) throw new Error('Name one file.')
  if (values.network === undefined) throw new Error('Name the network with --network SLUG.')
  const checked = options.safeParse(values)
  if (!checked.success) {
    const [issue] = checked.error.issues
    throw new Error(`--${String(issue?.path[0])}: ${issue?.message}`)
  }
  const { network, 'time-zone': zone, studio, kiln, kind: kindOf, date, as } = checked.data
  return {
    json: values.json,
    request: {
      file: basename(path),
      text: contentOf(path),
      network,
      ...(values.create && { create: { timeZone: zone } }),
      defaults: { studio, kiln, kind: kindOf, date },
      as: Object.fromEntries(
        as.map((pair) => pair.split('=').map((part) => part.trim()) as [string, string]),
      ),
      again: values.again,
      dryRun: values['dry-run'],
    },
  }
}

/** UTF-8; other encodings are refused rather than guessed. */
function contentOf(path: string): string {
  if (statSync(path).size > MOST_BYTES)
    throw new Error(`${path} is larger than 64 MB: import it in parts.`)
  try {
    return new TextDecoder('utf-8', { fatal: true }).decode(readFileSync(path))
  } catch (error) {
    if (!(error instanceof TypeError)) throw error
    throw new Error(`${path} is not in UTF-8: save it as “CSV UTF-8”.`, { cause: error })
  }
}

function refuse({ message, problems }: ImportRefused, json: boolean): void {
  for (const { row, column, message: why } of problems.slice(0, MOST_SHOWN)) {
    console.error(`line ${row}${column === '' ? '' : `, column ${column}`}: ${why}`)
  }
  if (problems.length > MOST_SHOWN) console.error(`… and ${problems.length - MOST_SHOWN} more.`)
  const count = problems.length > 0 ? ` ${plural(problems.length, 'problem')}.` : ''
  console.error(`${message}${count} Nothing was written.`)
  if (json)
    console.log(
      JSON.stringify({
        error: message,
        problems: problems.slice(0, MOST_SHOWN),
        count: problems.length,
      }),
    )
}

function print({
  network,
  created,
  firings,
  lots,
  pieces,
  losses,
  names,
  notices,
  dryRun,
}: ImportSummary): void {
  const counts = [
    plural(firings, 'firing'),
    plural(lots, 'lot'),
    plural(pieces, 'piece'),
    `${losses} lost`,
  ].join(', ')
  console.log(
    `${dryRun ? 'Would import' : 'Imported'} ${counts} into ${network}${created ? ' (a new network)' : ''}.`,
  )
  const fresh: [string, string[]][] = [
    ['studio', names.studios],
    ['kiln', names.kilns.map(({ studio, name }) => `${name} (${studio})`)],
    ...[...new Set(names.levels.map(({ factor }) => factor))].map((factor): [string, string[]] => [
      (factorOf(factor)?.name ?? factor).toLowerCase(),
      names.levels
        .filter((level) => level.factor === factor)
        .map(({ name, studio }) => (studio === null ? name : `${name} (${studio})`)),
    ]),
  ]
  for (const [what, list] of fresh)
    if (list.length > 0) console.log(`New, ${what}: ${list.join(', ')}`)
  for (const notice of notices) console.log(notice)
}

async function main(args: string[]): Promise<number> {
  let asked: Asked
  try {
    asked = read(args)
  } catch (error) {
    console.error(`${(error as Error).message}\n${USAGE}`)
    return 2
  }
  // The tool signs nobody in: without a secret of the server it makes do with any.
  const config = readConfig({ SESSION_SECRET: randomBytes(32).toString('hex'), ...process.env })
  const sequelize = createDatabase(config.databaseUrl, { poolMax: 4 })
  try {
    await migrate(sequelize)
    const logger = createLogger(config.logLevel, 'stderr')
    const summary = await importLots(asked.request, {
      sequelize,
      clock: systemClock,
      logger,
      config,
    })
    if (asked.json) console.log(JSON.stringify(summary))
    else print(summary)
    return 0
  } catch (error) {
    if (!(error instanceof ImportRefused)) throw error
    refuse(error, asked.json)
    return 1
  } finally {
    await sequelize.close()
  }
}

process.exitCode = await main(process.argv.slice(2))
