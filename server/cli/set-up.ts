/**
 * Makes a network with its first studio and its first person, who becomes network admin and owner of
 * the studio, and prints a link with which that person sets a password:
 *   set-up --network NAME --slug SLUG --studio NAME --time-zone ZONE --name PERSON --email EMAIL
 *          [--currency EUR] [--json]
 *   set-up --link-for EMAIL [--json]      a new link for somebody who has forgotten the password
 * Exit 1 when the slug is in use or there is no such account, 2 for an argument that cannot be used.
 */
import { parseArgs } from 'node:util'
import { z } from 'zod'
import { systemClock } from '../clock.js'
import type { MadeLink } from '../commands/oneTimeLinks.js'
import { linkForAccount, setUp } from '../commands/setUp.js'
import type { SetUp } from '../commands/setUp.js'
import { readConfig } from '../config.js'
import { currency, timeZone } from '../contract/common.js'
import { personInput } from '../contract/people.js'
import { createDatabase } from '../database/connect.js'
import { migrate } from '../database/migrate.js'
import type { Deps } from '../deps.js'
import { AppError } from '../errors.js'
import { createLogger } from '../logger.js'
import { slugProblem } from '../shared/slugs.js'
import './endOfPipe.js'

const USAGE = `Usage: npm run set-up -- --network NAME --slug SLUG --studio NAME --time-zone ZONE --name PERSON --email EMAIL [--currency EUR] [--json]
       npm run set-up -- --link-for EMAIL [--json]`

class UsageError extends Error {}

const text = (max: number) =>
  z.string('is missing').trim().min(1, 'is empty').max(max, `is longer than ${max} characters`)

/** By the names of the options. */
const options = z.object({
  network: text(120),
  slug: text(60).superRefine((slug, context) => {
    const problem = slugProblem(slug)
    if (problem) context.addIssue(problem)
  }),
  studio: text(120),
  'time-zone': text(60).pipe(timeZone),
  name: text(120),
  email: text(254).pipe(personInput.shape.email),
  currency,
})

type Asked = { json: boolean } & ({ linkFor: string } | { input: SetUp })

function read(args: string[]): Asked {
  const given = { type: 'string' } as const
  const { values } = parseArgs({
    args,
    options: {
      network: given,
      slug: given,
      studio: given,
      'time-zone': given,
      name: given,
      email: given,
      currency: { type: 'string', default: 'EUR' },
      'link-for': given,
      json: { type: 'boolean', default: false },
    },
  })
  const { json, 'link-for': linkFor } = values
  if (linkFor !== undefined) return { json, linkFor }
  const checked = options.safeParse(values)
  if (!checked.success) throw new UsageError(problemsOf(checked.error))
  const { 'time-zone': zone, ...rest } = checked.data
  return { json, input: { ...rest, timeZone: zone } }
}

/** One line an option, all of them at once. */
function problemsOf(error: z.ZodError): string {
  return error.issues.map(({ path, message }) => `--${path.join('.')}: ${message}`).join('\n')
}

function print(asked: Asked, link: MadeLink | null): void {
  const slug = 'input' in asked ? asked.input.slug : undefined
  if (asked.json) {
    console.log(
      JSON.stringify({ slug, url: link?.url ?? null, expiresAt: link?.expiresAt ?? null }),
    )
  } else if (link) {
    console.log(`Open this address within 7 days, once, to set a password:\n${link.url}`)
  } else {
    console.log('The account with this e-mail address has a password: sign in with it.')
  }
}

async function main(args: string[]): Promise<void> {
  const asked = read(args)
  const config = readConfig()
  const sequelize = createDatabase(config.databaseUrl, { poolMax: 2 })
  try {
    await migrate(sequelize)
    const logger = createLogger(config.logLevel, 'stderr')
    const deps: Deps = { sequelize, clock: systemClock, logger, config }
    print(
      asked,
      'input' in asked ? await setUp(asked.input, deps) : await linkForAccount(asked.linkFor, deps),
    )
  } finally {
    await sequelize.close()
  }
}

function sayWhy(error: unknown): number {
  if (error instanceof AppError) {
    const [[field, message] = []] = Object.entries(error.extra.fields ?? {})
    console.error(field ? `--${field}: ${message}` : error.message)
    return 1
  }
  const usage =
    error instanceof UsageError || (error as { code?: string }).code?.startsWith('ERR_PARSE_ARGS')
  if (!usage) throw error
  console.error(`${(error as Error).message}\n${USAGE}`)
  return 2
}

try {
  await main(process.argv.slice(2))
} catch (error) {
  process.exitCode = sayWhy(error)
}
