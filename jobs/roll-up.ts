import { checkRollups } from '../server/commands/checkRollups.js'
import { systemScope } from '../server/queries/scopeFor.js'
import type { JobContext } from '../server/scheduling/types.js'
import { plural } from '../server/shared/plural.js'

/** The weekly check of the totals behind the loss rates. */
export async function rollUp({ networkId, deps, progress }: JobContext): Promise<string> {
  const scope = await systemScope(networkId)
  if (!scope) return 'The network is gone.'
  const { firings, differences } = await checkRollups(scope, deps, (done, all) =>
    progress((100 * done) / all),
  )
  const counted = `Counted ${plural(firings, 'firing')} again`
  if (differences === 0) return `${counted}: all totals are right.`
  deps.logger.warn({ networkId, differences }, 'roll-ups differed from the lots')
  return `${counted}: ${plural(differences, 'total')} differed and ${differences === 1 ? 'was' : 'were'} put right.`
}
