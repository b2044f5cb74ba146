import type { CreationAttributes } from 'sequelize'
import type { PackBody, ReportBody, RevisionInput } from '../contract/firings.js'
import type { Firing, FiringLevel, Loss, Lot, LotLevel, ReportRevision } from '../models/index.js'
import { LOT_FACTORS } from '../shared/factors.js'
import { payloadHash } from './payloadHash.js'
import { projectLoad } from './projectLoad.js'
import type { ProjectedLoad, ProjectedLoss, ProjectedLot } from './projectLoad.js'

/** One revision as it would have been sent, with who sent it and when. */
export interface WholeRevision {
  uid: string
  authorId: number | null
  at: Date
  /** As parsed by `revisionInput`: every default is filled in. */
  input: RevisionInput
}

/** A firing with its history, oldest revision first; the first one holds its load. */
export interface WholeFiring {
  uid: string
  revisions: readonly WholeRevision[]
}

/** Keys inside for what payloads name by uid. */
export interface Keys {
  kilns: ReadonlyMap<string, { id: number; studioId: number }>
  levels: ReadonlyMap<string, number>
  /** By uid of a class the level that stands for its class level: recorded where a lot names the class alone. */
  classLevels?: ReadonlyMap<string, number>
}

/** Where a firing stands after its last revision: its rows are a projection of its history. */
export interface FiringState {
  firing: WholeFiring
  pack: PackBody
  report: ReportBody | null
  load: ProjectedLoad
  first: WholeRevision
  packed: WholeRevision | null
  reported: WholeRevision | null
  last: WholeRevision
}

/** @throws Error for a history without a load */
export function stateOf(firing: WholeFiring): FiringState {
  let pack: PackBody | undefined
  let report: ReportBody | null = null
  for (const { input } of firing.revisions) {
    pack = input.pack ?? pack
    if (input.kind !== 'pack') report = input.report
  }
  const first = firing.revisions[0]
  const last = firing.revisions.at(-1)
  if (!pack || !first || !last) throw new Error(`Firing ${firing.uid} was never packed.`)
  const packed = firing.revisions.find(({ input }) => input.kind === 'pack') ?? null
  const reported = firing.revisions.find(({ input }) => input.kind === 'report') ?? null
  return { firing, pack, report, load: projectLoad(pack, report), first, packed, reported, last }
}

export function firingRow(
  networkId: number,
  state: FiringState,
  keys: Keys,
): CreationAttributes<Firing> {
  const { firing, pack, report, load, first, packed, reported, last } = state
  const kiln = keys.kilns.get(pack.kiln)
  if (!kiln) throw new Error(`Firing ${firing.uid} names a kiln that is not there: ${pack.kiln}`)
  return {
    networkId,
    studioId: kiln.studioId,
    kilnId: kiln.id,
    uid: firing.uid,
    kind: pack.kind,
    status: report ? 'reported' : 'packed',
    programmeId: pack.programme === null ? null : levelId(keys, pack.programme),
    cone: pack.cone,
    localDate: pack.localDate,
    kilnNumber: pack.kilnNumber,
    openedAt: report?.openedAt ? new Date(report.openedAt) : null,
    openingTemperatureC: report?.openingTemperatureC ?? null,
    about: pack.about,
    ...load.counts,
    wholeLoadFailed: report?.wholeLoadFailed ?? null,
    note: report?.note ?? pack.note,
    revision: firing.revisions.length,
    packedAt: packed?.at ?? null,
    packedBy: packed?.authorId ?? null,
    reportedAt: reported?.at ?? null,
    reportedBy: reported?.authorId ?? null,
    createdAt: first.at,
    updatedAt: last.at,
  }
}

export function lotRow(
  networkId: number,
  firingId: number,
  lot: ProjectedLot,
  state: FiringState,
  keys: Keys,
): CreationAttributes<Lot> {
  const kiln = keys.kilns.get(state.pack.kiln)
  return {
    networkId,
    firingId,
    studioId: kiln?.studioId ?? 0,
    uid: lot.uid,
    position: lot.position,
    isRest: lot.isRest,
    ...lot.counts,
    ...columnLevels(lot, keys),
    glazeOverlap: lot.input?.glazeOverlap ?? null,
    refireCount: lot.input?.refireCount ?? 0,
    maker: lot.input?.maker ?? null,
    note: lot.input?.note ?? null,
    createdAt: state.first.at,
    updatedAt: state.last.at,
  }
}

/** Levels by uid as a payload may write them: one, several, null or nothing; each one once. */
export function uidsOf(value: string | string[] | null | undefined): string[] {
  if (value === null || value === undefined) return []
  return Array.isArray(value) ? [...new Set(value)] : [value]
}

type LotColumn =
  | 'formId'
  | 'clayBodyId'
  | 'clayConditionId'
  | 'glazeId'
  | 'formingId'
  | 'dryingPracticeId'
  | 'joiningPracticeId'
  | 'classId'

/** Every column of every row, so that all rows of a statement have the same ones. */
function columnLevels(lot: ProjectedLot, keys: Keys): Record<LotColumn, number | null> {
  const columns: Partial<Record<string, number | null>> = {}
  for (const factor of LOT_FACTORS) {
    if (factor.column === undefined) continue
    const [first] = uidsOf(lot.input?.levels[factor.id])
    columns[factor.column] = first === undefined ? null : levelId(keys, first)
  }
  return columns as Record<LotColumn, number | null>
}

/** Levels of factors without a column, every further level of those with one, and the class's own level. */
export function lotLevelRows(
  networkId: number,
  lotId: number,
  lot: ProjectedLot,
  keys: Keys,
): CreationAttributes<LotLevel>[] {
  const rows = LOT_FACTORS.flatMap((factor) =>
    uidsOf(lot.input?.levels[factor.id])
      .slice(factor.column === undefined ? 0 : 1)
      .map((uid) => ({ networkId, lotId, factor: factor.id, levelId: levelId(keys, uid) })),
  )
  const [classUid] = uidsOf(lot.input?.levels.class)
  const implied = classUid === undefined ? undefined : keys.classLevels?.get(classUid)
  const given = uidsOf(lot.input?.levels.class_level).length > 0
  return implied === undefined || given
    ? rows
    : [...rows, { networkId, lotId, factor: 'class_level', levelId: implied }]
}

export function firingLevelRows(
  networkId: number,
  firingId: number,
  state: FiringState,
  keys: Keys,
): CreationAttributes<FiringLevel>[] {
  return Object.entries(state.pack.levels).flatMap(([factor, uid]) =>
    uid ? [{ networkId, firingId, factor, levelId: levelId(keys, uid) }] : [],
  )
}

export function lossRow(
  networkId: number,
  firingId: number,
  lotId: number,
  loss: ProjectedLoss,
  at: Date,
): CreationAttributes<Loss> {
  return {
    networkId,
    firingId,
    lotId,
    uid: loss.uid,
    fault: loss.fault,
    alsoFaults: loss.also,
    outcome: loss.outcome,
    pieces: loss.pieces,
    neighbour: loss.neighbour,
    features: loss.features,
    createdAt: at,
    updatedAt: at,
  }
}

/** @param number from 1 */
export function revisionRow(
  networkId: number,
  firingId: number,
  revision: WholeRevision,
  number: number,
): CreationAttributes<ReportRevision> {
  const { input } = revision
  return {
    networkId,
    firingId,
    uid: revision.uid,
    number,
    kind: input.kind,
    baseNumber: number - 1,
    reason: input.kind === 'amend' ? input.reason : null,
    authorId: revision.authorId,
    deviceTime: input.deviceTime === null ? null : new Date(input.deviceTime),
    serverTime: revision.at,
    payload: input,
    payloadHash: payloadHash(input),
  }
}

function levelId(keys: Keys, uid: string): number {
  const id = keys.levels.get(uid)
  if (id === undefined) throw new Error(`A lot names a level that is not there: ${uid}`)
  return id
}
