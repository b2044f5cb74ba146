/**
 * Requests a run of a job and does it in this process:
 *   job NAME [--network SLUG] [--json]
 * Progress goes to stderr, the outcome to stdout. Exit 0 when it was done, 1 when it failed, 2 for a
 * job or network that is not there. A run that another process holds already is waited for.
 */
import { randomBytes } from 'node:crypto'
import { setTimeout as pause } from 'node:timers/promises'
import { parseArgs } from 'node:util'
import { RUNNERS } from '../../jobs/schedule.js'
import { systemClock } from '../clock.js'
import { requestRun } from '../commands/requestRun.js'
import { readConfig } from '../config.js'
import { createDatabase } from '../database/connect.js'
import type { Deps } from '../deps.js'
import { createLogger } from '../logger.js'
import { Network } from '../models/index.js'
import { presentRun } from '../presenters/job.js'
import { findRun } from '../queries/jobRuns.js'
import type { JobRunRow } from '../queries/jobRuns.js'
import { systemScope } from '../queries/scopeFor.js'
import type { Scope } from '../policies/index.js'
import { runSlot } from '../scheduling/runSlot.js'
import { claimSlot, ownerName } from '../scheduling/slots.js'
import type { HeldSlot } from '../scheduling/types.js'
import { JOBS, jobFacts } from '../shared/jobs.js'
import './endOfPipe.js'

const USAGE = 'Usage: npm run job -- NAME --network SLUG [--json]'
const POLL_MS = 500

class UsageError extends Error {}

interface Asked {
  job: string
  network: string
  json: boolean
}

function read(args: string[]): Asked {
  const { values, positionals } = parseArgs({
    args,
    allowPositionals: true,
    options: { network: { type: 'string' }, json: { type: 'boolean', default: false } },
  })
  const ofNetworks = JOBS.filter((each) => each.of === 'network').map((each) => each.job)
  const [job, ...more] = positionals
  if (job === undefined || more.length > 0)
    throw new UsageError(`Name one job: ${ofNetworks.join(' or ')}.`)
  if (jobFacts(job)?.of !== 'network')
    throw new UsageError(`There is no job "${job}"; there are ${ofNetworks.join(' and ')}.`)
  if (!values.network) throw new UsageError('Say whose with --network SLUG.')
  return { job, network: values.network, json: values.json }
}

async function scopeOf(slug: string): Promise<Scope> {
  const scope = await systemScope(slug)
  if (scope) return scope
  const slugs = (await Network.findAll({ attributes: ['slug'], order: ['slug'], raw: true })).map(
    (network) => network.slug,
  )
  const there =
    slugs.length > 0 ? `there are: ${slugs.slice(0, 20).join(', ')}` : 'there is none yet'
  throw new UsageError(`There is no network "${slug}"; ${there}.`)
}

function showProgress(job: string, percent: number): void {
  process.stderr.write(`${job}: ${Math.round(percent)} %\n`)
}

async function runHere(held: HeldSlot, deps: Deps): Promise<void> {
  const stopping = new AbortController()
  const stop = (): void => stopping.abort(new Error('Stopped from the keyboard.'))
  process.once('SIGINT', stop)
  process.once('SIGTERM', stop)
  let shown = -10
  await runSlot(
    held,
    (RUNNERS as Partial<typeof RUNNERS>)[held.job as keyof typeof RUNNERS],
    deps,
    stopping.signal,
    (percent) => {
      if (percent < 100 && percent - shown < 10) return
      shown = percent
      showProgress(held.job, percent)
    },
  )
}

/** Another process has it: look on until it has ended or waits again. */
async function waitFor(scope: Scope, id: number): Promise<void> {
  process.stderr.write('Another process runs it already; waiting for it.\n')
  while ((await findRun(scope, id))?.status === 'running') await pause(POLL_MS)
}

function print(run: JobRunRow, json: boolean): number {
  const outcome = run.outcome ?? run.error ?? ''
  if (json) console.log(JSON.stringify(presentRun(run), null, 2))
  else if (run.status === 'done') console.log(outcome)
  else
    console.error(
      run.status === 'failed'
        ? `Failed: ${outcome}`
        : `Not done: ${outcome || 'it waits'} (it will be tried again).`,
    )
  return run.status === 'done' ? 0 : 1
}

async function main(args: string[]): Promise<number> {
  const asked = read(args)
  // The tool signs nobody in: without a secret of the server it makes do with any.
  const config = readConfig({ SESSION_SECRET: randomBytes(32).toString('hex'), ...process.env })
  const sequelize = createDatabase(config.databaseUrl, { poolMax: 4 })
  try {
    const deps: Deps = {
      sequelize,
      clock: systemClock,
      logger: createLogger(config.logLevel, 'stderr'),
      config,
    }
    const scope = await scopeOf(asked.network)
    const { id } = await requestRun(scope, asked.job, deps)
    const held = await claimSlot(id, ownerName(), deps)
    await (held ? runHere(held, deps) : waitFor(scope, id))
    const run = await findRun(scope, id)
    if (!run) throw new Error('The record of the run is gone.')
    return print(run, asked.json)
  } finally {
    await sequelize.close()
  }
}

try {
  process.exitCode = await main(process.argv.slice(2))
} catch (error) {
  const usage =
    error instanceof UsageError || (error as { code?: string }).code?.startsWith('ERR_PARSE_ARGS')
  console.error((error as Error).message)
  if (usage) console.error(USAGE)
  process.exitCode = usage ? 2 : 1
}
