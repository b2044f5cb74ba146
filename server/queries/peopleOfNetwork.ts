import { Op } from 'sequelize'
import type { Transaction } from 'sequelize'
import { Membership, User } from '../models/index.js'
import type { HeldRole, Scope } from '../policies/index.js'

/** A member with every role that they hold in the network. */
export interface Member {
  user: User
  held: HeldRole[]
  /** Holds a role in another network too. */
  elsewhere: boolean
}

async function membersOf(
  { networkId }: Pick<Scope, 'networkId'>,
  users: readonly User[],
  transaction?: Transaction,
): Promise<Member[]> {
  const userId = users.map(({ id }) => id)
  const [here, others] = await Promise.all([
    Membership.findAll({ where: { networkId, userId }, order: ['id'], transaction }),
    Membership.findAll({
      where: { networkId: { [Op.ne]: networkId }, userId },
      attributes: ['userId'],
      group: ['userId'],
      acrossNetworks: true,
      raw: true,
      transaction,
    }),
  ])
  const elsewhere = new Set(others.map((row) => row.userId))
  return users.map((user) => ({
    user,
    held: here
      .filter((row) => row.userId === user.id)
      .map(({ role, studioId }) => ({ role, studioId })),
    elsewhere: elsewhere.has(user.id),
  }))
}

/** Everybody with a role in the network, by name: four queries in all. */
export async function peopleOfNetwork({ networkId }: Scope): Promise<Member[]> {
  const held = await Membership.findAll({
    where: { networkId },
    attributes: ['userId'],
    group: ['userId'],
    raw: true,
  })
  const id = held.map(({ userId }) => userId)
  return membersOf({ networkId }, await User.findAll({ where: { id }, order: ['name', 'id'] }))
}

/** The person of this uid with their roles here, none where they are no member; null for no such account. */
export async function findPerson(
  scope: Pick<Scope, 'networkId'>,
  by: { uid: string } | { email: string },
  transaction?: Transaction,
): Promise<Member | null> {
  const user = await User.findOne({ where: by, transaction })
  if (!user) return null
  const [member] = await membersOf(scope, [user], transaction)
  return member ?? null
}

/** How many others are network admins besides this person. */
export function otherAdmins(
  { networkId }: Scope,
  userId: number,
  transaction: Transaction,
): Promise<number> {
  return Membership.count({
    where: { networkId, role: 'network-admin', studioId: null, userId: { [Op.ne]: userId } },
    transaction,
  })
}
