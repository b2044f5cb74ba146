import { z } from 'zod'
import { lossBreakdown, lossDimension, lossFilters, lossSummary } from '../contract/losses.js'
import type { LossBreakdown, LossFilters, LossRow } from '../contract/losses.js'
import { PATHS } from '../contract/paths.js'
import type { Deps } from '../deps.js'
import { invalid } from '../errors.js'
import type { Scope } from '../policies/index.js'
import {
  presentCoverage,
  presentFaults,
  presentLevels,
  presentMonths,
  presentPlaces,
} from '../presenters/loss.js'
import { lossCsvHeadings, presentLossCsv } from '../presenters/lossCsv.js'
import { presentRates } from '../presenters/rate.js'
import { kilnCoverage } from '../queries/kilnCoverage.js'
import { levelsByIds } from '../queries/levelsByIds.js'
import { kilnsOfLosses, lossSums } from '../queries/lossSums.js'
import type { KilnOfLosses, LossCut, SumsByKey } from '../queries/lossSums.js'
import { factor as factorOf } from '../shared/factors.js'
import { faultNode } from '../shared/faults/index.js'
import { REFIRED } from '../shared/lossRollup.js'
import { countsOf } from '../shared/lossRollupRates.js'
import { addMonths, daysOfMonth, monthsFrom } from '../shared/months.js'
import { localTime } from '../shared/zonedTime.js'
import { defineRoute } from './defineRoute.js'
import type { Route } from './defineRoute.js'
import { readableStudios } from './readable.js'
import { sendCsv } from './sendCsv.js'

const network = z.string()
/** Ten years: a chart of more months shows nothing. */
const MOST_MONTHS = 120

interface Asked {
  cut: LossCut
  kilns: KilnOfLosses[]
}

/** What the filters come to for this person; the last twelve months of the network's zone unless said. */
async function asked(scope: Scope, filters: LossFilters, { clock }: Deps): Promise<Asked> {
  const { networkId } = scope
  const to = filters.to ?? localTime(clock.now(), scope.network.timeZone).day.slice(0, 7)
  const from = filters.from ?? addMonths(to, -11)
  const months = monthsFrom(from, to).length
  if (months === 0) throw invalid({ to: 'The last month is before the first.' })
  if (months > MOST_MONTHS) throw invalid({ from: `At most ${MOST_MONTHS} months.` })
  if (filters.fault && !faultNode(filters.fault))
    throw invalid({ fault: 'Not a fault of the tree.' })
  const kilns = await kilnsOfLosses(networkId, readableStudios(scope, 'losses.read'), filters)
  const cut = {
    networkId,
    kilnIds: kilns.map(({ id }) => id),
    kind: filters.kind,
    from,
    to,
    fault: filters.fault ?? null,
  }
  return { cut, kilns }
}

const daysOf = ({ from, to }: LossCut) => ({
  from: daysOfMonth(from).first,
  to: daysOfMonth(to).last,
})

async function coverageOf(
  { cut }: Asked,
  { sequelize }: Deps,
  total: SumsByKey,
  recordedShare: number | null,
) {
  const counters = await kilnCoverage(sequelize, cut.networkId, cut.kilnIds, daysOf(cut))
  return presentCoverage(
    counters,
    presentRates(total.get(''), cut.fault, cut.kind).loss,
    recordedShare,
  )
}

async function breakdown(
  scope: Scope,
  dimension: string,
  filters: LossFilters,
  deps: Deps,
): Promise<LossBreakdown> {
  const ask = await asked(scope, filters, deps)
  const total = await lossSums(deps.sequelize, ask.cut, 'all')
  const { rows, recordedPieces } = await rowsBy(dimension, ask, scope, deps)
  const pieces = total.get('')?.get('')?.[1] ?? 0
  const share = recordedPieces === null || pieces === 0 ? null : recordedPieces / pieces
  return { dimension, rows, coverage: await coverageOf(ask, deps, total, share) }
}

interface Rows {
  rows: LossRow[]
  /** Pieces for which the factor is recorded; null when the rows are not of a factor. */
  recordedPieces: number | null
}

async function rowsBy(
  dimension: string,
  { cut, kilns }: Asked,
  scope: Scope,
  { sequelize }: Deps,
): Promise<Rows> {
  if (dimension === 'month') {
    return {
      rows: presentMonths(await lossSums(sequelize, cut, 'month'), cut),
      recordedPieces: null,
    }
  }
  if (dimension === 'kiln' || dimension === 'studio') {
    return {
      rows: presentPlaces(await lossSums(sequelize, cut, 'kiln'), kilns, dimension, cut),
      recordedPieces: null,
    }
  }
  if (dimension === 'fault') {
    return {
      rows: presentFaults((await lossSums(sequelize, cut, 'fault')).get(''), cut),
      recordedPieces: null,
    }
  }
  const sums = await lossSums(sequelize, cut, 'level', dimension)
  const levels = await levelsByIds(scope.networkId, [...sums.keys()].map(Number))
  const recordedPieces = sums.get('0')?.get('')?.[1] ?? 0
  return { rows: presentLevels(sums, levels, dimension, cut, scope), recordedPieces }
}

const byDimension = z.object({ network, dimension: lossDimension })

/** Losses of the studios that the person may read, from the roll-ups: in all, and by month, place, fault and factor. */
export const lossRoutes: readonly Route[] = [
  defineRoute({
    method: 'get',
    path: PATHS.losses,
    ability: 'losses.read',
    query: lossFilters,
    output: lossSummary,
    handle: async ({ scope, query, deps }) => {
      const ask = await asked(scope, query, deps)
      const { cut } = ask
      const [total, refired] = await Promise.all([
        lossSums(deps.sequelize, cut, 'all'),
        lossSums(deps.sequelize, { ...cut, fault: null }, 'all', REFIRED),
      ])
      return {
        ...daysOf(cut),
        rates: presentRates(total.get(''), cut.fault, cut.kind),
        refired: presentRates(refired.get(''), null, cut.kind),
        counts: countsOf(total.get('')?.get('')),
        coverage: await coverageOf(ask, deps, total, null),
      }
    },
  }),
  defineRoute({
    method: 'get',
    path: PATHS.lossesBy,
    ability: 'losses.read',
    params: byDimension,
    query: lossFilters,
    output: lossBreakdown,
    handle: ({ scope, params, query, deps }) => breakdown(scope, params.dimension, query, deps),
  }),
  defineRoute({
    method: 'get',
    path: PATHS.lossesByCsv,
    ability: 'losses.read',
    params: byDimension,
    query: lossFilters,
    output: 'raw',
    handle: async ({ scope, params, query, deps, res }) => {
      const { rows } = await breakdown(scope, params.dimension, query, deps)
      const heading = factorOf(params.dimension)?.name.toLowerCase() ?? params.dimension
      const name = `losses-by-${params.dimension.replaceAll('_', '-')}-${scope.network.slug}.csv`
      await sendCsv(res, name, lossCsvHeadings(heading), rows.map(presentLossCsv))
    },
  }),
]
