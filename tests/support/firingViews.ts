import type {
  FiringDetail,
  FiringRow,
  LossView,
  LotView,
  RevisionView,
} from '../../server/contract/firings.js'
import { addCounts, NO_COUNTS } from '../../server/shared/counts.js'

/** A uid that is told apart at a glance. */
export const uidOf = (n: number): string => `01890000-0000-7000-8000-${String(n).padStart(12, '0')}`

export function makeLoss(given: Partial<LossView> = {}): LossView {
  return {
    uid: uidOf(900),
    lot: uidOf(1),
    fault: 's-crack',
    also: [],
    outcome: 'waster',
    pieces: 1,
    neighbour: false,
    features: {},
    lateOn: null,
    ...given,
  }
}

export function makeLot(given: Partial<LotView> = {}): LotView {
  return {
    uid: uidOf(1),
    isRest: false,
    ...NO_COUNTS,
    pieces: 12,
    levels: {},
    glazeOverlap: null,
    refireCount: 0,
    maker: null,
    note: null,
    losses: [],
    ...given,
  }
}

export function makeRevision(given: Partial<RevisionView> = {}): RevisionView {
  return {
    uid: uidOf(800),
    number: 1,
    kind: 'pack',
    reason: null,
    author: 'Mara',
    serverTime: '2026-05-03T09:00:00.000Z',
    deviceTime: null,
    counts: { ...NO_COUNTS, pieces: 12 },
    ...given,
  }
}

/** A firing as its page gets it; its counts are the sums of its lots. */
export function makeFiring(given: Partial<FiringDetail> = {}): FiringDetail {
  const lots = given.lots ?? [makeLot()]
  return {
    ...makeFiringRow(),
    ...lots.reduce((sum, lot) => addCounts(sum, lot), { ...NO_COUNTS }),
    timeZone: 'Europe/Lisbon',
    rest: uidOf(700),
    lots,
    levels: {},
    openedAt: null,
    openingTemperatureC: null,
    note: null,
    packedBy: 'Mara',
    reportedBy: null,
    voidReason: null,
    recorded: [],
    revisions: [makeRevision()],
    ...given,
  }
}

export function makeFiringRow(given: Partial<FiringRow> = {}): FiringRow {
  return {
    uid: uidOf(500),
    studio: { uid: uidOf(400), name: 'Quayside' },
    kiln: { uid: uidOf(300), name: 'Front kiln' },
    kind: 'glaze',
    status: 'packed',
    programme: null,
    cone: '6',
    localDate: '2026-05-03',
    kilnNumber: 214,
    about: false,
    ...NO_COUNTS,
    pieces: 12,
    wholeLoadFailed: null,
    revision: 1,
    packedAt: '2026-05-03T09:00:00.000Z',
    reportedAt: null,
    abilities: { 'firings.report': true, 'firings.amend': true, 'firings.pack': true },
    ...given,
  }
}
