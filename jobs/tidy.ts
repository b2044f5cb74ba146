import { forgetLinks, forgetSessions } from '../server/queries/forgetExpired.js'
import { ATTEMPT_WINDOW_MS, forgetAttempts } from '../server/queries/signInAttempts.js'
import { forgetSlots } from '../server/queries/slots.js'
import type { JobContext } from '../server/scheduling/types.js'
import { plural } from '../server/shared/plural.js'

const DAY_MS = 24 * 3600 * 1000
/** An expired link is kept for a while, so that whoever comes late is told that it has expired. */
const KEEP_LINKS_MS = 30 * DAY_MS
const KEEP_RUNS_MS = 180 * DAY_MS

/** Removes what nobody needs any more, of the whole installation. */
export async function tidy({ deps: { sequelize, clock } }: JobContext): Promise<string> {
  const now = clock.now()
  const ago = (span: number): Date => new Date(now.getTime() - span)
  const sessions = await forgetSessions(sequelize, now)
  const links = await forgetLinks(sequelize, ago(KEEP_LINKS_MS))
  const runs = await forgetSlots(sequelize, ago(KEEP_RUNS_MS))
  // A blocked subject is held for one window after the window of its guesses.
  await forgetAttempts(sequelize, ago(2 * ATTEMPT_WINDOW_MS))
  return `Removed ${plural(sessions, 'session')}, ${plural(links, 'link')} and ${plural(runs, 'record of a run', 'records of runs')}.`
}
