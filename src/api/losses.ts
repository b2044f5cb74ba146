/** Loss rates: the answer of the page, and breakdowns of it. */
import { queryOptions } from '@tanstack/vue-query'
import { lossBreakdown, lossSummary } from '../../server/contract/losses.js'
import type { LossFilters } from '../../server/contract/losses.js'
import { fill, PATHS } from '../../server/contract/paths.js'
import { getJson, withQuery } from './http'

/** Rates, counts and coverage of everything that passes the filters. */
export function lossSummaryQuery(network: string, filters: LossFilters) {
  return queryOptions({
    queryKey: ['losses', network, filters],
    queryFn: ({ signal }) =>
      getJson(fill(PATHS.losses, { network }), { schema: lossSummary, query: filters, signal }),
    placeholderData: (before) => before,
  })
}

/** The same by month, kiln, studio, fault or a factor's levels. */
export function lossBreakdownQuery(network: string, dimension: string, filters: LossFilters) {
  return queryOptions({
    queryKey: ['losses', network, filters, 'by', dimension],
    queryFn: ({ signal }) =>
      getJson(fill(PATHS.lossesBy, { network, dimension }), {
        schema: lossBreakdown,
        query: filters,
        signal,
      }),
    placeholderData: (before) => before,
  })
}

export function lossBreakdownCsvHref(
  network: string,
  dimension: string,
  filters: LossFilters,
): string {
  return withQuery(fill(PATHS.lossesByCsv, { network, dimension }), filters)
}
