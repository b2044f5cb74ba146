import type { Ref } from '../contract/common.js'
import type {
  FiringDetail,
  FiringRow,
  LossView,
  LotView,
  RevisionView,
} from '../contract/firings.js'
import { abilitiesFor, can } from '../policies/index.js'
import type { Scope } from '../policies/index.js'
import type { FiringDetailRows, LotDetail, NamedLevel } from '../queries/firingDetail.js'
import type { FiringListRow } from '../queries/firingRows.js'
import { NO_COUNTS } from '../shared/counts.js'
import type { LotCounts } from '../shared/counts.js'
import { LOT_FACTORS } from '../shared/factors.js'
import type { FiringKind } from '../shared/kinds.js'

/** From here on an opening is hot: no name stands beside it. Common practice, no source. */
const HOT_C = 100

function presentCounts(counts: LotCounts): LotCounts {
  const { pieces, turnedAway, seconds, refires, wasters, undecided, notLookedAt } = counts
  return { pieces, turnedAway, seconds, refires, wasters, undecided, notLookedAt }
}

const instantOf = (at: Date | null | undefined): string | null => at?.toISOString() ?? null

/** A row of the list of firings. */
export function presentFiringRow(row: FiringListRow, scope: Scope): FiringRow {
  return {
    uid: row.uid,
    studio: { uid: row.studioUid, name: row.studioName },
    kiln: { uid: row.kilnUid, name: row.kilnName },
    kind: row.kind,
    status: row.status,
    programme:
      row.programmeUid && row.programmeName
        ? { uid: row.programmeUid, name: row.programmeName }
        : null,
    cone: row.cone,
    localDate: row.localDate,
    kilnNumber: row.kilnNumber,
    about: Boolean(row.about),
    ...presentCounts(row),
    wholeLoadFailed: row.wholeLoadFailed,
    revision: row.revision,
    packedAt: instantOf(row.packedAt),
    reportedAt: instantOf(row.reportedAt),
    abilities: abilitiesFor(scope, { studioId: row.studioId }, [
      'firings.pack',
      'firings.report',
      'firings.amend',
      'firings.void',
      'firings.makers',
    ]),
  }
}

/** A firing whole. Makers, notes and names of people stay in the studio. */
export function presentFiring(
  row: FiringListRow,
  detail: FiringDetailRows,
  counts: ReadonlyMap<number, LotCounts>,
  scope: Scope,
): FiringDetail {
  const { firing } = detail
  const inside = can(scope, 'firings.makers', { studioId: firing.studioId })
  const hot = (firing.openingTemperatureC ?? 0) >= HOT_C
  const nameOf = (id: number | null | undefined): string | null =>
    inside && id ? (detail.people.get(id) ?? null) : null
  const lots = detail.lots.map((lot) => presentLot(lot, scope))
  return {
    ...presentFiringRow(row, scope),
    timeZone: detail.timeZone,
    rest: lots.find(({ isRest }) => isRest)?.uid ?? '',
    lots,
    levels: Object.fromEntries(
      detail.levels.map(({ factor, uid, name }) => [factor, { uid, name }]),
    ),
    openedAt: instantOf(firing.openedAt),
    openingTemperatureC: firing.openingTemperatureC ?? null,
    note: inside ? (firing.note ?? null) : null,
    packedBy: nameOf(firing.packedBy),
    reportedBy: hot ? null : nameOf(firing.reportedBy),
    voidReason: firing.voidReason ?? null,
    recorded: recordedShares(firing.kind, lots),
    revisions: detail.revisions.map((revision) =>
      presentRevision(
        revision,
        counts,
        hot && revision.kind !== 'pack' ? null : nameOf(revision.authorId),
      ),
    ),
  }
}

type RevisionRow = FiringDetailRows['revisions'][number]

/** @param author name, or null where it is not to be seen */
export function presentRevision(
  revision: RevisionRow,
  counts: ReadonlyMap<number, LotCounts>,
  author: string | null,
): RevisionView {
  return {
    uid: revision.uid,
    number: revision.number,
    kind: revision.kind,
    reason: revision.reason ?? null,
    author,
    serverTime: revision.serverTime.toISOString(),
    deviceTime: instantOf(revision.deviceTime),
    counts: presentCounts(counts.get(revision.number) ?? NO_COUNTS),
  }
}

/** What a revision held, without makers and notes for readers outside the studio. */
export function presentPayload(payload: unknown, inside: boolean): unknown {
  if (inside) return payload
  return JSON.parse(
    JSON.stringify(payload, (key, value: unknown) =>
      key === 'maker' || key === 'note' ? null : value,
    ),
  )
}

function presentLot({ lot, levels, losses }: LotDetail, scope: Scope): LotView {
  const inside = can(scope, 'firings.makers', { studioId: lot.studioId })
  return {
    uid: lot.uid,
    isRest: Boolean(lot.isRest),
    ...presentCounts(lot),
    levels: byFactor(levels),
    glazeOverlap: lot.glazeOverlap ?? null,
    refireCount: lot.refireCount,
    maker: inside ? (lot.maker ?? null) : null,
    note: inside ? (lot.note ?? null) : null,
    losses: losses.map((loss) => presentLoss(loss, lot.uid)),
  }
}

function byFactor(levels: readonly NamedLevel[]): Record<string, Ref[]> {
  const map: Record<string, Ref[]> = {}
  for (const { factor, uid, name } of levels) (map[factor] ??= []).push({ uid, name })
  return map
}

function presentLoss(loss: LotDetail['losses'][number], lot: string): LossView {
  return {
    uid: loss.uid,
    lot,
    fault: loss.fault,
    also: loss.alsoFaults,
    outcome: loss.outcome,
    pieces: loss.pieces,
    neighbour: Boolean(loss.neighbour),
    features: loss.features,
    lateOn: loss.lateOn ?? null,
  }
}

/** Share of the pieces for which each lot factor is recorded; glaze is no question before the glazing. */
function recordedShares(kind: FiringKind, lots: readonly LotView[]): FiringDetail['recorded'] {
  const all = lots.reduce((sum, { pieces }) => sum + pieces, 0)
  return LOT_FACTORS.filter(({ applies }) => !(applies === 'glaze' && kind === 'bisque')).map(
    ({ id }) => {
      const known = lots.reduce(
        (sum, { levels, pieces }) => sum + (levels[id]?.length ? pieces : 0),
        0,
      )
      return { factor: id, share: all > 0 ? known / all : 0 }
    },
  )
}
