import type { z } from 'zod'
import type { accountInput, changePasswordInput } from '../contract/session.js'
import { inTransaction } from '../database/inTransaction.js'
import type { Deps } from '../deps.js'
import { AppError, invalid, notFound } from '../errors.js'
import { OneTimeLink, User } from '../models/index.js'
import { deleteSessionsOf, nextSessionEpoch } from '../queries/sessionsOfPerson.js'
import { findUserForSession } from '../queries/userForSession.js'
import { hashPassword } from './passwords.js'
import { verifyPassword } from './signIn.js'

async function reload(userId: number) {
  const user = await findUserForSession(userId)
  if (!user) throw notFound()
  return user
}

/** The person's own name and preferences. */
export async function changeAccount(userId: number, input: z.output<typeof accountInput>) {
  await User.update(input, { where: { id: userId } })
  return reload(userId)
}

/**
 * A new password; guesses at the present one count as guesses at the sign-in page do. All sessions of
 * the person end and their one-time links are void: the caller starts this one again.
 * @throws AppError `invalid` beside `current`, `too-many`
 */
export async function changePassword(
  person: { id: number; email: string; address: string },
  input: z.output<typeof changePasswordInput>,
  deps: Deps,
) {
  await verifyPassword({ ...person, password: input.current }, deps).catch((error: unknown) => {
    if (!(error instanceof AppError) || error.code !== 'sign-in') throw error
    throw invalid({ current: 'That is not your present password.' })
  })
  const passwordHash = await hashPassword(input.password, deps)
  await inTransaction(deps.sequelize, async (transaction) => {
    await User.update({ passwordHash }, { where: { id: person.id }, transaction })
    await OneTimeLink.update(
      { usedAt: deps.clock.now() },
      { where: { userId: person.id, usedAt: null }, transaction },
    )
    await nextSessionEpoch(deps.sequelize, person.id, transaction)
    await deleteSessionsOf(deps.sequelize, person.id, transaction)
  })
  return reload(person.id)
}
