import { randomBytes } from 'node:crypto'
import type { TestProject } from 'vitest/node'
import { connectToServer } from './serverConnection.js'

declare module 'vitest' {
  interface ProvidedContext {
    /** Marks the schemas of this run, so that several runs can share one MariaDB. */
    databaseRun: string
  }
}

/** Set-up of the `api` and `jobs` projects: names this run, and drops its schemas at the end. */
export default function globalDatabase(project: TestProject): () => Promise<void> {
  const url = process.env.TEST_DATABASE_URL
  if (!url) {
    throw new Error(
      'TEST_DATABASE_URL is not set; `npm test -- --only api` starts a database itself',
    )
  }
  const run = randomBytes(4).toString('hex')
  project.provide('databaseRun', run)
  return () => dropSchemas(url, `app_test_${run}_`)
}

async function dropSchemas(url: string, prefix: string): Promise<void> {
  const connection = await connectToServer(url)
  try {
    const rows: { name: string }[] = await connection.query(
      'SELECT schema_name AS name FROM information_schema.schemata WHERE LEFT(schema_name, ?) = ?',
      [prefix.length, prefix],
    )
    for (const { name } of rows) await connection.query(`DROP DATABASE \`${name}\``)
  } finally {
    await connection.end()
  }
}
