import type { Deps } from '../deps.js'
import { AppError } from '../errors.js'
import { User } from '../models/index.js'
import { clearAttempts, countAttempt } from '../queries/signInAttempts.js'
import { findUserForSession } from '../queries/userForSession.js'
import { passwordMatches } from './passwords.js'

/** Wrong guesses that are allowed in 15 minutes. An address may be a whole studio's. */
const MOST_PER_ACCOUNT = 10
const MOST_PER_ADDRESS = 50

export interface Credentials {
  email: string
  password: string
  /** Where the guess comes from: an IP address. */
  address: string
}

/** E-mail addresses are kept and compared in lower case without blanks around them. */
export function normalEmail(email: string): string {
  return email.trim().toLowerCase()
}

function tooMany(until: Date, now: Date): AppError {
  const seconds = Math.max(1, Math.ceil((until.getTime() - now.getTime()) / 1000))
  const minutes = Math.ceil(seconds / 60)
  const wait = minutes === 1 ? 'a minute' : `${minutes} minutes`
  return new AppError('too-many', `Too many tries. Wait ${wait}, then try again.`, {
    details: { seconds },
  })
}

function wrongGuess(): AppError {
  const message = 'That e-mail address and password do not go together.'
  return new AppError('sign-in', message, { fields: { password: message } })
}

async function count(subject: string, limit: number, { sequelize, clock }: Deps): Promise<void> {
  const now = clock.now()
  const until = await countAttempt(sequelize, { subject, limit, now })
  if (until) throw tooMany(until, now)
}

/**
 * The person with this e-mail address and password.
 * @throws AppError `sign-in` for a wrong guess (the same for an unknown account), `too-many` with the
 *   seconds to wait for too many of them
 */
export async function verifyPassword({ email, password, address }: Credentials, deps: Deps) {
  const subjects = { account: `account:${normalEmail(email)}`, address: `address:${address}` }
  // The address first: a blocked one must not be able to block accounts.
  await count(subjects.address, MOST_PER_ADDRESS, deps)
  await count(subjects.account, MOST_PER_ACCOUNT, deps)
  const found = await User.findOne({ where: { email: normalEmail(email) } })
  const matches = await passwordMatches(password, found?.passwordHash ?? null, deps)
  const user = matches && found ? await findUserForSession(found.id) : null
  if (!user) throw wrongGuess()
  await clearAttempts(deps.sequelize, subjects)
  return user
}
