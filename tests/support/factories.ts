import { v7 } from 'uuid'
import { createNetwork } from '../../server/commands/createNetwork.js'
import type { NewNetwork } from '../../server/commands/createNetwork.js'
import { hashPassword } from '../../server/commands/passwords.js'
import type { Role } from '../../server/contract/roles.js'
import { Kiln, Level, Membership, Network, Studio, User } from '../../server/models/index.js'
import type { Scope } from '../../server/policies/index.js'
import { scopeFor, systemScope } from '../../server/queries/scopeFor.js'
import { factor as factorOf } from '../../server/shared/factors.js'
import { testDeps } from './deps.js'

/**
 * Rows for tests. Everything that is left out is made: a kiln makes its studio, a studio its network.
 * Names and slugs are new ones every time, so that tests share a schema without meeting.
 */
export const PASSWORD = 'four small brown jugs'

/** A short text that no other row has. */
export function unique(word: string): string {
  return `${word}-${v7().slice(-12)}`
}

/** A network with the fixed levels of the registry. */
export async function makeNetwork(over: Partial<NewNetwork> = {}): Promise<Network> {
  const slug = unique('net')
  return createNetwork(
    { slug, name: `Network ${slug}`, timeZone: 'Europe/Lisbon', ...over },
    await testDeps(),
  )
}

type Over<M> = Partial<M extends { _creationAttributes: infer C } ? C : never>

export async function makeStudio({
  network,
  ...over
}: { network?: Network } & Over<Studio> = {}): Promise<Studio> {
  const { id: networkId } = network ?? (await makeNetwork())
  const slug = unique('studio')
  const count = await Studio.count({ where: { networkId } })
  return Studio.create({
    networkId,
    uid: v7(),
    slug,
    name: `Studio ${slug}`,
    timeZone: 'Europe/Lisbon',
    currency: 'EUR',
    letter: String.fromCharCode(65 + (count % 26)),
    ...over,
  })
}

export async function makeKiln({
  studio,
  ...over
}: { studio?: Studio } & Over<Kiln> = {}): Promise<Kiln> {
  const home = studio ?? (await makeStudio())
  const { id: studioId, networkId } = home
  return Kiln.create({ networkId, studioId, uid: v7(), name: unique('kiln'), litres: 200, ...over })
}

/** A level of the studio, or (with a network alone) of the network's common list. A clay body unless said. */
export async function makeLevel({
  network,
  studio,
  ...over
}: { network?: Network; studio?: Studio } & Over<Level> = {}): Promise<Level> {
  const networkId = studio?.networkId ?? network?.id ?? (await makeNetwork()).id
  const factor = over.factor ?? 'clay_body'
  if (!factorOf(factor)) throw new Error(`No factor ${factor} in the registry`)
  return Level.create({
    networkId,
    uid: v7(),
    studioId: studio?.id ?? null,
    name: unique('level'),
    attributes: {},
    ...over,
    factor,
  })
}

/** A fixed level of the network by factor and code: `fixedLevel(network, 'forming', 'thrown')`. */
export async function fixedLevel(network: Network, factor: string, code: string): Promise<Level> {
  return Level.findOne({ where: { networkId: network.id, factor, code }, rejectOnEmpty: true })
}

export interface RoleOver {
  role: Role
  /** Left out: in the whole network. */
  studio?: Studio
}

/**
 * A person with a password (`PASSWORD`) and roles. Without roles they are a technician of a studio
 * that is made in the network. `network: null` with `roles: []` makes an account without membership.
 */
export async function makePerson({
  network,
  roles,
  password = PASSWORD,
  ...over
}: {
  network?: Network | null
  roles?: RoleOver[]
  password?: string | null
} & Over<User> = {}): Promise<User> {
  const held = roles ?? [await technicianRole(network ?? undefined)]
  const user = await User.create({
    uid: v7(),
    name: `Person ${unique('p')}`,
    email: `${unique('person')}@example.org`,
    preferences: {},
    passwordHash: password === null ? null : await hashPassword(password, await testDeps()),
    ...over,
  })
  for (const role of held) await makeMembership(user, role, network ?? undefined)
  return user
}

async function technicianRole(network?: Network): Promise<RoleOver> {
  return { role: 'technician', studio: await makeStudio({ network }) }
}

/** Gives the person one more role. */
export async function makeMembership(user: User, { role, studio }: RoleOver, network?: Network) {
  const networkId = studio?.networkId ?? network?.id
  if (networkId === undefined) throw new Error('A role in the whole network needs the network')
  return Membership.create({ networkId, userId: user.id, role, studioId: studio?.id ?? null })
}

/** The network that a row belongs to. */
export async function networkOf({ networkId }: { networkId: number }): Promise<Network> {
  return Network.findByPk(networkId, { rejectOnEmpty: true })
}

/** The scope of the system in the network, or of a person there: what commands and queries take first. */
export async function makeScope(network: Network, person?: User): Promise<Scope> {
  const scope = person
    ? await scopeFor(network.slug, person.id, 'test')
    : await systemScope(network.id)
  if (!scope) throw new Error('The person is no member of the network')
  return scope
}
