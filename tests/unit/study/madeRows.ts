import { FACTORS } from '../../../server/shared/factors.js'
import { STUDY_FAULTS, studyLots, StudyTableBuilder } from '../../../server/study/index.js'
import type { StudyOptions, StudyResult, StudyRow } from '../../../server/study/index.js'
import { randomNumbers } from '../../../server/study/randomNumbers.js'

/** A bisque lot of ten sound pieces with nothing recorded, changed where said. */
export function lot(change: Partial<StudyRow> & Pick<StudyRow, 'firing'>): StudyRow {
  return {
    studio: 'Studio',
    kiln: 'Kiln',
    kind: 'bisque',
    wholeLoadFailed: false,
    isRest: false,
    pieces: 10,
    turnedAway: 0,
    notLookedAt: 0,
    refireCount: 0,
    levels: {},
    firingLevels: {},
    formingCode: null,
    hasGlaze: null,
    hasJoint: null,
    losses: [],
    ...change,
  }
}

/** Pieces lost to one fault. */
export function lost(
  fault: string,
  pieces: number,
  more: Partial<StudyRow['losses'][number]> = {},
) {
  return pieces === 0 ? [] : [{ fault, also: [], pieces, outcome: 'waster', event: false, ...more }]
}

/** The study of rows with the registry of factors and the fault tree. */
export function study(rows: readonly StudyRow[], options: Partial<StudyOptions> = {}): StudyResult {
  const builder = new StudyTableBuilder(FACTORS)
  for (const row of rows) builder.push(row)
  return studyLots(builder.build(), { faults: STUDY_FAULTS, everyComparison: true, ...options })
}

/**
 * Firings of two lots, one dried fast and one slowly; of the fast pieces 4 in 10 are lost, of the slow ones 1 in 10,
 * with a little from firing to firing.
 */
export function driedFastOrSlow(
  firings: number,
  change: (row: StudyRow) => StudyRow = (row) => row,
): StudyRow[] {
  const random = randomNumbers(7)
  return Array.from({ length: firings }, (_, firing) =>
    ['fast', 'slow'].map((drying) => {
      const pieces = (drying === 'fast' ? 4 : 1) + Math.floor(random() * 3) - 1
      return change(
        lot({ firing, levels: { drying_practice: drying }, losses: lost('s-crack', pieces) }),
      )
    }),
  ).flat()
}

/** Numbers that are normal enough (sum of twelve), from a seed. */
export function normalNumbers(random: () => number): () => number {
  return () => Array.from({ length: 12 }, random).reduce((sum, one) => sum + one, 0) - 6
}

/** The rows in another order, from a seed. */
export function shuffled<T>(rows: readonly T[], seed: number): T[] {
  const random = randomNumbers(seed)
  const out = [...rows]
  for (let i = out.length - 1; i > 0; i -= 1) {
    const j = Math.floor(random() * (i + 1))
    ;[out[i], out[j]] = [out[j] as T, out[i] as T]
  }
  return out
}
