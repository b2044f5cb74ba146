import { QueryTypes } from 'sequelize'
import type { Sequelize, Transaction } from 'sequelize'

/** Makes every session of the person so far nobody's. */
export async function nextSessionEpoch(
  sequelize: Sequelize,
  userId: number,
  transaction: Transaction,
) {
  await sequelize.query('UPDATE users SET session_epoch = session_epoch + 1 WHERE id = :userId', {
    type: QueryTypes.UPDATE,
    replacements: { userId },
    transaction,
  })
}

/** Deletes the person's session rows. */
export async function deleteSessionsOf(
  sequelize: Sequelize,
  userId: number,
  transaction: Transaction,
) {
  await sequelize.query('DELETE FROM sessions WHERE user_id = :userId', {
    type: QueryTypes.DELETE,
    replacements: { userId },
    transaction,
  })
}
