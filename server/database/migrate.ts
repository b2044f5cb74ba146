import { SequelizeStorage, Umzug } from 'umzug'
import type { Sequelize } from 'sequelize'
import { migrations } from '../migrations/index.js'

/**
 * Runs the migrations that this schema has not seen, oldest first. Two processes may call it at
 * once: a lock on a connection of its own lets one through at a time.
 * @returns names of the migrations that ran
 */
export async function migrate(sequelize: Sequelize): Promise<string[]> {
  const umzug = new Umzug({
    migrations: migrations.map(({ name, up }) => ({ name, up })),
    context: sequelize,
    storage: new SequelizeStorage({ sequelize, tableName: 'migration' }),
    logger: undefined,
  })
  const { createConnection } = await import('mariadb')
  const config = sequelize.config
  const lock = await createConnection({
    host: config.host,
    port: Number(config.port),
    user: config.username,
    password: config.password ?? undefined,
    database: config.database,
  })
  const name = `duntless-migrate-${config.database}`.slice(0, 64)
  try {
    await lock.query('SELECT GET_LOCK(?, 120)', [name])
    const ran = await umzug.up()
    return ran.map((each) => each.name)
  } finally {
    await lock.end()
  }
}
