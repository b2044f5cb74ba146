export interface Count {
  kind: string
  passed: number
  failed: number
  skipped: number
}

export declare function vitestCounts(report: {
  testResults?: { name: string; status: string; assertionResults: { status: string }[] }[]
}): Count[]

export declare function playwrightCount(report: {
  stats?: { expected: number; unexpected: number; flaky: number; skipped: number }
  errors?: unknown[]
}): Count

export declare function requireTests(kinds: string[], counts: Count[]): Count[]

export declare function total(counts: Count[]): Omit<Count, 'kind'>
