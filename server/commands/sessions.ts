import { Op } from 'sequelize'
import { inTransaction } from '../database/inTransaction.js'
import type { Deps } from '../deps.js'
import { User } from '../models/index.js'
import { deleteSessionsOf, nextSessionEpoch } from '../queries/sessionsOfPerson.js'

const SEEN_EVERY_MS = 5 * 60_000

/**
 * Ends every session of a person, on every device: their rows go, and the person's epoch moves on, so
 * that a session which another request is just writing back is nobody's.
 */
export async function endSessions(
  userId: number,
  { sequelize }: Pick<Deps, 'sequelize'>,
): Promise<void> {
  await inTransaction(sequelize, async (transaction) => {
    await nextSessionEpoch(sequelize, userId, transaction)
    await deleteSessionsOf(sequelize, userId, transaction)
  })
}

/** Notes that the person was here, at most every five minutes. */
export async function noteSeen(userId: number, { clock }: Pick<Deps, 'clock'>): Promise<void> {
  const now = clock.now()
  const before = new Date(now.getTime() - SEEN_EVERY_MS)
  await User.update(
    { lastSeenAt: now },
    {
      where: { id: userId, lastSeenAt: { [Op.or]: [{ [Op.is]: null }, { [Op.lt]: before }] } },
      silent: true,
    },
  )
}
