import type { Transaction } from 'sequelize'
import type { Role } from '../contract/roles.js'
import { AppError, invalid } from '../errors.js'
import { Membership, Studio } from '../models/index.js'
import { canAssign } from '../policies/assignments.js'
import { can, isNetworkAdmin } from '../policies/index.js'
import type { HeldRole, Scope } from '../policies/index.js'
import { otherAdmins } from '../queries/peopleOfNetwork.js'

/** A role as a form names it: the studio by uid, null for the whole network. */
export interface AssignmentInput {
  role: Role
  studio: string | null
}

const same = (a: HeldRole, b: HeldRole) => a.role === b.role && a.studioId === b.studioId
const has = (list: readonly HeldRole[], one: HeldRole) => list.some((each) => same(each, one))

/**
 * The roles with the studios' ids, each once. What is wrong is told beside its row; a studio that is
 * not the person's to see is told like one that does not exist.
 * @throws AppError `invalid`
 */
export async function resolveAssignments(
  scope: Scope,
  wanted: readonly AssignmentInput[],
  transaction?: Transaction,
): Promise<HeldRole[]> {
  const uid = wanted.flatMap(({ studio }) => studio ?? [])
  const where = { networkId: scope.networkId, uid }
  const studios = await Studio.findAll({ where, attributes: ['id', 'uid'], transaction })
  const known = new Map(studios.map((studio) => [studio.uid, studio.id]))
  const fields: Record<string, string> = {}
  const held = wanted.map(({ role, studio }, row): HeldRole => {
    const studioId = studio === null ? null : known.get(studio)
    const there = studioId !== undefined && (studioId === null || sees(scope, studioId))
    if (!there) fields[`assignments.${row}.studio`] = 'Choose a studio.'
    if (role === 'network-admin' && studio !== null) {
      fields[`assignments.${row}.studio`] = 'A network admin is one for the whole network.'
    }
    return { role, studioId: studioId ?? null }
  })
  if (Object.keys(fields).length > 0) throw invalid(fields)
  return held.filter((one, index) => held.findIndex((other) => same(one, other)) === index)
}

function sees(scope: Scope, studioId: number): boolean {
  return isNetworkAdmin(scope) || can(scope, 'firings.read', { studioId })
}

async function requireOpen(scope: Scope, added: readonly HeldRole[], transaction: Transaction) {
  const id = added.flatMap(({ studioId }) => studioId ?? [])
  const archived = await Studio.findAll({
    where: { networkId: scope.networkId, id },
    attributes: ['name', 'archivedAt'],
    transaction,
  })
  const closed = archived.find((studio) => studio.archivedAt !== null)
  if (closed) {
    throw invalid({ assignments: `${closed.name} is archived: bring it back first.` })
  }
}

/**
 * Moves a person from the roles that the asker sees of them (`before`) to `wanted`. Roles that the
 * asker does not see stay. The caller holds the lock on the network's row, so that two admins cannot
 * take each other's role at once.
 * @throws AppError `forbidden` where a role is not the asker's to give or take, `in-use` for the last
 *   network admin, `invalid`
 */
export async function moveAssignments(
  scope: Scope,
  userId: number,
  { before, wanted }: { before: readonly HeldRole[]; wanted: readonly HeldRole[] },
  transaction: Transaction,
): Promise<void> {
  const added = wanted.filter((one) => !has(before, one))
  const removed = before.filter((one) => !has(wanted, one))
  if (![...added, ...removed].every((one) => canAssign(scope, one))) {
    throw new AppError('forbidden', 'Only a network admin can give or take one of these roles.')
  }
  if (removed.some(({ role }) => role === 'network-admin')) {
    const left = await otherAdmins(scope, userId, transaction)
    if (left === 0) {
      const message = 'This is the only network admin: give somebody else the role first.'
      throw new AppError('in-use', message, { fields: { assignments: message } })
    }
  }
  await requireOpen(scope, added, transaction)
  const { networkId } = scope
  for (const one of removed) {
    await Membership.destroy({ where: { networkId, userId, ...one }, transaction })
  }
  await Membership.bulkCreate(
    added.map((one) => ({ networkId, userId, ...one })),
    { transaction },
  )
}
