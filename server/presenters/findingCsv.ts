import type { FindingRow } from '../queries/findings.js'
import { factor as factorOf } from '../shared/factors.js'
import { faultNode } from '../shared/faults/index.js'
import { findingText } from '../shared/sentences/finding.js'

/** Heading and value of every column of the findings' CSV. Numbers are whole, not rounded for reading. */
const COLUMNS: readonly [string, (finding: FindingRow) => string | number | null][] = [
  [
    'finding',
    (finding) =>
      findingText({ ...finding, exposed: exposed(finding), unexposed: unexposed(finding) }),
  ],
  ['studio', ({ studio }) => studio?.name ?? 'all studios'],
  ['fault', ({ fault }) => faultNode(fault)?.name ?? fault],
  ['factor', ({ factor }) => factorOf(factor)?.name ?? factor],
  ['level', ({ level }) => level.name],
  ['clay body of the pair', ({ pair }) => pair?.level.name ?? null],
  [
    'compared',
    ({ comparison }) => (comparison === 'within-firing' ? 'inside firings' : 'between firings'),
  ],
  ['ratio', ({ ratio }) => ratio],
  ['lower limit (95 %)', ({ lower }) => lower],
  ['upper limit (95 %)', ({ upper }) => upper],
  ['p', ({ pValue }) => pValue],
  ['q', ({ qValue }) => qValue],
  ['pieces failed, with the level', ({ exposedEvents }) => exposedEvents],
  ['pieces, with the level', ({ exposedUnits }) => exposedUnits],
  ['pieces failed, others', ({ unexposedEvents }) => unexposedEvents],
  ['pieces, others', ({ unexposedUnits }) => unexposedUnits],
  ['firings or groups that held both', ({ mixedStrata }) => mixedStrata],
  ['share recorded', ({ recordedShare }) => recordedShare],
  ['first seen', ({ firstSeenOn }) => firstSeenOn],
]

const exposed = ({ exposedEvents, exposedUnits }: FindingRow) => ({
  events: exposedEvents,
  units: exposedUnits,
})
const unexposed = ({ unexposedEvents, unexposedUnits }: FindingRow) => ({
  events: unexposedEvents,
  units: unexposedUnits,
})

export const FINDING_CSV_HEADINGS = COLUMNS.map(([heading]) => heading)

/** One finding as a row under `FINDING_CSV_HEADINGS`. */
export function presentFindingCsv(finding: FindingRow): (string | number | null)[] {
  return COLUMNS.map(([, value]) => value(finding))
}
