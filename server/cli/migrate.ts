import { readConfig, EXIT_CONFIG } from '../config.js'
import { createDatabase } from '../database/connect.js'
import { migrate } from '../database/migrate.js'

/**
 * Brings the schema of DATABASE_URL up to date. `--json` prints `{"ran": [names]}`. Exit code 78 with
 * one line when there is no such database, or it does not let us in.
 */
const sequelize = createDatabase(readConfig().databaseUrl, { poolMax: 1 })
try {
  if (await reach()) await bringUpToDate()
  else process.exitCode = EXIT_CONFIG
} finally {
  await sequelize.close()
}

async function reach(): Promise<boolean> {
  try {
    await sequelize.authenticate({ retry: { max: 1 } })
    return true
  } catch (error) {
    console.error(`DATABASE_URL names a database that cannot be used: ${cause(error)}`)
    return false
  }
}

/** The database's own words, without the connector's numbering. */
function cause(error: unknown): string {
  const words = error instanceof Error ? error.message : String(error)
  return (/\) (.*)/.exec(words)?.[1] ?? words).split('\n', 1)[0] ?? words
}

async function bringUpToDate(): Promise<void> {
  const ran = await migrate(sequelize)
  if (process.argv.includes('--json')) console.log(JSON.stringify({ ran }))
  else console.log(ran.length === 0 ? 'The schema is up to date.' : `Ran ${ran.join(', ')}.`)
}
