import type { Transaction } from 'sequelize'
import { v7 } from 'uuid'
import { inTransaction } from '../database/inTransaction.js'
import { isDuplicate } from '../database/violations.js'
import type { Deps } from '../deps.js'
import { AppError, forbidden, notFound } from '../errors.js'
import { Network, OneTimeLink, User } from '../models/index.js'
import { assignmentsSeen, canMakeLink } from '../policies/assignments.js'
import type { HeldRole, Scope } from '../policies/index.js'
import { findPerson } from '../queries/peopleOfNetwork.js'
import type { Member } from '../queries/peopleOfNetwork.js'
import { moveAssignments, resolveAssignments } from './assignments.js'
import type { AssignmentInput } from './assignments.js'
import { makeLink } from './oneTimeLinks.js'
import type { MadeLink } from './oneTimeLinks.js'
import { recordAudit } from './recordAudit.js'
import { normalEmail } from './signIn.js'

export interface NewPerson {
  name: string
  email: string
  assignments: readonly AssignmentInput[]
}

/** A person as they are now, with the link that was made for them, if one was. */
export interface PersonAndLink {
  member: Member
  link: MadeLink | null
}

type Parts = Pick<Deps, 'sequelize' | 'clock' | 'config'>

/** Changes of a network's people happen one after the other. */
async function lockNetwork({ networkId }: Scope, transaction: Transaction): Promise<void> {
  await Network.findByPk(networkId, { transaction, lock: transaction.LOCK.UPDATE })
}

async function findOrCreate(input: NewPerson, transaction: Transaction): Promise<User> {
  const email = normalEmail(input.email)
  const found = await User.findOne({ where: { email }, transaction })
  if (found) return found
  try {
    const person = { uid: v7(), email, name: input.name, preferences: {} }
    const made = await User.create(person, { transaction })
    return await made.reload({ transaction })
  } catch (error) {
    // Another network added the same person a moment ago.
    if (!isDuplicate(error)) throw error
    return User.findOne({ where: { email }, transaction, rejectOnEmpty: true })
  }
}

async function memberNow(scope: Scope, uid: string, transaction: Transaction): Promise<Member> {
  const member = await findPerson(scope, { uid }, transaction)
  if (!member) throw notFound()
  return member
}

async function linkFor(
  scope: Scope,
  { user }: Member,
  deps: Parts,
  transaction: Transaction,
): Promise<MadeLink> {
  const { userId: createdBy, networkId } = scope
  const kind = user.passwordHash === null ? 'invite' : 'reset'
  const link = await makeLink({ kind, userId: user.id, networkId, createdBy }, deps, transaction)
  const change = { action: 'person.link-made', subject: 'person', subjectUid: user.uid }
  await recordAudit(scope, deps, { ...change, after: { kind } }, transaction)
  return link
}

async function auditMove(
  scope: Scope,
  deps: Parts,
  move: { action: string; uid: string; before: HeldRole[]; after: HeldRole[] },
  transaction: Transaction,
): Promise<void> {
  const { action, uid, before, after } = move
  const states = { before: { assignments: before }, after: { assignments: after } }
  const change = { action, subject: 'person', subjectUid: uid, ...states }
  await recordAudit(scope, deps, change, transaction)
}

/**
 * Gives somebody roles in the network. An e-mail address that has an account joins with it, under the
 * name that it has. The link is for who has no password yet.
 * @throws AppError `taken` for who is here already, `forbidden`, `invalid`
 */
export async function addPerson(
  scope: Scope,
  input: NewPerson,
  deps: Parts,
  transaction?: Transaction,
): Promise<PersonAndLink> {
  if (!transaction) {
    return inTransaction(deps.sequelize, (own) => addPerson(scope, input, deps, own))
  }
  await lockNetwork(scope, transaction)
  const wanted = await resolveAssignments(scope, input.assignments, transaction)
  const { uid, id } = await findOrCreate(input, transaction)
  const { held } = await memberNow(scope, uid, transaction)
  if (assignmentsSeen(scope, held).length > 0) {
    const message = 'This person is here already: change their roles in the list.'
    throw new AppError('taken', message, { fields: { email: message } })
  }
  await moveAssignments(scope, id, { before: [], wanted: without(wanted, held) }, transaction)
  await auditMove(
    scope,
    deps,
    { action: 'person.added', uid, before: [], after: wanted },
    transaction,
  )
  const member = await memberNow(scope, uid, transaction)
  const needsLink = member.user.passwordHash === null && canMakeLink(scope, member)
  const link = needsLink ? await linkFor(scope, member, deps, transaction) : null
  return { member, link }
}

/** Roles that the person holds unseen are not given twice. */
function without(wanted: readonly HeldRole[], held: readonly HeldRole[]): HeldRole[] {
  return wanted.filter(
    (one) => !held.some((each) => each.role === one.role && each.studioId === one.studioId),
  )
}

/**
 * The roles of a person, as far as the asker sees them, become `wanted`.
 * @throws AppError `forbidden`, `in-use` for the last network admin, `invalid`
 */
export function changePerson(
  scope: Scope,
  uid: string,
  wanted: readonly AssignmentInput[],
  deps: Parts,
): Promise<Member> {
  return inTransaction(deps.sequelize, async (transaction) => {
    await lockNetwork(scope, transaction)
    const after = await resolveAssignments(scope, wanted, transaction)
    const { user, held } = await memberNow(scope, uid, transaction)
    const before = assignmentsSeen(scope, held)
    await moveAssignments(scope, user.id, { before, wanted: after }, transaction)
    await auditMove(scope, deps, { action: 'person.changed', uid, before, after }, transaction)
    return memberNow(scope, uid, transaction)
  })
}

/**
 * Takes all roles of a person, as far as the asker sees them. Their account and what they wrote stay;
 * links that this network made for them end.
 * @throws AppError `forbidden`, `in-use` for the last network admin
 */
export function removePerson(scope: Scope, uid: string, deps: Parts): Promise<void> {
  return inTransaction(deps.sequelize, async (transaction) => {
    await lockNetwork(scope, transaction)
    const { user, held } = await memberNow(scope, uid, transaction)
    const before = assignmentsSeen(scope, held)
    await moveAssignments(scope, user.id, { before, wanted: [] }, transaction)
    await OneTimeLink.update(
      { usedAt: deps.clock.now() },
      { where: { userId: user.id, networkId: scope.networkId, usedAt: null }, transaction },
    )
    await auditMove(scope, deps, { action: 'person.removed', uid, before, after: [] }, transaction)
  })
}

/**
 * A new link with which the person sets a password; older links end.
 * @throws AppError `forbidden` where the asker could not give all the roles that the person holds
 */
export function renewLink(scope: Scope, uid: string, deps: Parts): Promise<PersonAndLink> {
  return inTransaction(deps.sequelize, async (transaction) => {
    const member = await memberNow(scope, uid, transaction)
    if (!canMakeLink(scope, member)) throw forbidden()
    return { member, link: await linkFor(scope, member, deps, transaction) }
  })
}
