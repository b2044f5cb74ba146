import { createServer } from 'node:http'
import type { Server } from 'node:http'
import { createApp } from './app.js'
import { systemClock } from './clock.js'
import { passwordMatches } from './commands/passwords.js'
import { seedAllNetworks } from './commands/seedFixedLevels.js'
import { ConfigError, EXIT_CONFIG, readConfig } from './config.js'
import type { Config } from './config.js'
import { createDatabase } from './database/connect.js'
import { migrate } from './database/migrate.js'
import { DemoThereError, makeDemo } from './demo/makeDemo.js'
import type { Deps } from './deps.js'
import { addressOf } from './launch/settings.mjs'
import { createLogger } from './logger.js'
import { Network } from './models/index.js'
import { forgetAttempts } from './queries/signInAttempts.js'
import { startScheduler } from './scheduling/index.js'

/** The server process; `server/config.ts` tells what it is given and what it owes the launcher. */

const STOP_MS = 8_000
const ATTEMPTS_KEPT_MS = 24 * 3600_000
const DEMO_SEED = 1

function configOrExit(): Config {
  try {
    return readConfig()
  } catch (error) {
    if (!(error instanceof ConfigError)) throw error
    process.stderr.write(`${error.message}\n`)
    process.exit(EXIT_CONFIG)
  }
}

/** What the database must hold before the first request. */
async function prepare(deps: Deps): Promise<void> {
  const ran = await migrate(deps.sequelize)
  if (ran.length > 0) deps.logger.info({ ran }, 'migrated')
  await seedAllNetworks()
  // Makes the hash that stands for unknown accounts, so that the first guess at one takes no longer.
  await passwordMatches('', null, deps)
  await forgetAttempts(deps.sequelize, new Date(deps.clock.now().getTime() - ATTEMPTS_KEPT_MS))
  if (deps.config.demo && (await Network.count()) === 0) await makeDemoOnce(deps)
}

/** Another server over the same database may have made it meanwhile. */
async function makeDemoOnce(deps: Deps): Promise<void> {
  const ends = deps.clock.now().toISOString().slice(0, 10)
  try {
    await makeDemo(deps, { seed: DEMO_SEED, ends, withStudy: true })
  } catch (error) {
    if (!(error instanceof DemoThereError)) throw error
  }
}

function warnAbout({ config, logger }: Deps): void {
  if (config.baseUrl.startsWith('https:') && config.trustProxy === false) {
    logger.warn(
      'BASE_URL is https, but TRUST_PROXY is off: nobody can sign in until it names the proxy',
    )
  }
}

function listen(server: Server, { host, port }: Config): Promise<void> {
  return new Promise((resolve, reject) => {
    server.once('error', reject)
    server.listen(port, host, () => {
      server.off('error', reject)
      resolve()
    })
  })
}

/** Stops accepting, lets open requests finish, and cuts what has not finished in time. */
function close(server: Server): Promise<void> {
  return new Promise((resolve) => {
    const cut = setTimeout(() => server.closeAllConnections(), STOP_MS)
    server.close(() => {
      clearTimeout(cut)
      resolve()
    })
    server.closeIdleConnections()
  })
}

function stopOnSignal(stop: () => Promise<void>, { logger }: Deps): void {
  let stopping = false
  const end = (signal: NodeJS.Signals) => {
    if (stopping) return
    stopping = true
    logger.info({ signal }, 'stopping')
    stop().then(
      () => process.exit(0),
      (error: unknown) => {
        logger.error({ err: error }, 'could not stop cleanly')
        process.exit(1)
      },
    )
  }
  process.on('SIGTERM', end)
  process.on('SIGINT', end)
}

async function main(): Promise<void> {
  const config = configOrExit()
  const logger = createLogger(config.logLevel)
  const sequelize = createDatabase(config.databaseUrl)
  const deps: Deps = { sequelize, clock: systemClock, logger, config }
  warnAbout(deps)
  await prepare(deps)
  const { app, close: closeApp } = createApp(deps)
  const server = createServer(app)
  await listen(server, config)
  const scheduler = startScheduler(deps)
  stopOnSignal(async () => {
    await Promise.all([close(server), scheduler.stop()])
    closeApp()
    await sequelize.close()
  }, deps)
  process.stdout.write(
    `${JSON.stringify({ ready: true, address: addressOf(config.host, config.port) })}\n`,
  )
}

await main()
