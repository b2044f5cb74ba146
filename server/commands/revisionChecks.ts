import type { Transaction } from 'sequelize'
import type { PackBody, ReportBody } from '../contract/firings.js'
import type { Deps } from '../deps.js'
import { can } from '../policies/index.js'
import type { Scope } from '../policies/index.js'
import {
  classLevelIds,
  kilnOfRevision,
  levelsOfRevision,
  uidsOfOtherFirings,
} from '../queries/revisionCatalogue.js'
import type { KilnOfRevision, LevelOfRevision } from '../queries/revisionCatalogue.js'
import { factor as factorOf } from '../shared/factors.js'
import { checkLoad, checkReport } from '../shared/loadChecks.js'
import type { FieldMessages } from '../shared/loadChecks.js'
import { addDays, localTime } from '../shared/zonedTime.js'
import { uidsOf } from './firingRows.js'
import type { Keys } from './firingRows.js'

/** Older firings are a slip of the year. */
const FIRST_DAY = '2000-01-01'
const DAY_MS = 24 * 3600 * 1000

export interface ToCheck {
  /** Null for a firing that is not there yet. */
  firingId: number | null
  /** The load before this revision: what it held already stays allowed when it is archived. */
  before: PackBody | null
  pack: PackBody
  /** The revision brings a load; without one only the report is checked. */
  packSent: boolean
  report: ReportBody | null
}

export interface Checked {
  /** Messages by field path; nothing may be written unless it is empty. */
  fields: FieldMessages
  keys: Keys
}

/** Checks what shape alone cannot tell: counts, days, kiln, levels, uids of other firings. All problems at once. */
export async function checkRevision(
  scope: Scope,
  input: ToCheck,
  deps: Pick<Deps, 'clock'>,
  transaction: Transaction,
): Promise<Checked> {
  const { networkId } = scope
  const { pack, report } = input
  const [kiln, levels, classLevels, taken] = await Promise.all([
    kilnOfRevision(networkId, pack.kiln, transaction),
    levelsOfRevision(networkId, levelUids(pack), transaction),
    classLevelIds(networkId, transaction),
    uidsOfOtherFirings(networkId, input.firingId, partUids(pack, report), transaction),
  ])
  const now = deps.clock.now()
  const fields = {
    ...(input.packSent && {
      ...prefixed('pack', checkLoad(pack)),
      ...prefixed('pack', checkKiln(scope, kiln, input)),
      ...(kiln && prefixed('pack', checkDay(pack.localDate, now, kiln.timeZone))),
      ...(kiln && prefixed('pack', checkLevels(pack, input.before, kiln.studioId, levels))),
      ...prefixed('pack', checkUids(pack, taken)),
    }),
    ...(report && {
      ...prefixed('report', checkReport(pack, report)),
      ...prefixed('report', checkOpening(report, now)),
      ...prefixed('report', checkLossUids(report, taken.losses)),
    }),
  }
  return { fields, keys: keysOf(kiln, levels, classLevels) }
}

function prefixed(prefix: string, fields: FieldMessages): FieldMessages {
  return Object.fromEntries(
    Object.entries(fields).map(([path, message]) => [`${prefix}.${path}`, message]),
  )
}

function levelUids(pack: PackBody): string[] {
  return [
    ...uidsOf(pack.programme),
    ...Object.values(pack.levels).flatMap(uidsOf),
    ...pack.lots.flatMap((lot) => Object.values(lot.levels).flatMap(uidsOf)),
  ]
}

function partUids(pack: PackBody, report: ReportBody | null) {
  return {
    lots: [pack.rest, ...pack.lots.map(({ uid }) => uid)],
    losses: [
      ...pack.turnedAway.map(({ uid }) => uid),
      ...(report?.lots ?? []).flatMap(({ losses }) => losses.map(({ uid }) => uid)),
    ],
  }
}

function checkKiln(
  scope: Scope,
  kiln: KilnOfRevision | null,
  { pack, before }: ToCheck,
): FieldMessages {
  if (!kiln || !can(scope, 'firings.pack', { studioId: kiln.studioId })) {
    return { kiln: 'Choose a kiln of a studio where you work.' }
  }
  return kiln.archived && before?.kiln !== pack.kiln ? { kiln: 'This kiln is archived.' } : {}
}

/** A day of tolerance, for a tablet whose clock is in another zone. */
function checkDay(localDate: string, now: Date, timeZone: string): FieldMessages {
  if (localDate < FIRST_DAY) return { localDate: 'Before the year 2000: check the year.' }
  const last = addDays(localTime(now, timeZone).day, 1)
  return localDate > last ? { localDate: 'This day is still to come.' } : {}
}

function checkOpening(report: ReportBody, now: Date): FieldMessages {
  const future = report.openedAt !== null && Date.parse(report.openedAt) > now.getTime() + DAY_MS
  return future ? { openedAt: 'This moment is still to come.' } : {}
}

interface LevelQuestion {
  path: string
  factor: string
  uids: string[]
  /** Uids that were there before. */
  held: string[]
}

function checkLevels(
  pack: PackBody,
  before: PackBody | null,
  studioId: number,
  levels: ReadonlyMap<string, LevelOfRevision>,
): FieldMessages {
  const fields: FieldMessages = {}
  for (const { path, factor, uids, held } of levelQuestions(pack, before)) {
    const messages = uids.flatMap((uid) =>
      levelMessage(levels.get(uid), factor, studioId, held.includes(uid)),
    )
    if (uids.length > 1 && !factorOf(factor)?.several) messages.push('Choose one.')
    if (messages[0] !== undefined) fields[path] = messages[0]
  }
  return fields
}

function levelMessage(
  level: LevelOfRevision | undefined,
  factor: string,
  studioId: number,
  held: boolean,
): string[] {
  if (
    !level ||
    level.factor !== factor ||
    (level.studioId !== null && level.studioId !== studioId)
  ) {
    return ["Not in this studio's list."]
  }
  return level.archived && !held
    ? ['Archived: choose another, or bring it back in the settings.']
    : []
}

function levelQuestions(pack: PackBody, before: PackBody | null): LevelQuestion[] {
  const lotsBefore = new Map(before?.lots.map((lot) => [lot.uid, lot.levels]))
  return [
    {
      path: 'programme',
      factor: 'programme',
      uids: uidsOf(pack.programme),
      held: uidsOf(before?.programme),
    },
    ...Object.entries(pack.levels).map(([factor, value]) => ({
      path: `levels.${factor}`,
      factor,
      uids: uidsOf(value),
      held: Object.values(before?.levels ?? {}).flatMap(uidsOf),
    })),
    ...pack.lots.flatMap((lot, i) =>
      Object.entries(lot.levels).map(([factor, value]) => ({
        path: `lots.${i}.levels.${factor}`,
        factor,
        uids: uidsOf(value),
        held: Object.values(lotsBefore.get(lot.uid) ?? {}).flatMap(uidsOf),
      })),
    ),
  ]
}

const TAKEN = 'This mark is in use: make a new one.'

function checkUids(
  pack: PackBody,
  taken: { lots: Set<string>; losses: Set<string> },
): FieldMessages {
  return {
    ...(taken.lots.has(pack.rest) && { rest: TAKEN }),
    ...Object.fromEntries(
      pack.lots.flatMap(({ uid }, i) => (taken.lots.has(uid) ? [[`lots.${i}.uid`, TAKEN]] : [])),
    ),
    ...Object.fromEntries(
      pack.turnedAway.flatMap(({ uid }, i) =>
        taken.losses.has(uid) ? [[`turnedAway.${i}.uid`, TAKEN]] : [],
      ),
    ),
  }
}

function checkLossUids(report: ReportBody, taken: Set<string>): FieldMessages {
  return Object.fromEntries(
    report.lots.flatMap(({ losses }, i) =>
      losses.flatMap(({ uid }, j) =>
        taken.has(uid) ? [[`lots.${i}.losses.${j}.uid`, TAKEN]] : [],
      ),
    ),
  )
}

function keysOf(
  kiln: KilnOfRevision | null,
  levels: ReadonlyMap<string, LevelOfRevision>,
  classLevels: ReadonlyMap<string, number>,
): Keys {
  return {
    kilns: new Map(kiln ? [[kiln.uid, { id: kiln.id, studioId: kiln.studioId }]] : []),
    levels: new Map([...levels.values()].map(({ uid, id }) => [uid, id])),
    classLevels: new Map(
      [...levels.values()].flatMap(({ uid, classLevel }) => {
        const id = classLevel === null ? undefined : classLevels.get(classLevel)
        return id === undefined ? [] : [[uid, id]]
      }),
    ),
  }
}
