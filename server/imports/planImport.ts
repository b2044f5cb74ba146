import { CONES } from '../shared/kinds.js'
import type { FiringKind } from '../shared/kinds.js'
import { firingKey } from './lotSheet.js'
import type { LotSheet, LotSheetRow, SheetProblem } from './lotSheet.js'
import type { SheetField } from './lotSheetColumns.js'
import { LevelNames } from './levelNames.js'
import type { KnownLevel, WantedLevel } from './levelNames.js'
import { nameKey } from './names.js'

/** What an import is told beside the sheet. */
export interface ImportDefaults {
  /** Names for lots of a sheet without such a column. */
  studio: string
  kiln: string
  kind: FiringKind
  date: string
  /** Last day that a firing may have. */
  today: string
}

/** What the network has already; ids are not needed to plan. */
export interface KnownNames {
  studios: readonly string[]
  levels: readonly KnownLevel[]
}

export interface PlannedLot {
  row: LotSheetRow
  /** Places in `ImportPlan.levels` by factor. */
  levels: Record<string, number[]>
}

export interface PlannedFiring {
  /** As the sheet numbers it; empty where the day and the kind say which. */
  number: string
  studio: string
  kiln: string
  kind: FiringKind
  date: string
  cone: (typeof CONES)[number] | null
  openingTemperatureC: number | null
  levels: Record<string, number>
  lots: PlannedLot[]
}

export interface ImportPlan {
  firings: PlannedFiring[]
  /** Every level that a lot or firing names, known or new. */
  levels: WantedLevel[]
  /** Everything that is wrong; nothing may be written unless it is empty. */
  problems: SheetProblem[]
  /** What was assumed or left out, in sentences. */
  notices: string[]
}

const MOST_LOTS = 200
const MOST_PIECES = 10_000
const MOST_REFIRES = 9
const MOST_LEVELS = 8
const FIRST_DAY = '2000-01-01'
const LONGEST = { studio: 120, kiln: 80 } as const

/** Sorts the rows of a sheet into firings and says what is missing or wrong. Pure. */
export function planImport(
  sheet: LotSheet,
  known: KnownNames,
  defaults: ImportDefaults,
): ImportPlan {
  const names = new LevelNames(known.levels)
  const problems = [...sheet.problems]
  const firings = new Map<string, PlannedFiring>()
  for (const row of sheet.rows) {
    const complain = (column: string, message: string): void => {
      problems.push({ row: row.line, column, message })
    }
    checkRow(row, sheet, defaults, complain)
    const key = nameKey(firingKey(row))
    const firing = firings.get(key) ?? firingOf(row, sheet, known, defaults)
    firings.set(key, firing)
    addLot(firing, row, names, complain)
  }
  return {
    firings: [...firings.values()],
    levels: names.wanted,
    problems: problems.sort((a, b) => a.row - b.row),
    notices: notices(sheet, defaults),
  }
}

type Complain = (column: string, message: string) => void

/** The header of a field's column, or null for a sheet without it. */
function headerOf(sheet: LotSheet, field: SheetField): string | null {
  return (
    sheet.columns.find((column) => column.is === 'field' && column.field === field)?.header ?? null
  )
}

function checkRow(
  row: LotSheetRow,
  sheet: LotSheet,
  { today }: ImportDefaults,
  complain: Complain,
): void {
  const header = (field: SheetField): string => headerOf(sheet, field) ?? field
  const given = (field: SheetField): boolean => headerOf(sheet, field) !== null
  if (row.pieces < 1) complain(header('pieces'), 'A lot has at least one piece.')
  if (row.pieces > MOST_PIECES) complain(header('pieces'), `At most ${MOST_PIECES} pieces a lot.`)
  if (row.refireCount > MOST_REFIRES)
    complain(header('refireCount'), `At most ${MOST_REFIRES} refires.`)
  if (row.cone !== null && coneOf(row.cone) === null)
    complain(header('cone'), `“${row.cone}” is no cone: write it as 06 or 6.`)
  if (given('kind') && row.kind === null)
    complain(header('kind'), 'Which kind of firing? Bisque, glaze, once-fired, lustre or raku.')
  if (given('date') && row.date === null)
    complain(header('date'), 'Which day? Write it as 2025-03-31.')
  if (row.date !== null && row.date > today) complain(header('date'), 'This day is still to come.')
  if (row.date !== null && row.date < FIRST_DAY)
    complain(header('date'), 'Before the year 2000: check the year.')
  for (const field of ['studio', 'kiln'] as const) {
    if (given(field) && row[field] === null) complain(header(field), `Which ${field}?`)
    if ((row[field]?.length ?? 0) > LONGEST[field])
      complain(header(field), `At most ${LONGEST[field]} characters.`)
  }
}

/** Cones as a sheet may write them: "cone 6", "Δ06", "^6". */
function coneOf(text: string): PlannedFiring['cone'] {
  const bare = text
    .toLowerCase()
    .replace(/^(cone|c|△|Δ|δ|\^)\s*/u, '')
    .trim()
  return CONES.find((cone) => cone === bare) ?? null
}

function firingOf(
  row: LotSheetRow,
  sheet: LotSheet,
  known: KnownNames,
  defaults: ImportDefaults,
): PlannedFiring {
  const studio = row.studio ?? defaults.studio
  return {
    number: row.firing,
    studio: known.studios.find((name) => nameKey(name) === nameKey(studio)) ?? studio,
    kiln: row.kiln ?? defaults.kiln,
    kind: row.kind ?? defaults.kind,
    date: row.date ?? defaults.date,
    cone: null,
    openingTemperatureC: null,
    levels: {},
    lots: [],
  }
}

/** Adds a row to its firing; what the firing has only once must be the same on every row. */
function addLot(
  firing: PlannedFiring,
  row: LotSheetRow,
  names: LevelNames,
  complain: Complain,
): void {
  if (firing.lots.length === MOST_LOTS) complain('', `A firing has at most ${MOST_LOTS} lots.`)
  const before = firing.lots.reduce((sum, lot) => sum + lot.row.pieces, 0)
  if (before <= MOST_PIECES && before + row.pieces > MOST_PIECES)
    complain('', `A firing has at most ${MOST_PIECES} pieces.`)
  const cone = row.cone === null ? null : coneOf(row.cone)
  if (cone !== null && firing.cone !== null && cone !== firing.cone)
    complain('cone', differs(row, firing.cone))
  firing.cone ??= cone
  const temperature = row.openingTemperatureC
  if (
    temperature !== null &&
    firing.openingTemperatureC !== null &&
    temperature !== firing.openingTemperatureC
  )
    complain('opening_temperature', differs(row, `${firing.openingTemperatureC} °C`))
  firing.openingTemperatureC ??= temperature
  for (const [factor, name] of Object.entries(row.firingLevels)) {
    // The band of a temperature is worked out from the reading; a band alone has no place in a report.
    if (name === null || factor === 'opening_temperature') continue
    const place = names.place(factor, name, firing.studio, (message) => complain(factor, message))
    if (place === null) continue
    const held = firing.levels[factor]
    if (held !== undefined && held !== place)
      complain(factor, differs(row, names.wanted[held]?.name ?? ''))
    firing.levels[factor] = held ?? place
  }
  const lot: PlannedLot = { row, levels: {} }
  for (const [factor, value] of Object.entries(row.levels)) {
    const places = (value === null ? [] : [value].flat()).map((name) =>
      names.place(factor, name, firing.studio, (message) => complain(factor, message)),
    )
    const found = [...new Set(places.filter((place) => place !== null))]
    if (found.length > MOST_LEVELS) complain(factor, `At most ${MOST_LEVELS} of them a lot.`)
    if (found.length > 0) lot.levels[factor] = found
  }
  firing.lots.push(lot)
}

function differs(row: LotSheetRow, before: string): string {
  return `Another line of firing ${row.firing || `of ${row.date ?? ''}`} says “${before}”.`
}

function notices(sheet: LotSheet, defaults: ImportDefaults): string[] {
  const said: string[] = []
  const assume = (field: 'studio' | 'kiln' | 'kind' | 'date', what: string): void => {
    if (headerOf(sheet, field) === null)
      said.push(
        `No column gives ${what}: ${defaults[field]} is taken for all (--${field} changes it).`,
      )
  }
  if (sheet.columns.length === 0) return said
  assume('studio', 'the studio')
  assume('kiln', 'the kiln')
  assume('kind', 'the kind of firing')
  assume('date', 'the day')
  const left = sheet.columns.filter(({ is }) => is === 'unknown').map(({ header }) => `“${header}”`)
  if (left.length > 0)
    said.push(
      `Left out, since the column is nothing we know: ${left.join(', ')} (--as COLUMN=NAME says what it is).`,
    )
  const bands = sheet.rows.some(
    (row) => row.openingTemperatureC === null && row.firingLevels.opening_temperature,
  )
  if (bands) said.push('Opening temperatures given as a band are left out: a report holds degrees.')
  return said
}
