import type { FiringListRow } from '../queries/firingRows.js'
import { fired, firsts } from '../shared/counts.js'
import { FIRING_KIND_NAMES } from '../shared/kinds.js'

/** Heading and value of every column of the list of firings as CSV. */
const COLUMNS: readonly [string, (row: FiringListRow) => string | number | null][] = [
  ['date', ({ localDate }) => localDate],
  ['studio', ({ studioName }) => studioName],
  ['kiln', ({ kilnName }) => kilnName],
  ['firing number', ({ kilnNumber }) => kilnNumber],
  ['kind', ({ kind }) => FIRING_KIND_NAMES[kind]],
  ['programme', ({ programmeName }) => programmeName],
  ['cone', ({ cone }) => cone],
  ['status', ({ status }) => status],
  ['pieces', ({ pieces }) => pieces],
  ['about', ({ about }) => (about ? 'about' : '')],
  ['turned away', ({ turnedAway }) => turnedAway],
  ['fired', fired],
  ['firsts', (row) => (row.status === 'packed' ? null : firsts(row))],
  ['seconds', ({ seconds }) => seconds],
  ['refires', ({ refires }) => refires],
  ['wasters', ({ wasters }) => wasters],
  ['undecided', ({ undecided }) => undecided],
  ['not looked at', ({ notLookedAt }) => notLookedAt],
  ['whole load failed', ({ wholeLoadFailed }) => wholeLoadFailed],
  ['firing', ({ uid }) => uid],
]

export const FIRING_CSV_HEADINGS: readonly string[] = COLUMNS.map(([heading]) => heading)

/** One firing as a row under `FIRING_CSV_HEADINGS`. */
export function presentFiringCsv(row: FiringListRow): (string | number | null)[] {
  return COLUMNS.map(([, value]) => value(row))
}
