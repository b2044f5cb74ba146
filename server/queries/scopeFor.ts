import { QueryTypes } from 'sequelize'
import type { Sequelize, Transaction } from 'sequelize'
import { Membership, Network, Studio } from '../models/index.js'
import type { NetworkRow, Scope } from '../policies/index.js'

export type { NetworkRow }

/** The fields of a network that a scope carries. */
export function networkRow(network: Network): NetworkRow {
  const { id, uid, slug, name, timeZone, currency, temperatureUnit, lengthUnit, weekStart } =
    network
  return { id, uid, slug, name, timeZone, currency, temperatureUnit, lengthUnit, weekStart }
}

async function studioIdsOf(networkId: number, transaction?: Transaction): Promise<number[]> {
  const studios = await Studio.findAll({
    transaction,
    where: { networkId },
    attributes: ['id'],
    order: ['id'],
    raw: true,
  })
  return studios.map((studio) => studio.id)
}

/** The scope of a person in the network of that slug; null when there is none or they are no member. */
export async function scopeFor(
  slug: string,
  userId: number,
  requestId: string,
): Promise<Scope | null> {
  const network = await Network.findOne({ where: { slug } })
  if (!network) return null
  const [held, studioIds] = await Promise.all([
    Membership.findAll({ where: { networkId: network.id, userId }, raw: true }),
    studioIdsOf(network.id),
  ])
  if (held.length === 0) return null
  return {
    network: networkRow(network),
    networkId: network.id,
    userId,
    roles: held.map(({ role, studioId }) => ({ role, studioId })),
    studioIds,
    requestId,
  }
}

/** The scope of the system itself in a network: jobs and command-line tools. It may do everything there. */
export async function systemScope(
  slugOrId: string | number,
  transaction?: Transaction,
): Promise<Scope | null> {
  const where = typeof slugOrId === 'number' ? { id: slugOrId } : { slug: slugOrId }
  const network = await Network.findOne({ where, transaction })
  if (!network) return null
  return {
    network: networkRow(network),
    networkId: network.id,
    userId: null,
    roles: [
      { role: 'network-admin', studioId: null },
      { role: 'owner', studioId: null },
    ],
    studioIds: await studioIdsOf(network.id, transaction),
    requestId: null,
  }
}

/** Is the database there? Throws when it is not. */
export async function ping(sequelize: Sequelize): Promise<void> {
  await sequelize.query('SELECT 1', { type: QueryTypes.SELECT })
}
