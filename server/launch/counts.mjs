/** Reads what the test programs report. Pure. */

/** @typedef {{ kind: string, passed: number, failed: number, skipped: number }} Count */

/** The folder below tests/ names the kind. */
const kindOf = (file) => /(?:^|\/)tests\/([a-z0-9]+)\//.exec(file)?.[1] ?? 'other'

/**
 * @param {{ testResults?: { name: string, status: string, assertionResults: { status: string }[] }[] }} report
 *   of Vitest's JSON reporter; a file that could not be loaded counts as one failed test
 * @returns {Count[]} one a kind, in the order of appearance
 */
export function vitestCounts(report) {
  const counts = new Map()
  for (const file of report.testResults ?? []) {
    const kind = kindOf(file.name)
    const count = counts.get(kind) ?? { kind, passed: 0, failed: 0, skipped: 0 }
    counts.set(kind, count)
    const failedBefore = count.failed
    for (const { status } of file.assertionResults) {
      if (status === 'passed') count.passed += 1
      else if (status === 'failed') count.failed += 1
      else count.skipped += 1
    }
    if (file.status === 'failed' && count.failed === failedBefore) count.failed += 1
  }
  return [...counts.values()]
}

/**
 * @param {{ stats?: { expected: number, unexpected: number, flaky: number, skipped: number }, errors?: unknown[] }} report
 *   of Playwright's JSON reporter; a test that passed only when repeated counts as failed
 * @returns {Count}
 */
export function playwrightCount(report) {
  const { expected = 0, unexpected = 0, flaky = 0, skipped = 0 } = report.stats ?? {}
  const failed = unexpected + flaky
  const broken = failed === 0 && (report.errors?.length ?? 0) > 0 ? 1 : 0
  return { kind: 'e2e', passed: expected, failed: failed + broken, skipped }
}

/** A kind that was asked for must have run something; one that ran nothing is a failure. */
export function requireTests(kinds, counts) {
  return kinds.map((kind) => {
    const count = counts.find((one) => one.kind === kind) ?? {
      kind,
      passed: 0,
      failed: 0,
      skipped: 0,
    }
    return count.passed + count.failed > 0 ? count : { ...count, failed: 1 }
  })
}

/** @param {Count[]} counts */
export function total(counts) {
  const sum = (key) => counts.reduce((so, count) => so + count[key], 0)
  return { passed: sum('passed'), failed: sum('failed'), skipped: sum('skipped') }
}
