import { createHash } from 'node:crypto'
import type { CreationAttributes, Model, ModelStatic, Transaction } from 'sequelize'
import type { PackBody, ReportBody, RevisionInput } from '../contract/firings.js'
import type { Deps } from '../deps.js'
import { Firing, FiringLevel, Loss, Lot, LotLevel, ReportRevision } from '../models/index.js'
import type { Scope } from '../policies/scope.js'
import { LOT_FACTORS } from '../shared/factors.js'
import { projectLoad } from './projectLoad.js'
import type { ProjectedLoad, ProjectedLot } from './projectLoad.js'

/** One revision as it would have been sent, with who sent it and when. */
export interface WholeRevision {
  uid: string
  authorId: number | null
  at: Date
  /** As parsed by `revisionInput`: every default is filled in. */
  input: RevisionInput
}

/** A firing with its history, oldest revision first; the first one packs it. */
export interface WholeFiring {
  uid: string
  revisions: readonly WholeRevision[]
}

/** Keys inside for what payloads name by uid. */
export interface Keys {
  kilns: ReadonlyMap<string, { id: number; studioId: number }>
  levels: ReadonlyMap<string, number>
}

export interface Written {
  firings: number
  lots: number
  pieces: number
  losses: number
}

/** Rows a statement: 16 MB is the least that a statement may hold, and a payload has a few kB. */
const BATCH = 1000

type LotColumn =
  'formId' | 'clayBodyId' | 'clayConditionId' | 'glazeId' | 'formingId' | 'dryingPracticeId' | 'joiningPracticeId' | 'classId'

/**
 * Writes whole firings with their history, in batches, inside the transaction given: what the app
 * would have written revision by revision, only faster (1,500 firings of 8 lots in a few seconds).
 * It trusts its rows, which come from the import's checks or from the demo; roll-ups are not moved,
 * the caller rebuilds them.
 *
 * @throws Error for a uid that `keys` does not know, and what the database refuses (CHECKs, keys)
 */
export async function writeFirings(
  scope: Scope,
  firings: readonly WholeFiring[],
  keys: Keys,
  deps: Pick<Deps, 'sequelize'> & { transaction: Transaction },
): Promise<Written> {
  const { networkId } = scope
  const { transaction } = deps
  const states = firings.map((firing) => stateOf(firing))
  const firingIds = await insert(Firing, states.map((state) => firingRow(networkId, state, keys)), transaction)
  const lots = states.flatMap((state, i) =>
    state.load.lots.map((lot) => ({ lot, state, firingId: at(firingIds, i) })),
  )
  const lotIds = await insert(
    Lot,
    lots.map(({ lot, state, firingId }) => lotRow(networkId, firingId, lot, state, keys)),
    transaction,
  )
  const losses = lots.flatMap(({ lot, state, firingId }, i) =>
    lot.losses.map((loss) => ({
      networkId,
      firingId,
      lotId: at(lotIds, i),
      uid: loss.uid,
      fault: loss.fault,
      alsoFaults: loss.also,
      outcome: loss.outcome,
      pieces: loss.pieces,
      neighbour: loss.neighbour,
      features: loss.features,
      createdAt: state.last.at,
      updatedAt: state.last.at,
    })),
  )
  await insert(Loss, losses, transaction)
  await insert(
    LotLevel,
    lots.flatMap(({ lot }, i) => lotLevelRows(networkId, at(lotIds, i), lot, keys)),
    transaction,
  )
  await insert(
    FiringLevel,
    states.flatMap((state, i) => firingLevelRows(networkId, at(firingIds, i), state, keys)),
    transaction,
  )
  await insert(
    ReportRevision,
    states.flatMap((state, i) => revisionRows(networkId, at(firingIds, i), state)),
    transaction,
  )
  return {
    firings: states.length,
    lots: lots.filter(({ lot }) => !lot.isRest).length,
    pieces: states.reduce((sum, state) => sum + state.load.counts.pieces, 0),
    losses: losses.reduce((sum, loss) => sum + loss.pieces, 0),
  }
}

/** Where a firing stands after its last revision. */
interface State {
  firing: WholeFiring
  pack: PackBody
  report: ReportBody | null
  load: ProjectedLoad
  packed: WholeRevision
  reported: WholeRevision | null
  last: WholeRevision
}

function stateOf(firing: WholeFiring): State {
  let pack: PackBody | undefined
  let report: ReportBody | null = null
  for (const { input } of firing.revisions) {
    pack = input.pack ?? pack
    if (input.kind !== 'pack') report = input.report
  }
  const packed = firing.revisions[0]
  const last = firing.revisions.at(-1)
  if (!pack || !packed || !last) throw new Error(`Firing ${firing.uid} was never packed.`)
  const reported = firing.revisions.find(({ input }) => input.kind === 'report') ?? null
  return { firing, pack, report, load: projectLoad(pack, report), packed, reported, last }
}

function firingRow(networkId: number, state: State, keys: Keys): CreationAttributes<Firing> {
  const { firing, pack, report, load, packed, reported, last } = state
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
    packedAt: packed.at,
    packedBy: packed.authorId,
    reportedAt: reported?.at ?? null,
    reportedBy: reported?.authorId ?? null,
    createdAt: packed.at,
    updatedAt: last.at,
  }
}

function lotRow(
  networkId: number,
  firingId: number,
  lot: ProjectedLot,
  state: State,
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
    createdAt: state.packed.at,
    updatedAt: state.last.at,
  }
}

const uidsOf = (value: string | string[] | null | undefined): string[] =>
  value === null || value === undefined ? [] : Array.isArray(value) ? value : [value]

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

/** Levels of factors without a column, and every further level of those with one. */
function lotLevelRows(networkId: number, lotId: number, lot: ProjectedLot, keys: Keys) {
  return LOT_FACTORS.flatMap((factor) =>
    uidsOf(lot.input?.levels[factor.id])
      .slice(factor.column === undefined ? 0 : 1)
      .map((uid) => ({ networkId, lotId, factor: factor.id, levelId: levelId(keys, uid) })),
  )
}

function firingLevelRows(networkId: number, firingId: number, state: State, keys: Keys) {
  return Object.entries(state.pack.levels).flatMap(([factor, uid]) =>
    uid ? [{ networkId, firingId, factor, levelId: levelId(keys, uid) }] : [],
  )
}

function revisionRows(networkId: number, firingId: number, state: State) {
  return state.firing.revisions.map((revision, index) => ({
    networkId,
    firingId,
    uid: revision.uid,
    number: index + 1,
    kind: revision.input.kind,
    baseNumber: index,
    reason: revision.input.kind === 'amend' ? revision.input.reason : null,
    authorId: revision.authorId,
    deviceTime: revision.input.deviceTime === null ? null : new Date(revision.input.deviceTime),
    serverTime: revision.at,
    payload: revision.input,
    payloadHash: createHash('sha256').update(JSON.stringify(revision.input)).digest('hex'),
  }))
}

function levelId(keys: Keys, uid: string): number {
  const id = keys.levels.get(uid)
  if (id === undefined) throw new Error(`A lot names a level that is not there: ${uid}`)
  return id
}

function at(ids: readonly number[], index: number): number {
  const id = ids[index]
  if (id === undefined) throw new Error('The database gave fewer ids than rows.')
  return id
}

/** Ids of the rows in their order: one INSERT of many rows takes consecutive ids. */
async function insert<M extends Model>(
  model: ModelStatic<M>,
  rows: readonly CreationAttributes<M>[],
  transaction: Transaction,
): Promise<number[]> {
  const ids: number[] = []
  for (let from = 0; from < rows.length; from += BATCH) {
    const made = await model.bulkCreate(rows.slice(from, from + BATCH), { transaction, validate: false, hooks: false })
    for (const row of made) ids.push((row as unknown as { id: number }).id)
  }
  return ids
}
