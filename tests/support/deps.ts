import { systemClock } from '../../server/clock.js'
import type { Config } from '../../server/config.js'
import type { Deps } from '../../server/deps.js'
import { silentLogger } from '../../server/logger.js'
import { testDatabase, testDatabaseUrl } from './database.js'

/** The public origin of test applications; `signedIn` sends it as Origin. */
export const ORIGIN = 'http://duntless.test'

function testConfig(): Config {
  return {
    port: 0,
    host: '127.0.0.1',
    baseUrl: ORIGIN,
    dataDir: '/nonexistent',
    databaseUrl: testDatabaseUrl(),
    sessionSecret: 'a secret that only the tests know, of enough length',
    demo: false,
    // Tests say where a request comes from with X-Forwarded-For, so that throttles of one test are its own.
    trustProxy: ['loopback'],
    logLevel: 'silent',
    clientFolder: '/nonexistent',
    passwordCost: { memoryCost: 64, timeCost: 1, parallelism: 1 },
  }
}

export interface TestDeps extends Partial<Omit<Deps, 'config'>> {
  config?: Partial<Config>
}

/** What commands, queries and jobs are given, on this worker's database. */
export async function testDeps({ config, ...over }: TestDeps = {}): Promise<Deps> {
  return {
    sequelize: await testDatabase(),
    clock: systemClock,
    logger: silentLogger,
    config: { ...testConfig(), ...config },
    ...over,
  }
}
