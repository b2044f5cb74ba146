import { BaseError, Transaction } from 'sequelize'
import type { Sequelize } from 'sequelize'

const DEADLOCK = 1213
const MOST_TRIES = 5

function isDeadlock(error: unknown): boolean {
  const parent =
    error instanceof BaseError ? (error as { parent?: { errno?: number } }).parent : null
  return parent?.errno === DEADLOCK
}

/**
 * Runs `work` in one transaction. MariaDB rolls a deadlocked one back whole, so the whole of `work`
 * runs again, at most five times: it must have no effect outside the database.
 */
export async function inTransaction<T>(
  sequelize: Sequelize,
  work: (transaction: Transaction) => Promise<T>,
): Promise<T> {
  for (let tries = 1; ; tries += 1) {
    try {
      return await sequelize.transaction(
        { isolationLevel: Transaction.ISOLATION_LEVELS.READ_COMMITTED },
        work,
      )
    } catch (error) {
      if (!isDeadlock(error) || tries === MOST_TRIES) throw error
    }
  }
}
