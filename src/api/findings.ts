/** Findings of the newest study, and one of them. */
import { queryOptions } from '@tanstack/vue-query'
import type { z } from 'zod'
import { findingOutput, findingsOutput } from '../../server/contract/findings.js'
import type { findingsInput } from '../../server/contract/findings.js'
import { fill, PATHS } from '../../server/contract/paths.js'
import { getJson, withQuery } from './http'

export type FindingsFilters = z.output<typeof findingsInput>

/** A page of the findings of a scope, surest first. */
export function findingsQuery(network: string, filters: FindingsFilters) {
  return queryOptions({
    queryKey: ['findings', network, filters],
    queryFn: ({ signal }) =>
      getJson(fill(PATHS.findings, { network }), {
        schema: findingsOutput,
        query: filters,
        signal,
      }),
    placeholderData: (before) => before,
  })
}

export function findingsCsvHref(network: string, filters: FindingsFilters): string {
  return withQuery(fill(PATHS.findingsCsv, { network }), {
    ...filters,
    page: undefined,
    pageSize: undefined,
  })
}

/** One finding with its table by level, facts and the firings behind it. */
export function findingQuery(network: string, finding: string) {
  return queryOptions({
    queryKey: ['finding', network, finding],
    queryFn: ({ signal }) =>
      getJson(fill(PATHS.finding, { network, finding }), { schema: findingOutput, signal }),
  })
}
