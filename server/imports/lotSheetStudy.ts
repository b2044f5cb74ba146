import { FACTORS, factor } from '../shared/factors.js'
import type { StudyFactor, StudyRow } from '../study/index.js'
import { firingKey, type LotSheet, type LotSheetRow } from './lotSheet.js'

const FORMING_CODES = (factor('forming')?.fixed ?? []).map((one) => one.code)

/** A sheet without a kind of firing is studied as one kind; bisque, where making and drying faults show. */
const UNTOLD_KIND = 'bisque'

/**
 * The factors and rows that the study takes, straight from a lot sheet: no network, no catalogue. Columns that are
 * nothing we know are taken for lot factors of their own.
 */
export function studyOfLotSheet(sheet: LotSheet): { factors: StudyFactor[]; rows: StudyRow[] } {
  const others = sheet.columns
    .filter((column) => column.is === 'unknown')
    .map((column) => column.header)
  const shared = kilnsOfSeveralStudios(sheet.rows)
  return {
    factors: [...FACTORS, ...[...new Set(others)].map((id): StudyFactor => ({ id, of: 'lot' }))],
    rows: sheet.rows.map((row) => studyRow(row, shared)),
  }
}

/** "Kiln 1" of one studio is not "Kiln 1" of another. */
function kilnsOfSeveralStudios(rows: readonly LotSheetRow[]): ReadonlySet<string> {
  const studioOf = new Map<string, string | null>()
  const shared = new Set<string>()
  for (const { kiln, studio } of rows) {
    if (kiln === null) continue
    if (studioOf.has(kiln) && studioOf.get(kiln) !== studio) shared.add(kiln)
    studioOf.set(kiln, studio)
  }
  return shared
}

function studyRow(row: LotSheetRow, sharedKilns: ReadonlySet<string>): StudyRow {
  const kiln = row.kiln ?? ''
  const forming = row.levels.forming
  return {
    firing: firingKey(row),
    studio: row.studio ?? '',
    kiln: sharedKilns.has(kiln) ? `${row.studio ?? ''} / ${kiln}` : kiln,
    kind: row.kind ?? UNTOLD_KIND,
    wholeLoadFailed: false,
    isRest: false,
    pieces: row.pieces,
    turnedAway: row.turnedAway,
    notLookedAt: row.notLookedAt,
    refireCount: row.refireCount,
    levels: { ...row.levels, ...row.others },
    firingLevels: row.firingLevels,
    formingCode: FORMING_CODES.find((code) => code === forming) ?? null,
    hasGlaze: row.levels.glaze_sides === 'none' ? false : row.levels.glaze ? true : null,
    hasJoint: row.levels.joining_practice ? true : null,
    losses: row.losses.map(({ fault, pieces }) => ({
      fault,
      also: [],
      pieces,
      outcome: 'waster',
      event: false,
    })),
  }
}
