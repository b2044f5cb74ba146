import { v7 } from 'uuid'
import { fixedClock } from '../../server/clock.js'
import { saveRevision } from '../../server/commands/saveRevision.js'
import type { PackBody, ReportBody, RevisionInput } from '../../server/contract/firings.js'
import { revisionInput } from '../../server/contract/firings.js'
import type { Deps } from '../../server/deps.js'
import { Firing } from '../../server/models/index.js'
import type { Kiln, Level } from '../../server/models/index.js'
import type { Scope } from '../../server/policies/index.js'
import type { FailedOutcome } from '../../server/shared/counts.js'
import { testDeps } from './deps.js'
import { makeKiln, makeScope, networkOf } from './factories.js'

/** The days of tests' firings lie before it, whatever the machine's clock says. */
const NOW = '2026-12-31T12:00:00Z'

/** Levels of a lot by factor, as rows of the factories. */
export type LevelsOver = Record<string, Level | readonly Level[]>

export interface LotOver {
  uid?: string
  pieces: number
  levels?: LevelsOver
  refireCount?: number
  maker?: string | null
  note?: string | null
  glazeOverlap?: boolean | null
  turnedAway?: { fault?: string; pieces: number }[]
  notLookedAt?: number
  losses?: LossOver[]
}

export interface LossOver {
  fault?: string
  also?: string[]
  outcome?: FailedOutcome
  pieces: number
  neighbour?: boolean
  features?: ReportBody['lots'][number]['losses'][number]['features']
}

const uidsOf = (level: Level | readonly Level[]): string | string[] =>
  Array.isArray(level) ? level.map(({ uid }: Level) => uid) : (level as Level).uid

/** A lot of a load as the client sends it. */
export function lotBody({
  pieces,
  uid = v7(),
  levels = {},
  refireCount = 0,
  maker = null,
  note = null,
  glazeOverlap = null,
}: LotOver): PackBody['lots'][number] {
  return {
    uid,
    pieces,
    levels: Object.fromEntries(
      Object.entries(levels).map(([factor, level]) => [factor, uidsOf(level)]),
    ),
    glazeOverlap,
    refireCount,
    maker,
    note,
  }
}

export function lossBody({
  fault = 's-crack',
  also = [],
  outcome = 'waster',
  pieces,
  neighbour = false,
  features = {},
}: LossOver): ReportBody['lots'][number]['losses'][number] {
  return { uid: v7(), fault, also, outcome, pieces, neighbour, features }
}

export interface LoadOver extends Partial<
  Omit<PackBody, 'kiln' | 'lots' | 'pieces' | 'rest' | 'turnedAway'>
> {
  kiln: { uid: string }
  /** Without it the lots are the whole load. */
  pieces?: number
  lots?: LotOver[]
  /** What happened to the rest. */
  rest?: Omit<LotOver, 'pieces' | 'levels'>
  report?: Partial<Omit<ReportBody, 'lots'>>
}

/** Load and report of a firing, with everything that is left out filled in: a glaze firing of 2026-03-02. */
export function loadBodies({
  kiln,
  pieces,
  lots = [],
  rest = {},
  report = {},
  ...over
}: LoadOver): { pack: PackBody; report: ReportBody } {
  const described = lots.reduce((sum, lot) => sum + lot.pieces, 0)
  const parts = [...lots, { ...rest, pieces: 0 }].map((lot) => ({ lot, body: lotBody(lot) }))
  return {
    pack: {
      kind: 'glaze',
      programme: null,
      cone: null,
      localDate: '2026-03-02',
      kilnNumber: null,
      about: false,
      levels: {},
      note: null,
      ...over,
      kiln: kiln.uid,
      pieces: pieces ?? Math.max(1, described),
      rest: parts.at(-1)?.body.uid ?? '',
      lots: parts.slice(0, -1).map(({ body }) => body),
      turnedAway: parts.flatMap(({ lot, body }) =>
        (lot.turnedAway ?? []).map((away) => ({
          uid: v7(),
          lot: body.uid,
          fault: 'crack-not-named',
          ...away,
        })),
      ),
    },
    report: {
      openedAt: null,
      openingTemperatureC: null,
      wholeLoadFailed: null,
      note: null,
      ...report,
      lots: parts.map(({ lot, body }) => ({
        lot: body.uid,
        notLookedAt: lot.notLookedAt ?? 0,
        losses: (lot.losses ?? []).map(lossBody),
      })),
    },
  }
}

export interface MakeFiring extends Omit<LoadOver, 'kiln'> {
  kiln?: Kiln
  /** `packed`: nothing is reported yet. */
  status?: 'packed' | 'reported'
  scope?: Scope
  deps?: Deps
}

/**
 * A firing that was packed and (unless `status` says otherwise) reported through the command, by the
 * system unless a scope is given. Without a kiln one is made; without counts it is one lot of 10.
 */
export async function makeFiring({
  kiln,
  status = 'reported',
  scope,
  deps,
  ...over
}: MakeFiring = {}) {
  const home = kiln ?? (await makeKiln())
  const as = scope ?? (await makeScope(await networkOf(home)))
  const lots = over.pieces === undefined ? [{ pieces: 10 }] : []
  const bodies = loadBodies({ kiln: home, lots, ...over })
  const uid = v7()
  const send = async (input: RevisionInput): Promise<void> =>
    saveRevision(
      as,
      { firing: uid, revision: v7(), input: revisionInput.parse(input) },
      deps ?? (await testDeps({ clock: fixedClock(NOW) })),
    )
  await send({ kind: 'pack', base: 0, deviceTime: null, pack: bodies.pack })
  if (status === 'reported')
    await send({ kind: 'report', base: 1, deviceTime: null, report: bodies.report })
  const firing = await Firing.findOne({
    where: { networkId: home.networkId, uid },
    rejectOnEmpty: true,
  })
  return { firing, kiln: home, ...bodies }
}
