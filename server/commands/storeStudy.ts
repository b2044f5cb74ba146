import type { Transaction } from 'sequelize'
import { v7 } from 'uuid'
import type { FindingLevelRow } from '../contract/findings.js'
import { inTransaction } from '../database/inTransaction.js'
import type { Deps } from '../deps.js'
import { Finding, Study } from '../models/index.js'
import type { Scope } from '../policies/index.js'
import { firstSeen } from '../queries/firstSeen.js'
import { levelNames } from '../queries/levelNames.js'
import type { LevelNames } from '../queries/levelNames.js'
import type { ScopeResult, StudyAnswer } from '../study/inWorker.js'
import type { Finding as Found, LevelLine } from '../study/index.js'
import { VERSION } from '../version.js'

/** What every study of one run has in common. */
export interface StudyRun {
  windowFrom: string
  windowTo: string
  seed: number
  parameters: Record<string, unknown>
  startedAt: Date
  finishedAt: Date
}

/** A row of a stored table; `uids` are those of all its levels (a pair has two), by which readers are checked. */
export interface StoredLevelRow extends FindingLevelRow {
  uids: string[]
}

const FEW_FIRINGS = 5

/** Stores the numbers of every scope with their findings in one transaction: all of the night's, or none. */
export async function storeStudy(
  scope: Scope,
  run: StudyRun,
  answer: StudyAnswer,
  deps: Deps,
): Promise<Study[]> {
  const names = await levelNames(scope)
  return inTransaction(deps.sequelize, async (transaction) => {
    const stored: Study[] = []
    for (const result of answer.scopes) {
      stored.push(
        await storeScope(
          scope,
          { run, watermark: answer.watermark, result, names },
          deps,
          transaction,
        ),
      )
    }
    return stored
  })
}

interface OfScope {
  run: StudyRun
  watermark: number
  result: ScopeResult
  names: LevelNames
}

async function storeScope(
  scope: Scope,
  { run, watermark, result, names }: OfScope,
  deps: Deps,
  transaction: Transaction,
): Promise<Study> {
  const { networkId } = scope
  const { studioId } = result
  const { firings, lots, pieces, comparisons, findings } = result.result
  const study = await Study.create(
    {
      ...run,
      networkId,
      uid: v7(),
      studioId,
      firings,
      lots,
      pieces,
      comparisons,
      findings: findings.length,
      watermark,
      codeVersion: VERSION,
    },
    { transaction },
  )
  const identities = findings.map((finding) => identityOf(studioId, finding))
  const seen = await firstSeen(
    scope,
    { studioId, identities },
    { sequelize: deps.sequelize, transaction },
  )
  await Finding.bulkCreate(
    findings.map((finding, index) => {
      const identity = identities[index] ?? ''
      return {
        ...columnsOf(finding, names),
        networkId,
        uid: v7(),
        studyId: study.id,
        studioId,
        identity,
        firstSeenOn: seen.get(identity) ?? run.windowTo,
      }
    }),
    { transaction },
  )
  return study
}

/** Where, which fault, which level: the same from night to night. */
export function identityOf(
  studioId: number | null,
  { fault, factors, levels }: Pick<Found, 'fault' | 'factors' | 'levels'>,
): string {
  const where = studioId === null ? 'network' : `studio=${studioId}`
  return [where, fault, ...factors.map((factor, index) => `${factor}=${levels[index]}`)].join('|')
}

function columnsOf(finding: Found, names: LevelNames) {
  const [factor = '', pairFactor = null] = finding.factors
  const [level, pairLevel] = finding.levels.map(Number)
  return {
    fault: finding.fault,
    factor,
    levelId: level ?? 0,
    pairFactor,
    pairLevelId: pairLevel ?? null,
    comparison:
      finding.comparison === 'within-firings'
        ? ('within-firing' as const)
        : ('between-firings' as const),
    ratio: finding.ratio,
    lowerLimit: finding.lower,
    upperLimit: finding.upper,
    pValue: finding.pValue,
    qValue: finding.qValue,
    exposedUnits: finding.exposedUnits,
    exposedEvents: finding.exposedEvents,
    unexposedUnits: finding.unexposedUnits,
    unexposedEvents: finding.unexposedEvents,
    mixedStrata: finding.mixedStrata,
    informativeStrata: finding.informativeFirings,
    recordedShare: finding.coverage,
    verdict: finding.verdict,
    levels: tableOf(finding, names),
  }
}

/** The finding's own level first, then by rate. */
function tableOf(finding: Found, names: LevelNames): StoredLevelRow[] {
  const own = finding.levels.join('|')
  return finding.table
    .map((line) => ({ line, exposed: line.level.join('|') === own }))
    .sort(
      (a, b) => Number(b.exposed) - Number(a.exposed) || (b.line.rate ?? 0) - (a.line.rate ?? 0),
    )
    .map(({ line, exposed }) => rowOf(line, exposed, finding.factors, names))
}

function rowOf(
  line: LevelLine,
  exposed: boolean,
  factors: readonly string[],
  names: LevelNames,
): StoredLevelRow {
  const levels = line.level.flatMap((key, index) => names(factors[index] ?? '', Number(key)) ?? [])
  const { events, units, firings, rate, lower, upper } = line
  const note =
    units === 0 ? 'none' : firings < 2 ? 'one-firing' : firings < FEW_FIRINGS ? 'few-firings' : 'ok'
  return {
    level: {
      uid: levels.length === 1 ? (levels[0]?.uid ?? null) : null,
      name: levels.map(({ name }) => name).join(' on '),
    },
    exposed,
    rate: {
      events,
      pieces: units,
      firings,
      rate: note === 'one-firing' ? null : rate,
      lower,
      upper,
      note,
    },
    uids: levels.map(({ uid }) => uid),
  }
}
