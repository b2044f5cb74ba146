import { v7 } from 'uuid'
import type { Express } from 'express'
import { Finding, Lot, Study } from '../../server/models/index.js'
import type { Firing, Kiln, Level, Network, Studio, User } from '../../server/models/index.js'
import type { Route } from '../../server/routes/defineRoute.js'
import { signedIn } from './api.js'
import type { Agent } from './api.js'
import { testDatabase } from './database.js'
import { makeKiln, makeLevel, makeNetwork, makePerson, makeStudio } from './factories.js'
import { makeFiring } from './firings.js'
import { rowsOf } from './rows.js'
import { sample } from './sample.js'

/** One studio with one of everything; what a stranger must not reach. */
export interface World {
  network: Network
  studio: Studio
  kiln: Kiln
  level: Level
  firing: Firing
  finding: Finding
  person: User
}

async function makeFinding(studio: Studio, level: Level): Promise<Finding> {
  const { networkId, id: studioId } = studio
  const day = { windowFrom: '2025-03-04', windowTo: '2026-03-04' }
  const moment = {
    startedAt: new Date('2026-03-04T02:00:00Z'),
    finishedAt: new Date('2026-03-04T02:01:00Z'),
  }
  const study = await Study.create({
    ...{ networkId, studioId, uid: v7(), ...day, ...moment, parameters: {}, watermark: 0, seed: 1 },
    ...{ firings: 1, lots: 1, pieces: 10, comparisons: 1, findings: 1, codeVersion: 'test' },
  })
  return Finding.create({
    ...{ networkId, studioId, studyId: study.id, uid: v7(), identity: v7(), fault: 's-crack' },
    ...{
      factor: level.factor,
      levelId: level.id,
      comparison: 'within-firing',
      pValue: 0.001,
      qValue: 0.01,
    },
    ...{ exposedUnits: 10, exposedEvents: 5, unexposedUnits: 10, unexposedEvents: 1 },
    ...{
      mixedStrata: 1,
      informativeStrata: 1,
      recordedShare: 1,
      levels: [],
      firstSeenOn: '2026-03-04',
    },
  })
}

/** A studio of the network with one of everything in it. */
export async function makeWorld(network?: Network): Promise<World> {
  const home = network ?? (await makeNetwork())
  const studio = await makeStudio({ network: home })
  const kiln = await makeKiln({ studio })
  const level = await makeLevel({ studio })
  const person = await makePerson({ roles: [{ role: 'technician', studio }] })
  const lots = [{ pieces: 10, levels: { clay_body: level }, losses: [{ pieces: 1 }] }]
  const { firing } = await makeFiring({ kiln, pieces: 20, lots })
  const finding = await makeFinding(studio, level)
  return { network: home, studio, kiln, level, firing, finding, person }
}

/** Every uid of the world that its network's other members must not be told. */
export async function secretsOf({
  studio,
  kiln,
  level,
  firing,
  finding,
  person,
}: World): Promise<string[]> {
  const where = { networkId: studio.networkId, firingId: firing.id }
  const lots = await Lot.findAll({ where })
  const things = [studio, kiln, level, firing, finding, person, ...lots]
  return [...things.map(({ uid }) => uid), studio.name, kiln.name, level.name, person.email]
}

/** Somebody with every role over the world. */
export async function entitled(app: Express, { network, studio }: World): Promise<Agent> {
  const roles = [
    { role: 'network-admin' },
    { role: 'owner', studio },
    { role: 'technician', studio },
  ] as const
  return signedIn(app, await makePerson({ network, roles: [...roles] }))
}

/** Names of a route's parts, `firing` for `:firing`. */
export const partsOf = ({ path }: Route): string[] =>
  [...path.matchAll(/:([a-z]+)/gi)].map(([, name]) => name ?? '')

type Things = Readonly<Record<string, { uid: string } | undefined>>

const THINGS: readonly (keyof World)[] = ['studio', 'kiln', 'level', 'firing', 'finding', 'person']

/** Does the path name a thing of the world besides the network? */
export function namesThing(route: Route): boolean {
  return partsOf(route).some((name) => (THINGS as readonly string[]).includes(name))
}

/** What a part holds that names no row: a job, a dimension, a number; else a uid that nothing has. */
const PLAIN: Readonly<Record<string, (route: Route) => string>> = {
  job: () => 'study',
  dimension: () => 'month',
  token: () => 'x'.repeat(43),
  revision: ({ method }) => (method === 'get' ? '1' : v7()),
}

export interface Aim {
  /** The network's slug in the path. */
  slug: string
  /** Whose things the path names; left out: things that nobody has. */
  path?: World
  /** Whose things the body and the query name. */
  named: World
}

/** A request to the route, whole: path filled, a body and a query that its schemas take. */
export function aim(agent: Agent, route: Route, { slug, path, named }: Aim) {
  const inPath = path as unknown as Things | undefined
  const inBody = named as unknown as Things
  const url = route.path.replace(/:([a-z]+)/gi, (_, name: string) => {
    if (name === 'network') return slug
    return inPath?.[name]?.uid ?? PLAIN[name]?.(route) ?? v7()
  })
  const uidOf = (name: string) => inBody[name]?.uid
  const call = agent[route.method](url)
  if (route.input.query) void call.query(sample(route.input.query, uidOf) as object)
  return route.input.body ? call.send(sample(route.input.body, uidOf) as object) : call
}

/** Rows of these change with reading or signing in. */
const RESTLESS = ['sessions', 'sign_in_attempts', 'migration']

async function columnsByTable(): Promise<Map<string, string[]>> {
  const { database } = (await testDatabase()).config
  const rows = await rowsOf<{ t: string; c: string }>(
    `SELECT table_name AS t, column_name AS c FROM information_schema.columns
     WHERE table_schema = :database AND column_name <> 'last_seen_at'
     ORDER BY table_name, ordinal_position`,
    { database },
  )
  const tables = new Map<string, string[]>()
  for (const { t, c } of rows) tables.set(t, [...(tables.get(t) ?? []), c])
  return tables
}

/**
 * The count and a checksum of every table's rows; of one network's where an id is given. What a
 * person's last visit changes is left out.
 */
export async function stateOf(networkId?: number): Promise<Record<string, string>> {
  const selects = [...(await columnsByTable())]
    .filter(([table]) => !RESTLESS.includes(table))
    .filter(([, columns]) => networkId === undefined || columns.includes('network_id'))
    .map(
      ([table, columns]) =>
        `SELECT '${table}' AS name, COUNT(*) AS n,
           COALESCE(SUM(CRC32(CONCAT_WS('|', ${columns.map((each) => `\`${each}\``).join(', ')}))), 0) AS crc
         FROM \`${table}\`${networkId === undefined ? '' : ' WHERE network_id = :networkId'}`,
    )
  const rows = await rowsOf<{ name: string; n: number; crc: string }>(selects.join(' UNION ALL '), {
    networkId,
  })
  return Object.fromEntries(rows.map(({ name, n, crc }) => [name, `${n} rows, ${crc}`]))
}
