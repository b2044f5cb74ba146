/**
 * `npm run bench -- demo`: makes the demo with its study (target 20 s on two cores), then asks what the
 * pages ask, and prints each answer's time as a ratio to the bare round trip (`SELECT 1` through
 * Express) of the same run. Times alone say little on a shared machine; the ratios hold.
 */
import { randomBytes } from 'node:crypto'
import type { AddressInfo } from 'node:net'
import { monitorEventLoopDelay, performance } from 'node:perf_hooks'
import { createApp } from '../../server/app.js'
import { systemClock } from '../../server/clock.js'
import { readConfig } from '../../server/config.js'
import { fill, PATHS } from '../../server/contract/paths.js'
import { createDatabase } from '../../server/database/connect.js'
import { DEMO_ACCOUNTS, DEMO_PASSWORD } from '../../server/demo/accounts.js'
import { makeDemo } from '../../server/demo/makeDemo.js'
import { silentLogger } from '../../server/logger.js'

const ROUNDS = 40
const config = readConfig({ SESSION_SECRET: randomBytes(32).toString('hex'), ...process.env })
const sequelize = createDatabase(config.databaseUrl)
const deps = { sequelize, clock: systemClock, logger: silentLogger, config }

const begun = performance.now()
const ends = systemClock.now().toISOString().slice(0, 10)
const [first] = await makeDemo(deps, { seed: 1, ends, withStudy: true })
const seconds = (performance.now() - begun) / 1000
console.log(`demo with its study: ${seconds.toFixed(1)} s, target 20 s`)

const { app, close } = createApp(deps)
const server = app.listen(0, '127.0.0.1')
await new Promise((resolve) => server.once('listening', resolve))
const base = `http://127.0.0.1:${(server.address() as AddressInfo).port}`

/** Signs in as the person who sees the whole network. */
async function signIn(): Promise<string> {
  const lead = DEMO_ACCOUNTS.find(({ label }) => label.startsWith('Education lead'))
  const answer = await fetch(base + PATHS.session, {
    method: 'POST',
    headers: { 'content-type': 'application/json', origin: config.baseUrl },
    body: JSON.stringify({ email: lead?.email, password: DEMO_PASSWORD }),
  })
  if (!answer.ok) throw new Error(await answer.text())
  return answer.headers.get('set-cookie')?.split(';')[0] ?? ''
}

/** Median and 95th percentile in milliseconds. */
async function timed(path: string, cookie: string): Promise<{ median: number; p95: number }> {
  const times: number[] = []
  for (let round = 0; round < ROUNDS; round += 1) {
    const start = performance.now()
    const answer = await fetch(base + path, { headers: { cookie } })
    await answer.arrayBuffer()
    if (!answer.ok) throw new Error(`${path} answered ${answer.status}`)
    times.push(performance.now() - start)
  }
  times.sort((a, b) => a - b)
  const at = (share: number): number => times[Math.floor(share * (times.length - 1))] ?? 0
  return { median: at(0.5), p95: at(0.95) }
}

const network = first?.slug ?? ''
const cookie = await signIn()
const bare = await timed('/readyz', cookie)
console.log(
  `bare round trip: median ${bare.median.toFixed(1)} ms, p95 ${bare.p95.toFixed(1)} ms (ratio 1)`,
)
const delay = monitorEventLoopDelay({ resolution: 5 })
delay.enable()
for (const [name, path] of Object.entries({
  today: fill(PATHS.today, { network }),
  firings: fill(PATHS.firings, { network }),
  losses: fill(PATHS.losses, { network }),
  'losses by month': fill(PATHS.lossesBy, { network, dimension: 'month' }),
  'losses by fault': fill(PATHS.lossesBy, { network, dimension: 'fault' }),
  'losses by clay body': fill(PATHS.lossesBy, { network, dimension: 'clay_body' }),
  findings: fill(PATHS.findings, { network }),
  catalogue: fill(PATHS.catalogue, { network }),
})) {
  const { median, p95 } = await timed(path, cookie)
  const ratio = (median / bare.median).toFixed(1)
  console.log(
    `${name}: ${ratio} times the bare round trip, median ${median.toFixed(1)} ms, p95 ${p95.toFixed(1)} ms`,
  )
}
delay.disable()
console.log(`event loop held up at most ${(delay.max / 1e6).toFixed(0)} ms while answering`)
server.close()
close()
await sequelize.close()
process.exit(0)
