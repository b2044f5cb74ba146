import type { FailedOutcome } from '../shared/counts.js'
import type { FiringKind } from '../shared/kinds.js'
import type { Made } from './firings.js'
import type { Failure } from './outcomes.js'
import type { Random } from './random.js'
import type { DemoFiring, DemoLotReport, DemoReport } from './types.js'

type Report = Omit<DemoReport, 'openedAt' | 'openingTemperatureC'>

function room({ lot, failures }: Made): number {
  return lot.pieces - failures.reduce((sum, { pieces }) => sum + pieces, 0)
}

const NEIGHBOUR = new WeakSet<Failure>()

/** A burst pot hits the ones around it, a running glaze glues them down: a few pieces of other lots. */
export function neighbours(all: readonly Made[], kind: FiringKind, random: Random): void {
  const culprit = kind === 'bisque' ? 'steam-blowout' : 'running-stuck'
  const share = kind === 'bisque' ? 0.45 : 0.12
  const source = all.find(({ failures }) => failures.some(({ fault }) => fault === culprit))
  if (!source || !random.chance(share)) return
  for (let hits = random.whole(1, 2); hits > 0; hits -= 1) {
    const other = random.pick(all)
    const pieces = Math.min(random.whole(1, 2), room(other))
    if (other === source || pieces < 1) continue
    const hit: Failure = {
      fault: culprit,
      outcome: random.chance(0.7) ? 'waster' : 'second',
      pieces,
    }
    NEIGHBOUR.add(hit)
    other.failures.push(hit)
  }
}

/** What the technician sent after opening. */
export function reported(
  all: readonly Made[],
  about: { reportedAt: number; recent: boolean; kind: FiringKind },
  random: Random,
): Report {
  // Members come by early and take their pots before anyone has looked.
  const collected = about.kind !== 'bisque' && random.chance(0.12)
  const lots = all.map((made): DemoLotReport => {
    const free = room(made)
    const notLookedAt =
      collected && free > 1 && random.chance(0.3) ? random.whole(1, Math.min(4, free)) : 0
    const losses = made.failures.flatMap((failure) => {
      if (failure.outcome === 'turned-away') return []
      const undecided = about.recent && failure.pieces === 1 && random.chance(0.08)
      const outcome: FailedOutcome = undecided ? 'undecided' : failure.outcome
      return [
        {
          uid: random.uid(about.reportedAt),
          fault: failure.fault,
          also: also(failure.fault, about.kind, random),
          outcome,
          pieces: failure.pieces,
          neighbour: NEIGHBOUR.has(failure),
        },
      ]
    })
    return { lot: made.lot.uid, notLookedAt, losses }
  })
  return {
    wholeLoadFailed: null,
    lots,
    note: random.chance(0.02) ? random.pick(REPORT_NOTES) : null,
  }
}

function also(fault: string, kind: FiringKind, random: Random): string[] {
  if (kind === 'bisque' || !random.chance(0.03)) return []
  const other = random.pick(['pinholing', 'crawling', 'handling-chip'])
  return other === fault ? [] : [other]
}

/** The power went: every piece that was not turned away has to go in again. */
export function wholeLoadLost(all: readonly Made[], reportedAt: number, random: Random): Report {
  const lots = all.map(({ lot, failures }): DemoLotReport => {
    const away = failures
      .filter(({ outcome }) => outcome === 'turned-away')
      .reduce((sum, { pieces }) => sum + pieces, 0)
    const pieces = lot.pieces - away
    const loss = {
      fault: 'underfired-dry-glaze',
      also: [],
      outcome: 'refire' as const,
      pieces,
      neighbour: false,
    }
    return {
      lot: lot.uid,
      notLookedAt: 0,
      losses: pieces > 0 ? [{ uid: random.uid(reportedAt), ...loss }] : [],
    }
  })
  return {
    wholeLoadFailed: 'power',
    lots,
    note: 'The power failed at 1040 °C; everything goes in again.',
  }
}

/** A second look changes the report: pieces found later, or a fault that was taken for another. */
export function amended(
  firing: DemoFiring,
  at: { amendedAt: number; by: string },
  random: Random,
): void {
  const { report } = firing
  const failed = report?.lots.find(({ losses }) => losses.length > 0)
  if (!report || !failed) return
  const lots = report.lots.map((lot) =>
    lot === failed ? { ...lot, losses: lot.losses.slice(1) } : lot,
  )
  const final: DemoReport = { ...report }
  firing.amend = {
    ...final,
    reason: random.pick(REASONS),
    revision: random.uid(at.amendedAt),
    by: at.by,
    at: new Date(at.amendedAt).toISOString(),
  }
  firing.report = { ...report, lots }
}

const REASONS = [
  'Found on the shelf the next morning.',
  'A member brought it back the same day.',
  'The crack showed only when the pot was washed.',
  'Missed on the bottom shelf.',
] as const

const REPORT_NOTES = [
  'Witness cones even from top to bottom.',
  'Bottom shelf a shade cooler.',
  'A quiet, even load.',
] as const
