import type { ComputedRef } from 'vue'
import type { RouteLocationRaw } from 'vue-router'
import type { LossFilters, LossRow, LossSummary } from '../../server/contract/losses.js'

/** Last day of a month (YYYY-MM) as YYYY-MM-DD. */
export function lastDayOf(month: string): string {
  const [year = 0, index = 1] = month.split('-').map(Number)
  return `${month}-${String(new Date(Date.UTC(year, index, 0)).getUTCDate()).padStart(2, '0')}`
}

/** From a row of a breakdown to the firings behind it, with the page's own filters. */
export function useLossLinks(
  network: ComputedRef<string>,
  filters: ComputedRef<LossFilters>,
  summary: () => LossSummary | undefined,
) {
  function firings(more: Record<string, string | undefined>): RouteLocationRaw {
    const { studio, kiln, kind, fault } = filters.value
    const query = {
      studio,
      kiln,
      kind,
      fault,
      status: 'reported',
      from: summary()?.from,
      to: summary()?.to,
      ...more,
    }
    const given = Object.entries(query).filter(([, value]) => value !== undefined)
    return {
      name: 'firings',
      params: { network: network.value },
      query: Object.fromEntries(given),
    }
  }
  return {
    month: (row: LossRow) => firings({ from: `${row.key}-01`, to: lastDayOf(row.key) }),
    kiln: (row: LossRow) => firings({ kiln: row.key }),
    fault: (row: LossRow) => firings({ fault: row.key }),
    level: (row: LossRow) => (row.uid ? firings({ level: row.uid }) : undefined),
  }
}
