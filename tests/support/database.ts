import type { Sequelize } from 'sequelize'
import { afterAll, inject } from 'vitest'
import { createDatabase } from '../../server/database/connect.js'
import { migrate } from '../../server/database/migrate.js'
import { connectToServer } from './serverConnection.js'

/**
 * A real MariaDB for the `api` and `jobs` projects. Every Vitest worker has a schema of its own,
 * `app_test_<run>_<worker>`; it is migrated by the first file that runs there and dropped at the end
 * of the run. Nothing is emptied between tests: each test makes its own network.
 */
let opened: Promise<Sequelize> | undefined

/** The database of this worker, connected and migrated; closed by itself after the file's tests. */
export function testDatabase(): Promise<Sequelize> {
  opened ??= open()
  return opened
}

/** The address of this worker's schema, for what opens its own connection (workers, CLIs). */
export function testDatabaseUrl(): string {
  const url = new URL(serverUrl())
  url.pathname = `/app_test_${inject('databaseRun')}_${process.env.VITEST_POOL_ID ?? '0'}`
  return url.href
}

function serverUrl(): string {
  const url = process.env.TEST_DATABASE_URL
  if (!url) throw new Error('TEST_DATABASE_URL is not set')
  return url
}

async function open(): Promise<Sequelize> {
  const url = testDatabaseUrl()
  const connection = await connectToServer(serverUrl())
  try {
    await connection.query(`CREATE DATABASE IF NOT EXISTS \`${new URL(url).pathname.slice(1)}\``)
  } finally {
    await connection.end()
  }
  const sequelize = createDatabase(url)
  await migrate(sequelize)
  return sequelize
}

afterAll(async () => {
  await (await opened)?.close()
  opened = undefined
})
