import { Membership, Network, Studio } from '../models/index.js'
import { networkRow } from './scopeFor.js'
import type { NetworkRow } from './scopeFor.js'

export interface HeldRow {
  role: Membership['role']
  studioId: number | null
}

export interface NetworkOfPerson {
  network: NetworkRow
  roles: HeldRow[]
  /** All studios of the network by name, archived ones too. */
  studios: Studio[]
}

/** Every network that the person is a member of, by name, with roles and studios: three queries in all. */
export async function networksOfPerson(userId: number): Promise<NetworkOfPerson[]> {
  const held = await Membership.findAll({ where: { userId }, order: ['id'], acrossNetworks: true })
  const ids = [...new Set(held.map((each) => each.networkId))]
  if (ids.length === 0) return []
  const [networks, studios] = await Promise.all([
    Network.findAll({ where: { id: ids }, order: ['name', 'id'] }),
    Studio.findAll({ where: { networkId: ids }, order: ['name', 'id'], acrossNetworks: true }),
  ])
  return networks.map((network) => ({
    network: networkRow(network),
    roles: held
      .filter((each) => each.networkId === network.id)
      .map(({ role, studioId }) => ({ role, studioId })),
    studios: studios.filter((studio) => studio.networkId === network.id),
  }))
}
