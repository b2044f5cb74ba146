import { PATHS } from '../contract/paths.js'
import { todayOutput } from '../contract/today.js'
import type { Today } from '../contract/today.js'
import type { Deps } from '../deps.js'
import { studiosWith } from '../policies/index.js'
import type { Scope } from '../policies/index.js'
import { presentFinding, presentStudy } from '../presenters/finding.js'
import { presentFiringRow } from '../presenters/firing.js'
import { presentGaps, presentRecentRates } from '../presenters/today.js'
import { NETWORK_SCOPE, listFindings } from '../queries/findings.js'
import { countFirings, firingIds, firingRows } from '../queries/firingRows.js'
import type { FiringOrder } from '../queries/firingRows.js'
import type { FiringWhere } from '../queries/firingWhere.js'
import { kilnCoverage } from '../queries/kilnCoverage.js'
import { kilnsOfLosses } from '../queries/lossSums.js'
import {
  recentLosses,
  reportedFirings,
  undecidedFirings,
  waitingFirings,
} from '../queries/todayFirings.js'
import { addDays, localTime } from '../shared/zonedTime.js'
import { defineRoute } from './defineRoute.js'
import type { Route } from './defineRoute.js'

const MOST_WAITING = 20
const MOST_RECENT = 8
const MOST_FINDINGS = 5
/** Days back to which pieces are still undecided and kilns are asked for gaps. */
const YEAR = 365
const RECENT_DAYS = 30
const BEFORE_DAYS = 84

async function rowsOf(
  scope: Scope,
  where: FiringWhere,
  order: FiringOrder,
  limit: number,
  { sequelize }: Deps,
) {
  const ids = await firingIds(sequelize, where, order, { limit, offset: 0 })
  const rows = await firingRows(sequelize, scope.networkId, ids)
  return rows.map((row) => presentFiringRow(row, scope))
}

async function waiting(scope: Scope, where: FiringWhere, deps: Deps): Promise<Today['toReport']> {
  const [total, rows] = await Promise.all([
    countFirings(deps.sequelize, where),
    rowsOf(scope, where, 'date', MOST_WAITING, deps),
  ])
  return { total, rows }
}

async function gaps(
  scope: Scope,
  studioIds: number[],
  today: string,
  { sequelize }: Deps,
): Promise<Today['gaps']> {
  const kilns = await kilnsOfLosses(scope.networkId, studioIds, {})
  const days = { from: addDays(today, -YEAR), to: addDays(today, 1) }
  return presentGaps(
    kilns,
    await kilnCoverage(
      sequelize,
      scope.networkId,
      kilns.map(({ id }) => id),
      days,
    ),
  )
}

/** Surest findings of the network's newest study; of their own studio's for those who work in one alone. */
async function leading(scope: Scope): Promise<Today['findings']> {
  const readable = studiosWith(scope, 'findings.read')
  const list = (of: string) => listFindings(scope, { scope: of, readable, pageSize: MOST_FINDINGS })
  const network = await list(NETWORK_SCOPE)
  const own =
    readable.length < scope.studioIds.length
      ? network?.scopes.filter(({ key }) => key !== NETWORK_SCOPE)
      : []
  for (const { key } of own ?? []) {
    const found = await list(key)
    if (found?.study && found.rows.length > 0) {
      return { study: presentStudy(found.study), rows: found.rows.map(presentFinding) }
    }
  }
  if (!network) return null
  return {
    study: network.study && presentStudy(network.study),
    rows: network.rows.map(presentFinding),
  }
}

/** What waits for this person, and what happened: parts that their roles do not have are null or empty. */
export const todayRoutes: readonly Route[] = [
  defineRoute({
    method: 'get',
    path: PATHS.today,
    ability: 'today.read',
    output: todayOutput,
    handle: async ({ scope, deps }) => {
      const { networkId, network } = scope
      const [own, readable] = [
        studiosWith(scope, 'firings.report'),
        studiosWith(scope, 'firings.read'),
      ]
      const today = localTime(deps.clock.now(), network.timeZone).day
      const lastYear = addDays(today, -YEAR)
      const since = addDays(today, 1 - RECENT_DAYS)
      // A person of the studio sees its firings; who only reads sees those of all their studios.
      const shown = own.length > 0 ? own : readable
      const [toReport, undecided, recent, gapsOfOwn, losses, findings] = await Promise.all([
        own.length > 0 ? waiting(scope, waitingFirings(networkId, own), deps) : null,
        own.length > 0 ? waiting(scope, undecidedFirings(networkId, own, lastYear), deps) : null,
        shown.length > 0
          ? rowsOf(
              scope,
              reportedFirings(networkId, shown, lastYear),
              'reported',
              MOST_RECENT,
              deps,
            )
          : [],
        gaps(scope, own, today, deps),
        recentLosses(deps.sequelize, networkId, readable, {
          from: addDays(since, -BEFORE_DAYS),
          since,
          to: addDays(today, 1),
        }),
        leading(scope),
      ])
      return {
        toReport,
        undecided,
        recent,
        gaps: gapsOfOwn,
        rates: presentRecentRates(losses),
        findings,
      }
    },
  }),
]
