import { QueryTypes } from 'sequelize'
import type { Sequelize } from 'sequelize'

export const ATTEMPT_WINDOW_MS = 15 * 60_000

interface Attempt {
  failures: number
  blockedUntil: Date | null
}

/**
 * Counts one guess before it is judged, so that guesses sent at once cannot slip past the limit, and
 * answers what stands then. One statement: MariaDB evaluates the assignments from left to right, each
 * with the values set before it. A window of 15 minutes starts with the first failure; the guess after
 * the last allowed one blocks for 15 minutes more; guesses while blocked change nothing.
 * @returns when the subject may try again, or null when this guess may be judged
 */
export async function countAttempt(
  sequelize: Sequelize,
  attempt: { subject: string; limit: number; now: Date },
): Promise<Date | null> {
  const { now } = attempt
  const rows = await sequelize.query<Attempt>(
    `INSERT INTO sign_in_attempts (subject, failures, window_started_at)
     VALUES (:subject, 1, :now)
     ON DUPLICATE KEY UPDATE
       failures = CASE
         WHEN blocked_until > :now THEN failures
         WHEN blocked_until IS NOT NULL OR window_started_at <= :edge THEN 1
         ELSE failures + 1 END,
       window_started_at = IF(failures = 1, :now, window_started_at),
       blocked_until = IF(failures > :limit, COALESCE(blocked_until, :until), NULL)
     RETURNING failures, blocked_until AS blockedUntil`,
    {
      type: QueryTypes.SELECT,
      replacements: {
        ...attempt,
        edge: new Date(now.getTime() - ATTEMPT_WINDOW_MS),
        until: new Date(now.getTime() + ATTEMPT_WINDOW_MS),
      },
    },
  )
  return rows[0]?.blockedUntil ?? null
}

/** A right guess: the account starts afresh, and the address gets its try back. */
export async function clearAttempts(
  sequelize: Sequelize,
  subjects: { account: string; address: string },
): Promise<void> {
  await sequelize.query(
    `UPDATE sign_in_attempts
     SET failures = IF(subject = :account, 0, GREATEST(failures - 1, 0)), blocked_until = NULL
     WHERE subject IN (:account, :address)`,
    { type: QueryTypes.UPDATE, replacements: subjects },
  )
}

/** Drops what no window needs any more. */
export async function forgetAttempts(sequelize: Sequelize, before: Date): Promise<void> {
  await sequelize.query('DELETE FROM sign_in_attempts WHERE window_started_at < :before', {
    type: QueryTypes.DELETE,
    replacements: { before },
  })
}
