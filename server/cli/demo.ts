/**
 * The demo networks:
 *   demo --hash [--seed N] [--ends YYYY-MM-DD] [--json]            content hash, no database needed
 *   demo --into-database [--seed N] [--ends …] [--without-study] [--json]   writes them into DATABASE_URL
 * With --if-empty nothing is written when the database holds a network already.
 * The seed is 1 and the last day is today (UTC) when left out. Exit 1 when the demo cannot be
 * written, 2 for an argument that cannot be used.
 */
import { randomBytes } from 'node:crypto'
import { parseArgs } from 'node:util'
import { systemClock } from '../clock.js'
import { readConfig } from '../config.js'
import { createDatabase } from '../database/connect.js'
import { migrate } from '../database/migrate.js'
import { demoHash, generateDemo } from '../demo/generateDemo.js'
import type { DemoInput } from '../demo/generateDemo.js'
import { DemoThereError, makeDemo } from '../demo/makeDemo.js'
import { createLogger } from '../logger.js'
import { Network } from '../models/index.js'
import './endOfPipe.js'

const USAGE = `Usage: npm run demo -- --hash [--seed N] [--ends YYYY-MM-DD] [--json]
       npm run demo -- --into-database [--seed N] [--ends YYYY-MM-DD] [--without-study] [--if-empty] [--json]`

interface Asked extends DemoInput {
  into: boolean
  withStudy: boolean
  ifEmpty: boolean
  json: boolean
}

/** @throws Error with one line on what is wrong */
function read(args: string[]): Asked {
  const { values } = parseArgs({
    args,
    options: {
      hash: { type: 'boolean' },
      'into-database': { type: 'boolean' },
      'without-study': { type: 'boolean' },
      'if-empty': { type: 'boolean', default: false },
      seed: { type: 'string', default: '1' },
      ends: { type: 'string', default: systemClock.now().toISOString().slice(0, 10) },
      json: { type: 'boolean' },
    },
  })
  const { hash = false, 'into-database': into = false, seed, ends } = values
  if (hash === into) throw new Error('Say either --hash or --into-database.')
  if (!/^\d{1,9}$/.test(seed)) throw new Error(`--seed must be a whole number, not ${seed}.`)
  const day = new Date(`${ends}T00:00:00Z`)
  const isDay =
    /^\d{4}-\d{2}-\d{2}$/.test(ends) &&
    !Number.isNaN(day.getTime()) &&
    day.toISOString().startsWith(ends)
  if (!isDay) throw new Error(`--ends must be a day like 2026-10-15, not ${ends}.`)
  return {
    into,
    withStudy: values['without-study'] !== true,
    ifEmpty: values['if-empty'],
    json: values.json === true,
    seed: Number(seed),
    ends,
  }
}

async function write({ seed, ends, withStudy, ifEmpty, json }: Asked): Promise<void> {
  // The tool signs nobody in: without a secret of the server it makes do with any.
  const config = readConfig({ SESSION_SECRET: randomBytes(32).toString('hex'), ...process.env })
  const sequelize = createDatabase(config.databaseUrl, { poolMax: 4 })
  try {
    await migrate(sequelize)
    if (ifEmpty && (await Network.findOne())) {
      console.log(
        json ? JSON.stringify({ seed, ends, networks: [] }) : 'There is a network already.',
      )
      return
    }
    const logger = createLogger(config.logLevel, 'stderr')
    const networks = await makeDemo(
      { sequelize, clock: systemClock, logger, config },
      { seed, ends, withStudy },
    )
    if (json) console.log(JSON.stringify({ seed, ends, networks }))
    else {
      for (const { name, firings, lots, pieces } of networks) {
        console.log(`${name}: ${firings} firings, ${lots} lots, ${pieces} pieces`)
      }
    }
  } finally {
    await sequelize.close()
  }
}

async function main(args: string[]): Promise<number> {
  let asked: Asked
  try {
    asked = read(args)
  } catch (error) {
    console.error(`${(error as Error).message}\n${USAGE}`)
    return 2
  }
  const { seed, ends } = asked
  if (!asked.into) {
    const hash = demoHash(generateDemo({ seed, ends }))
    console.log(asked.json ? JSON.stringify({ seed, ends, hash }) : hash)
    return 0
  }
  try {
    await write(asked)
    return 0
  } catch (error) {
    if (!(error instanceof DemoThereError)) throw error
    console.error(error.message)
    return 1
  }
}

process.exitCode = await main(process.argv.slice(2))
