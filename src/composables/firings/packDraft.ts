/**
 * A load while it is being packed: pure. The draft has the paths of the body that is sent
 * (`lots.2.pieces`), so that the server's messages find their fields.
 */
import type { Catalogue, CatalogueLevel } from '../../../server/contract/catalogue.js'
import type { FiringDetail, LotView, PackBody } from '../../../server/contract/firings.js'
import type { Factor } from '../../../server/shared/factors.js'
import { FIRING_FACTORS, LOT_FACTORS } from '../../../server/shared/factors.js'
import type { FiringKind } from '../../../server/shared/kinds.js'
import { checkLoad } from '../../../server/shared/loadChecks.js'

export type LevelChoice = string | string[] | null

export interface PackLot {
  uid: string
  pieces: number | null
  levels: Record<string, LevelChoice>
  glazeOverlap: boolean | null
  refireCount: number | null
  maker: string
  note: string
}

export interface PackAway {
  uid: string
  lot: string
  fault: string | null
  pieces: number | null
}

export interface PackDraft {
  /** 1: form of this draft in storage. */
  v: 1
  firing: string
  /** uid of the revision to be; kept with the draft, so that sending it twice makes one. */
  revision: string
  /** 0 for a new firing, else the revision whose load is corrected. */
  base: number
  deviceTime: string | null
  kiln: string | null
  kind: FiringKind
  programme: string | null
  cone: string | null
  localDate: string | null
  kilnNumber: number | null
  pieces: number | null
  about: boolean
  levels: Record<string, string | null>
  note: string
  rest: string
  lots: PackLot[]
  turnedAway: PackAway[]
}

type MakeUid = () => string

/** Factors that a load of this kind can have: no glaze in a bisque. */
export function lotFactors(kind: FiringKind): readonly Factor[] {
  return LOT_FACTORS.filter((factor) => applies(factor, kind))
}

export const applies = (factor: Factor, kind: FiringKind): boolean =>
  !(factor.applies === 'glaze' && kind === 'bisque')

/** Factors of the firing that have no field of their own. */
export const OTHER_FIRING_FACTORS = FIRING_FACTORS.filter(
  ({ id }) => !['kiln', 'programme', 'opening_temperature'].includes(id),
)

export function emptyPack(makeUid: MakeUid): PackDraft {
  return {
    v: 1,
    firing: makeUid(),
    revision: makeUid(),
    base: 0,
    deviceTime: null,
    kiln: null,
    kind: 'glaze',
    programme: null,
    cone: null,
    localDate: null,
    kilnNumber: null,
    pieces: null,
    about: false,
    levels: {},
    note: '',
    rest: makeUid(),
    lots: [],
    turnedAway: [],
  }
}

export function emptyLot(makeUid: MakeUid): PackLot {
  return {
    uid: makeUid(),
    pieces: null,
    levels: {},
    glazeOverlap: null,
    refireCount: 0,
    maker: '',
    note: '',
  }
}

/** The same lot once more, as a lot of its own. */
export function duplicateOf(lot: PackLot, makeUid: MakeUid): PackLot {
  const copy = JSON.parse(JSON.stringify(lot)) as PackLot
  return { ...copy, uid: makeUid() }
}

/** A packed firing, to correct its load. */
export function packOf(firing: FiringDetail, makeUid: MakeUid): PackDraft {
  const lots = firing.lots.filter((lot) => !lot.isRest)
  return {
    ...emptyPack(makeUid),
    firing: firing.uid,
    base: firing.revision,
    kiln: firing.kiln.uid,
    kind: firing.kind,
    programme: firing.programme?.uid ?? null,
    cone: firing.cone,
    localDate: firing.localDate,
    kilnNumber: firing.kilnNumber,
    pieces: firing.pieces,
    about: firing.about,
    levels: firingLevels(firing),
    note: firing.note ?? '',
    rest: firing.rest,
    lots: lots.map((lot) => packLotOf(lot, lot.uid)),
    turnedAway: firing.lots.flatMap((lot) =>
      lot.losses
        .filter(({ outcome }) => outcome === 'turned-away')
        .map(({ uid, fault, pieces }) => ({ uid, lot: lot.uid, fault, pieces })),
    ),
  }
}

/** "As last time": programme, cone, cooling and lots of the last load, as new ones; day and number stay. */
export function asLastTime(draft: PackDraft, last: FiringDetail, makeUid: MakeUid): PackDraft {
  return {
    ...draft,
    programme: last.programme?.uid ?? null,
    cone: last.cone,
    pieces: last.pieces,
    about: last.about,
    levels: firingLevels(last),
    lots: last.lots
      .filter((lot) => !lot.isRest)
      .map((lot) => ({ ...packLotOf(lot, makeUid()), refireCount: 0, maker: '', note: '' })),
    turnedAway: [],
  }
}

function firingLevels(firing: FiringDetail): Record<string, string | null> {
  return Object.fromEntries(
    OTHER_FIRING_FACTORS.flatMap(({ id }) =>
      firing.levels[id] ? [[id, firing.levels[id].uid]] : [],
    ),
  )
}

function packLotOf(lot: LotView, uid: string): PackLot {
  const levels = LOT_FACTORS.flatMap(({ id, several }) => {
    const uids = (lot.levels[id] ?? []).map((level) => level.uid)
    return uids.length > 0 ? [[id, several ? uids : (uids[0] ?? null)] as const] : []
  })
  return {
    uid,
    pieces: lot.pieces,
    levels: Object.fromEntries(levels),
    glazeOverlap: lot.glazeOverlap,
    refireCount: lot.refireCount,
    maker: lot.maker ?? '',
    note: lot.note ?? '',
  }
}

/** The levels chosen for a factor, none, one or several. */
export function chosen(lot: Pick<PackLot, 'levels'>, factor: string): string[] {
  const value = lot.levels[factor]
  return value === null || value === undefined ? [] : Array.isArray(value) ? value : [value]
}

export const inLots = (draft: PackDraft): number =>
  draft.lots.reduce((sum, lot) => sum + (lot.pieces ?? 0), 0)

/** Pieces of the load that are in no lot; below nought when the lots hold too many. */
export const restOf = (draft: PackDraft): number => (draft.pieces ?? 0) - inLots(draft)

export const turnedAwayOf = (draft: PackDraft, lot?: string): number =>
  draft.turnedAway.reduce(
    (sum, away) => (lot === undefined || away.lot === lot ? sum + (away.pieces ?? 0) : sum),
    0,
  )

/** Of the load's pieces, those for which each factor is recorded; factors that the kind cannot have are missing. */
export function recordedIn(draft: PackDraft): { factor: string; pieces: number }[] {
  return lotFactors(draft.kind).map(({ id }) => ({
    factor: id,
    pieces: draft.lots.reduce(
      (sum, lot) => (chosen(lot, id).length > 0 ? sum + (lot.pieces ?? 0) : sum),
      0,
    ),
  }))
}

/** What is wrong with the load, by field path; empty when it can be sent. The counts are checked as the server checks them. */
export function packProblems(draft: PackDraft): Record<string, string> {
  const missing: Record<string, string> = {}
  if (draft.kiln === null) missing.kiln = 'Which kiln?'
  if (draft.localDate === null) missing.localDate = 'Which day?'
  if (draft.pieces === null) missing.pieces = 'How many pieces in all? About is fine.'
  for (const [index, lot] of draft.lots.entries())
    if (lot.pieces === null) missing[`lots.${index}.pieces`] = 'How many pieces?'
  for (const [index, away] of draft.turnedAway.entries()) {
    if (away.fault === null)
      missing[`turnedAway.${index}.fault`] = 'What did you see? Not named is fine.'
    if (away.pieces === null) missing[`turnedAway.${index}.pieces`] = 'How many?'
  }
  return { ...checkLoad(packBodyOf(draft)), ...missing }
}

/** The body to send; what does not apply to the kind is left out, however it was chosen before. */
export function packBodyOf(draft: PackDraft): PackBody {
  const factors = lotFactors(draft.kind)
  const lots = draft.lots.map(({ maker, note, pieces, refireCount, ...lot }) => ({
    ...lot,
    pieces: pieces ?? 0,
    refireCount: refireCount ?? 0,
    levels: Object.fromEntries(
      factors.flatMap(({ id }) =>
        chosen(lot, id).length > 0 ? [[id, lot.levels[id] ?? null] as const] : [],
      ),
    ),
    glazeOverlap:
      chosen(lot, 'glaze').length > 1 && draft.kind !== 'bisque' ? lot.glazeOverlap : null,
    maker: maker.trim() || null,
    note: note.trim() || null,
  }))
  return {
    kiln: draft.kiln ?? '',
    kind: draft.kind,
    programme: draft.programme,
    cone: draft.cone as PackBody['cone'],
    localDate: draft.localDate ?? '',
    kilnNumber: draft.kilnNumber,
    pieces: draft.pieces ?? 0,
    about: draft.about,
    levels: Object.fromEntries(Object.entries(draft.levels).filter(([, uid]) => uid !== null)),
    note: draft.note.trim() || null,
    rest: draft.rest,
    lots,
    turnedAway: draft.turnedAway.map((away) => ({
      ...away,
      fault: away.fault ?? '',
      pieces: away.pieces ?? 0,
    })),
  }
}

/** A load moved to another studio: levels that are not in its lists are let go, the others stay. */
export function fitToStudio(
  draft: PackDraft,
  catalogue: Catalogue,
  studio: string | null,
): PackDraft {
  const ok = (uid: string): boolean => {
    const level = catalogue.levels.find((each) => each.uid === uid)
    return level === undefined || level.studio === null || level.studio === studio
  }
  const fit = (value: LevelChoice): LevelChoice =>
    Array.isArray(value) ? value.filter(ok) : value !== null && ok(value) ? value : null
  return {
    ...draft,
    programme: fit(draft.programme) as string | null,
    lots: draft.lots.map((lot) => ({
      ...lot,
      levels: Object.fromEntries(
        Object.entries(lot.levels).map(([factor, value]) => [factor, fit(value)]),
      ),
    })),
  }
}

/** A load that holds more than what every draft starts with. */
export const isBegun = (draft: PackDraft): boolean =>
  draft.pieces !== null || draft.lots.length > 0 || draft.note !== '' || draft.turnedAway.length > 0

/** Levels to choose from: the studio's own, then the common ones, none that is archived. `now` keeps a level that is chosen already. */
export function levelsFor(
  catalogue: Catalogue,
  factor: string,
  studio: string | null,
  now: readonly string[] = [],
): CatalogueLevel[] {
  const open = (level: CatalogueLevel): boolean =>
    !level.archived && (level.studio === null || level.studio === studio)
  return catalogue.levels
    .filter((level) => level.factor === factor && (open(level) || now.includes(level.uid)))
    .sort((a, b) => Number(a.studio === null) - Number(b.studio === null))
}

/** The level of a class that says how long its makers have been at it, or null. */
export function classLevelOf(catalogue: Catalogue, classUid: string | null): string | null {
  const code = catalogue.levels.find((level) => level.uid === classUid)?.attributes.classLevel
  return (
    (code &&
      catalogue.levels.find((level) => level.factor === 'class_level' && level.code === code)
        ?.uid) ??
    null
  )
}
