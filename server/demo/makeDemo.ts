import { Op } from 'sequelize'
import type { Transaction } from 'sequelize'
import { v7 } from 'uuid'
import { createNetwork } from '../commands/createNetwork.js'
import { hashPassword } from '../commands/passwords.js'
import { rebuildRollups } from '../commands/rebuildRollups.js'
import { runStudy } from '../commands/runStudy.js'
import { writeFirings } from '../commands/writeFirings.js'
import type { Keys, Written } from '../commands/writeFirings.js'
import { inTransaction } from '../database/inTransaction.js'
import type { Deps } from '../deps.js'
import { Kiln, Level, Membership, Network, Studio, User } from '../models/index.js'
import type { Scope } from '../policies/scope.js'
import { refreshStatistics } from '../queries/refreshStatistics.js'
import { systemScope } from '../queries/scopeFor.js'
import { DEMO_ACCOUNTS, DEMO_PASSWORD } from './accounts.js'
import { composeFiring } from './compose.js'
import type { DemoKeys } from './compose.js'
import { generateDemo } from './generateDemo.js'
import type { DemoInput } from './generateDemo.js'
import type { DemoContent, DemoNetwork } from './types.js'

/** As lists of a studio are kept: after the fixed levels, among themselves by name. */
const OWN_POSITION = 1000

export interface MadeNetwork extends Written {
  slug: string
  name: string
}

/** The demo is in this database already; it is made once. */
export class DemoThereError extends Error {
  constructor(slug: string) {
    super(`The demo network ${slug} is in this database already.`)
    this.name = 'DemoThereError'
  }
}

/**
 * Writes the demo's networks, people and firings in one transaction, then builds the roll-ups and,
 * with `withStudy`, runs a study of each network.
 * @throws DemoThereError when one of its networks is there; nothing is written then
 */
export async function makeDemo(
  deps: Deps,
  { withStudy, ...input }: DemoInput & { withStudy: boolean },
): Promise<MadeNetwork[]> {
  const content = generateDemo(input)
  await refuseTwice(content)
  const passwordHash = await hashPassword(DEMO_PASSWORD, deps)
  const made = await inTransaction(deps.sequelize, async (transaction) => {
    const people = await writePeople(content, passwordHash, transaction)
    const written: MadeNetwork[] = []
    for (const network of content.networks) {
      written.push(await writeNetwork(network, people, deps, transaction))
    }
    return written
  })
  await refreshStatistics(deps.sequelize)
  for (const { slug } of made) {
    const scope = await systemScope(slug)
    if (!scope) throw new Error(`The network ${slug} vanished.`)
    await rebuildRollups(scope, deps)
    if (withStudy) await runStudy(scope, deps)
  }
  return made
}

async function refuseTwice(content: DemoContent): Promise<void> {
  const slugs = content.networks.map(({ slug }) => slug)
  const there = await Network.findOne({ where: { slug: { [Op.in]: slugs } } })
  if (there) throw new DemoThereError(there.slug)
}

/** Ids by e-mail address; the listed accounts come first and in their order. */
async function writePeople(
  content: DemoContent,
  passwordHash: string,
  transaction: Transaction,
): Promise<Map<string, number>> {
  const listed: { email: string; name: string; label: string | null }[] = [...DEMO_ACCOUNTS]
  const others = content.networks.flatMap(({ people }) => people.filter(({ label }) => label === null))
  const users = await User.bulkCreate(
    [...listed, ...others].map(({ email, name, label }) => ({
      uid: v7(),
      email,
      name,
      passwordHash,
      preferences: {},
      demoLabel: label,
    })),
    { transaction },
  )
  return new Map(users.map((user) => [user.email, user.id]))
}

async function writeNetwork(
  network: DemoNetwork,
  people: ReadonlyMap<string, number>,
  deps: Deps,
  transaction: Transaction,
): Promise<MadeNetwork> {
  const { slug, name, timeZone, currency, temperatureUnit, lengthUnit, weekStart } = network
  const row = await createNetwork(
    { slug, name, timeZone, currency, temperatureUnit, lengthUnit, weekStart, demo: true },
    deps,
    transaction,
  )
  const networkId = row.id
  const studios = await writeStudios(network, networkId, transaction)
  await writeMemberships(network, networkId, { people, studios }, transaction)
  const kilns = await writeKilns(network, networkId, studios, transaction)
  const levels = await writeLevels(network, networkId, studios, transaction)
  const scope: Scope = {
    network: row, networkId, userId: null, roles: [], studioIds: [...studios.values()], requestId: null,
  }
  const demoKeys: DemoKeys = {
    kiln: (key) => must(kilns.get(key)).uid,
    level: (factor, key) => must(levels.get(`${factor}/${key}`)).uid,
    person: (email) => must(people.get(email)),
  }
  const keys: Keys = {
    kilns: new Map([...kilns.values()].map(({ uid, id, studioId }) => [uid, { id, studioId }])),
    levels: new Map([...levels.values()].map(({ uid, id }) => [uid, id])),
    classLevels: classLevels(network, levels),
  }
  const firings = network.firings.map((firing) => composeFiring(firing, demoKeys))
  return { slug, name, ...(await writeFirings(scope, firings, keys, { ...deps, transaction })) }
}

async function writeStudios(
  { studios }: DemoNetwork,
  networkId: number,
  transaction: Transaction,
): Promise<Map<string, number>> {
  const rows = await Studio.bulkCreate(
    studios.map(({ key, ...studio }) => ({ ...studio, slug: key, networkId, uid: v7() })),
    { transaction },
  )
  return new Map(rows.map((studio) => [studio.slug, studio.id]))
}

async function writeMemberships(
  { people: members }: DemoNetwork,
  networkId: number,
  { people, studios }: { people: ReadonlyMap<string, number>; studios: ReadonlyMap<string, number> },
  transaction: Transaction,
): Promise<void> {
  await Membership.bulkCreate(
    members.flatMap(({ email, roles }) =>
      roles.map(({ role, studio }) => ({
        networkId,
        userId: must(people.get(email)),
        role,
        studioId: studio === null ? null : must(studios.get(studio)),
      })),
    ),
    { transaction },
  )
}

async function writeKilns(
  { kilns }: DemoNetwork,
  networkId: number,
  studios: ReadonlyMap<string, number>,
  transaction: Transaction,
): Promise<Map<string, Kiln>> {
  const rows = await Kiln.bulkCreate(
    kilns.map(({ key: _, studio, ...kiln }) => ({ ...kiln, networkId, studioId: must(studios.get(studio)), uid: v7() })),
    { transaction },
  )
  return new Map(kilns.map(({ key }, index) => [key, must(rows[index])]))
}

/** Levels by `factor/key`: the fixed ones that the network was made with, by code, and the demo's own. */
async function writeLevels(
  { levels }: DemoNetwork,
  networkId: number,
  studios: ReadonlyMap<string, number>,
  transaction: Transaction,
): Promise<Map<string, Level>> {
  const fixed = await Level.findAll({ where: { networkId }, transaction })
  const own = await Level.bulkCreate(
    levels.map(({ key: _, studio, ...level }) => ({
      ...level,
      networkId,
      position: OWN_POSITION,
      studioId: studio === null ? null : must(studios.get(studio)),
      uid: v7(),
    })),
    { transaction },
  )
  return new Map([
    ...fixed.map((level) => [`${level.factor}/${level.code}`, level] as const),
    ...levels.map(({ factor, key }, index) => [`${factor}/${key}`, must(own[index])] as const),
  ])
}

/** A class stands for its class level where a lot names the class alone. */
function classLevels({ levels }: DemoNetwork, rows: ReadonlyMap<string, Level>): Map<string, number> {
  return new Map(
    levels.flatMap(({ factor, key, attributes }) => {
      if (factor !== 'class' || !attributes.classLevel) return []
      const level = must(rows.get(`class_level/${attributes.classLevel}`))
      return [[must(rows.get(`class/${key}`)).uid, level.id] as const]
    }),
  )
}

function must<T>(value: T | undefined): T {
  if (value === undefined) throw new Error('The demo names something that it does not have.')
  return value
}
