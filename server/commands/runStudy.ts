import { createHash } from 'node:crypto'
import type { Deps } from '../deps.js'
import type { Scope } from '../policies/index.js'
import { lastReportedDay } from '../queries/lastReportedDay.js'
import { addDays, localTime } from '../shared/zonedTime.js'
import { studyInWorker } from '../study/inWorker.js'
import { storeStudy } from './storeStudy.js'

export interface StudyRunOptions {
  /** Local days of the network that are looked at, up to today or to where its book ends. */
  windowDays?: number
  /** Per cent. */
  onProgress?: (percent: number) => void
  signal?: AbortSignal
}

/** One scope of a run; studio null is the network. */
export interface StudySummary {
  uid: string
  studioId: number | null
  firings: number
  lots: number
  pieces: number
  comparisons: number
  findings: number
}

const WINDOW_DAYS = 365
/** A book without a firing for so long has ended. */
const QUIET_DAYS = 30
/** Reported firings that a studio needs for a study of its own. */
export const LEAST_FIRINGS = 20
const CONFIDENCE = 0.95
/** Findings are reported up to this q. */
const KEEP_Q = 0.1
/** Of the bar: computing, before storing. */
const COMPUTED = 95

/** The same for a network night after night, so that the same lots give the same findings. */
function seedOf(scope: Scope): number {
  return createHash('sha256').update(scope.network.uid).digest().readUInt32BE(0)
}

/** Today, unless the book ended a while ago (an imported one, say): then its last day, lest nothing is looked at. */
async function windowEnd(scope: Scope, today: string): Promise<string> {
  const last = await lastReportedDay(scope, today)
  return last !== null && last < addDays(today, -QUIET_DAYS) ? last : today
}

/**
 * Studies the lots of a network over the window and stores the numbers: for the network, and for each
 * studio with enough firings. The computing is done in a thread of its own.
 * @returns the scopes studied, the network first
 * @throws when the lots cannot be read, or with the reason of `signal`; nothing is stored then
 */
export async function runStudy(
  scope: Scope,
  deps: Deps,
  options: StudyRunOptions = {},
): Promise<StudySummary[]> {
  const { windowDays = WINDOW_DAYS, onProgress, signal } = options
  const startedAt = deps.clock.now()
  const windowTo = await windowEnd(scope, localTime(startedAt, scope.network.timeZone).day)
  const windowFrom = addDays(windowTo, 1 - windowDays)
  const seed = seedOf(scope)
  const answer = await studyInWorker(
    {
      databaseUrl: deps.config.databaseUrl,
      networkId: scope.networkId,
      from: windowFrom,
      to: windowTo,
      leastFirings: LEAST_FIRINGS,
      seed,
      level: CONFIDENCE,
      keep: KEEP_Q,
    },
    { signal, onProgress: (percent) => onProgress?.((percent * COMPUTED) / 100) },
  )
  const parameters = {
    windowDays,
    leastFirings: LEAST_FIRINGS,
    confidence: CONFIDENCE,
    keepQ: KEEP_Q,
  }
  signal?.throwIfAborted()
  const stored = await storeStudy(
    scope,
    { windowFrom, windowTo, seed, parameters, startedAt, finishedAt: deps.clock.now() },
    answer,
    deps,
  )
  onProgress?.(100)
  return stored.map(({ uid, studioId, firings, lots, pieces, comparisons, findings }) => ({
    uid,
    studioId: studioId ?? null,
    firings,
    lots,
    pieces,
    comparisons,
    findings,
  }))
}
