import * as statistics from './index.js'

/** A file of reference values: one method, many cases. */
export interface ReferenceFile {
  method: string
  reference?: string
  cases: ReferenceCase[]
}

export interface ReferenceCase {
  name: string
  source?: string
  input: unknown
  expected: unknown
  /** Times max(1, |expected|). */
  tolerance: number
  /** Times |expected|; for tail probabilities and very small limits. */
  relativeTolerance?: number
}

export interface CaseResult {
  name: string
  source: string
  passes: boolean
  /** What differs, one line a value: "lower: expected 0.1, got 0.2". */
  problems: string[]
}

export type FileResult =
  | { method: string; status: 'checked'; cases: CaseResult[] }
  /** A method that server/statistics does not have. */
  | { method: string; status: 'missing'; cases: [] }
  /** A file beside the methods: a whole screen or the truth of made data. */
  | { method: string; status: 'not a method'; cases: [] }

type Method = (input: never) => unknown

const NOT_METHODS = new Set(['cohortLevels'])

/** The methods by the name that files of reference values use. */
const METHODS: Readonly<Record<string, Method | undefined>> = {
  benjaminiHochberg: statistics.benjaminiHochberg,
  clopperPearsonInterval: statistics.clopperPearsonInterval,
  clusteredRate: statistics.clusteredRate,
  clusteredRiskRatio: statistics.clusteredRiskRatio,
  cochranArmitageTrend: statistics.cochranArmitageTrend,
  cusum: statistics.cusum,
  distributions: statistics.distributions,
  fisherExact: statistics.fisherExact,
  funnelLimits: statistics.funnelLimits,
  funnelOverdispersion: statistics.funnelOverdispersion,
  intraclassCorrelation: statistics.intraclassCorrelation,
  laneyPChart: statistics.laneyPChart,
  mantelHaenszelRiskRatio: statistics.mantelHaenszelRiskRatio,
  pChart: statistics.pChart,
  preventableLosses: statistics.preventableLosses,
  riskRatio: statistics.riskRatio,
  runSignals: statistics.runSignals,
  sampleSizeTwoProportions: statistics.sampleSizeTwoProportions,
  standardisedRatio: statistics.standardisedRatio,
  wilsonInterval: statistics.wilsonInterval,
  withinStrataTest: statistics.withinStrataTest,
}

/**
 * Runs every case of a file of reference values against the method of that name.
 *
 * Every key of `expected` must be in the result (further keys are free). A number may differ by
 * tolerance × max(1, |expected|) and, where given, by relativeTolerance × |expected|; null must be null; texts, truth
 * values and arrays must be the same, arrays in length and order.
 *
 * @param file the parsed JSON; what has no method and cases is "not a method".
 * @throws never for a failing method: a case that throws is a case that fails.
 */
export function checkReference(file: unknown): FileResult {
  if (!isReferenceFile(file)) return { method: '', status: 'not a method', cases: [] }
  const { method } = file
  if (NOT_METHODS.has(method)) return { method, status: 'not a method', cases: [] }
  const run = METHODS[method]
  if (!run) return { method, status: 'missing', cases: [] }
  return { method, status: 'checked', cases: file.cases.map((one) => checkCase(run, one)) }
}

function checkCase(run: Method, one: ReferenceCase): CaseResult {
  const problems: string[] = []
  try {
    compare('', one.expected, run(one.input as never), one, problems)
  } catch (error) {
    problems.push(`threw ${error instanceof Error ? error.message : String(error)}`)
  }
  return { name: one.name, source: one.source ?? '', passes: problems.length === 0, problems }
}

function compare(
  path: string,
  expected: unknown,
  got: unknown,
  one: ReferenceCase,
  problems: string[],
): void {
  const differs = (): void => {
    problems.push(`${path || 'result'}: expected ${JSON.stringify(expected)}, got ${shown(got)}`)
  }
  if (typeof expected === 'number') {
    if (typeof got !== 'number' || !close(expected, got, one)) differs()
  } else if (Array.isArray(expected)) {
    if (!Array.isArray(got) || got.length !== expected.length) return differs()
    expected.forEach((item, index) => compare(`${path}[${index}]`, item, got[index], one, problems))
  } else if (expected !== null && typeof expected === 'object') {
    if (got === null || typeof got !== 'object') return differs()
    for (const [key, value] of Object.entries(expected)) {
      compare(
        path ? `${path}.${key}` : key,
        value,
        (got as Record<string, unknown>)[key],
        one,
        problems,
      )
    }
  } else if (got !== expected) differs()
}

function close(
  expected: number,
  got: number,
  { tolerance, relativeTolerance }: ReferenceCase,
): boolean {
  const difference = Math.abs(got - expected)
  // Written so that NaN fails.
  if (!(difference <= tolerance * Math.max(1, Math.abs(expected)))) return false
  return relativeTolerance === undefined || difference <= relativeTolerance * Math.abs(expected)
}

function shown(value: unknown): string {
  return typeof value === 'number' ? String(value) : (JSON.stringify(value) ?? 'nothing')
}

function isReferenceFile(file: unknown): file is ReferenceFile {
  return (
    typeof file === 'object' &&
    file !== null &&
    typeof (file as ReferenceFile).method === 'string' &&
    Array.isArray((file as ReferenceFile).cases)
  )
}
