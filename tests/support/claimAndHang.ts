/**
 * A server that dies in the middle of a run: claims the next run of the database named by DATABASE_URL
 * at the moment NOW, says so on stdout and then does nothing until it is killed.
 */
import { fixedClock } from '../../server/clock.js'
import type { Config } from '../../server/config.js'
import { createDatabase } from '../../server/database/connect.js'
import { silentLogger } from '../../server/logger.js'
import { claimNext, ownerName } from '../../server/scheduling/slots.js'

const sequelize = createDatabase(process.env.DATABASE_URL ?? '')
const clock = fixedClock(process.env.NOW ?? '')
const held = await claimNext(ownerName(), {
  sequelize,
  clock,
  logger: silentLogger,
  config: {} as Config,
})
process.stdout.write(`${JSON.stringify(held)}\n`)
setInterval(() => undefined, 1000)
