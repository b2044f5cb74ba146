import type { Today } from '../contract/today.js'
import type { KilnCoverage } from '../queries/kilnCoverage.js'
import type { KilnOfLosses } from '../queries/lossSums.js'
import type { RecentLosses } from '../queries/todayFirings.js'
import { missingFirings } from '../shared/missingFirings.js'
import { presentRate } from './rate.js'

/** Kilns whose counter is ahead of the firings that are here, packed ones among them: most missing first. */
export function presentGaps(
  kilns: readonly KilnOfLosses[],
  counters: readonly KilnCoverage[],
): Today['gaps'] {
  const byId = new Map(counters.map((counter) => [counter.kilnId, counter]))
  const gaps = kilns.flatMap(({ id, uid, name, studioUid, studioName }) => {
    const counter = byId.get(id)
    const missing = counter ? missingFirings(counter, counter.known) : 0
    if (!counter || counter.highest === null || missing === 0) return []
    return [
      {
        kiln: { uid, name },
        studio: { uid: studioUid, name: studioName },
        kilnNumber: counter.highest,
        missing,
      },
    ]
  })
  return gaps.sort((a, b) => b.missing - a.missing || a.kiln.name.localeCompare(b.kiln.name, 'en'))
}

const NO_SUMS = { G: 0, sumUnits: 0, sumEvents: 0, sumUnits2: 0, sumUnitsEvents: 0, sumEvents2: 0 }

/** Loss rates by studio and kind, in the order of the rows. */
export function presentRecentRates(losses: readonly RecentLosses[]): Today['rates'] {
  const pairs = new Map<string, RecentLosses[]>()
  for (const loss of losses) {
    const key = `${loss.studioId} ${loss.kind}`
    pairs.set(key, [...(pairs.get(key) ?? []), loss])
  }
  return [...pairs.values()].map((both) => {
    const { studioUid, studioName, kind } = both[0] as RecentLosses
    const sumsOf = (recent: boolean) => both.find((loss) => loss.recent === recent)?.sums ?? NO_SUMS
    return {
      studio: { uid: studioUid, name: studioName },
      kind,
      last30: presentRate(sumsOf(true)),
      before: presentRate(sumsOf(false)),
    }
  })
}
