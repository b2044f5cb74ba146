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
import { Network, User } from '../models/index.js'
import type { Scope } from '../policies/scope.js'
import { refreshStatistics } from '../queries/refreshStatistics.js'
import { systemScope } from '../queries/scopeFor.js'
import { DEMO_ACCOUNTS, DEMO_PASSWORD } from './accounts.js'
import { composeFiring } from './compose.js'
import type { DemoKeys } from './compose.js'
import { generateDemo } from './generateDemo.js'
import type { DemoInput } from './generateDemo.js'
import type { DemoContent, DemoNetwork } from './types.js'
import {
  classLevels,
  must,
  writeKilns,
  writeLevels,
  writeMemberships,
  writeStudios,
} from './writeNames.js'

/** Firings in one piece of work: few rows are held at once, which spares the collector a second or two. */
const AT_ONCE = 100

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
  const others = content.networks.flatMap(({ people }) =>
    people.filter(({ label }) => label === null),
  )
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
    network: row,
    networkId,
    userId: null,
    roles: [],
    studioIds: [...studios.values()],
    requestId: null,
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
  const written: Written = { firings: 0, lots: 0, pieces: 0, losses: 0 }
  for (let from = 0; from < network.firings.length; from += AT_ONCE) {
    const firings = network.firings
      .slice(from, from + AT_ONCE)
      .map((firing) => composeFiring(firing, demoKeys))
    const part = await writeFirings(scope, firings, keys, { ...deps, transaction })
    for (const count of ['firings', 'lots', 'pieces', 'losses'] as const)
      written[count] += part[count]
  }
  return { slug, name, ...written }
}
