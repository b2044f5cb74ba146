import { openOrGiven, takeDataDir, aboutHolder } from './start.mjs'
import { atEnd, end } from './ending.mjs'
import { alone, installPackages } from './install.mjs'
import { freePort, isFree } from './ports.mjs'
import { at, packageScript } from './places.mjs'
import { launch, node, until } from './programs.mjs'
import { say, step, Stop } from './say.mjs'
import { choosePort, INTO_EMPTY, isReady, prepareDemo, serverEnv } from './serve.mjs'
import { addressOf } from './settings.mjs'
import { supervise } from './supervise.mjs'
import { migrateSource, toolArgs } from './cli.mjs'

const VITE_PORT = 5173
const READY_MS = 120_000

/** `npm run dev`: database, server and client from their sources, each started again on a change. */
export async function dev(settings) {
  const got = await takeDataDir(settings.dataDir, { command: 'dev' })
  if (got.holder) {
    say(aboutHolder(got.holder))
    return end(got.holder.address ? 0 : 1)
  }
  const { lock } = got
  const port = await choosePort(settings)
  const clientPort = (await isFree(VITE_PORT)) ? VITE_PORT : await freePort()
  const address = addressOf('127.0.0.1', clientPort)
  lock.tell({ host: settings.host, port, address })
  const [opened] = await Promise.all([
    openOrGiven(settings, lock, settings.demo === 'off' ? 'off' : 'due'),
    alone(installPackages),
  ])
  const env = serverEnv({
    settings,
    port,
    databaseUrl: opened.url,
    demo: false,
    baseUrl: address,
    base: { ...process.env, NODE_ENV: 'development' },
  })
  await migrateSource(env)
  const demo = await prepareDemo({ settings, state: opened.state, makeDemo: () => makeDemo(env) })
  env.DEMO = demo ? 'on' : 'off'
  await watchServer(env, addressOf(settings.host, port))
  await watchClient(env, clientPort, addressOf(settings.host, port))
  lock.tell({ ready: true })
  say(`Duntless is ready, from its sources: ${address}`)
}

async function makeDemo(env) {
  await step('Making the demo networks', 'Demo networks made', () =>
    node(toolArgs('demo', INTO_EMPTY), {
      cwd: at(),
      env,
      failure: 'The demo could not be made.',
    }),
  )
}

const shown = { cwd: at(), stdio: ['ignore', 'inherit', 'inherit'] }

/** tsx keeps running while the source has a mistake, so readiness is only waited for at the start. */
async function watchServer(env, address) {
  const script = [packageScript.tsx, 'watch', '--clear-screen=false', 'server/index.ts']
  const server = await supervise({
    name: 'The server',
    launch: () => launch(process.execPath, script, { ...shown, env }),
    isReady: () => isReady(address),
    patience: READY_MS,
    lastWords: () => '',
  })
  atEnd(() => server.stop())
}

async function watchClient(env, clientPort, apiAddress) {
  const args = [packageScript.vite, '--port', String(clientPort), '--strictPort']
  const client = launch(process.execPath, args, { ...shown, env: { ...env, API_URL: apiAddress } })
  void client.ended.then(() => end(1))
  const listening = await until(async () => !(await isFree(clientPort)), READY_MS)
  if (!listening) throw new Stop('The client did not start.')
}
