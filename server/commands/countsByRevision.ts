import type { RevisionInput } from '../contract/firings.js'
import { NO_COUNTS } from '../shared/counts.js'
import type { LotCounts } from '../shared/counts.js'
import { projectLoad } from './projectLoad.js'

/**
 * Counts of a firing after each of its revisions, by number. Loads and reports are carried on by the
 * revisions that bring neither.
 */
export function countsByRevision(
  revisions: readonly { number: number; kind: string; payload: unknown }[],
): Map<number, LotCounts> {
  const counts = new Map<number, LotCounts>()
  let last: LotCounts = NO_COUNTS
  let pack: RevisionInput['pack']
  for (const { number, kind, payload } of revisions) {
    if (kind === 'pack' || kind === 'report' || kind === 'amend') {
      const input = payload as RevisionInput
      pack = input.pack ?? pack
      if (pack) last = projectLoad(pack, input.kind === 'pack' ? null : input.report).counts
    }
    counts.set(number, last)
  }
  return counts
}
