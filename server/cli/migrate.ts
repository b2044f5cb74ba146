import { readConfig } from '../config.js'
import { createDatabase } from '../database/connect.js'
import { migrate } from '../database/migrate.js'

/** Brings the schema of DATABASE_URL up to date. `--json` prints `{"ran": [names]}`. */
const sequelize = createDatabase(readConfig().databaseUrl, { poolMax: 1 })
try {
  const ran = await migrate(sequelize)
  if (process.argv.includes('--json')) console.log(JSON.stringify({ ran }))
  else console.log(ran.length === 0 ? 'The schema is up to date.' : `Ran ${ran.join(', ')}.`)
} finally {
  await sequelize.close()
}
