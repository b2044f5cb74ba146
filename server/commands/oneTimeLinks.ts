import { createHash, randomBytes } from 'node:crypto'
import { Op } from 'sequelize'
import type { Transaction } from 'sequelize'
import { inTransaction } from '../database/inTransaction.js'
import type { Deps } from '../deps.js'
import { notFound } from '../errors.js'
import { Network, OneTimeLink, User } from '../models/index.js'
import { findUserForSession } from '../queries/userForSession.js'
import { deleteSessionsOf, nextSessionEpoch } from '../queries/sessionsOfPerson.js'
import { hashPassword } from './passwords.js'

const LIFETIME_MS = 7 * 24 * 3600_000
const TOKEN_BYTES = 32

/** The page that a link opens: a first password, or a new one. */
const PAGES = { invite: 'invite', reset: 'reset' } as const
export type LinkKind = keyof typeof PAGES

export interface MadeLink {
  url: string
  expiresAt: string
}

const hashOf = (token: string) => createHash('sha256').update(token).digest('hex')

/**
 * A link with which the person may set a password once, within 7 days. It ends the person's older
 * links. The token is in the address alone: the database keeps its hash.
 */
export async function makeLink(
  link: { kind: LinkKind; userId: number; networkId: number | null; createdBy: number | null },
  { clock, config }: Pick<Deps, 'clock' | 'config'>,
  transaction: Transaction,
): Promise<MadeLink> {
  const now = clock.now()
  await OneTimeLink.update(
    { usedAt: now },
    { where: { userId: link.userId, usedAt: null }, transaction },
  )
  const token = randomBytes(TOKEN_BYTES).toString('base64url')
  const expiresAt = new Date(now.getTime() + LIFETIME_MS)
  await OneTimeLink.create({ ...link, tokenHash: hashOf(token), expiresAt }, { transaction })
  return {
    url: `${config.baseUrl}/${PAGES[link.kind]}/${token}`,
    expiresAt: expiresAt.toISOString(),
  }
}

function usable(token: string, { clock }: Pick<Deps, 'clock'>) {
  return { tokenHash: hashOf(token), usedAt: null, expiresAt: { [Op.gt]: clock.now() } }
}

/** Whom the link is for. @throws AppError `not-found` when it is unknown, used or too old */
export async function lookAtLink(token: string, deps: Pick<Deps, 'clock'>) {
  const link = await OneTimeLink.findOne({ where: usable(token, deps) })
  const user = link && (await User.findByPk(link.userId))
  if (!user) throw notFound()
  const network = link.networkId === null ? null : await Network.findByPk(link.networkId)
  return { name: user.name, email: user.email, networkName: network?.name ?? null }
}

/**
 * Sets the person's password and uses the link up: of several tries at once one passes, the others
 * find no link. All sessions that the person had end.
 * @throws AppError `not-found` when the link is unknown, used or too old
 */
export async function redeemLink(token: string, password: string, deps: Deps) {
  await lookAtLink(token, deps)
  // Outside the transaction: hashing takes long and holds no lock.
  const passwordHash = await hashPassword(password, deps)
  const userId = await inTransaction(deps.sequelize, async (transaction) => {
    const [claimed] = await OneTimeLink.update(
      { usedAt: deps.clock.now() },
      { where: usable(token, deps), transaction },
    )
    if (claimed !== 1) throw notFound()
    const { userId } = await OneTimeLink.findOne({
      where: { tokenHash: hashOf(token) },
      rejectOnEmpty: true,
      transaction,
    })
    await User.update({ passwordHash }, { where: { id: userId }, transaction })
    await nextSessionEpoch(deps.sequelize, userId, transaction)
    await deleteSessionsOf(deps.sequelize, userId, transaction)
    return userId
  })
  const user = await findUserForSession(userId)
  if (!user) throw notFound()
  return user
}
