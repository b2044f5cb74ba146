/** Firings: the list, one of them, and what is written on it. */
import { queryOptions } from '@tanstack/vue-query'
import type { z } from 'zod'
import { firingOutput, firingsOutput, lastFiringOutput } from '../../server/contract/firings.js'
import type {
  firingsInput,
  FiringDetail,
  RevisionInput,
  voidInput,
} from '../../server/contract/firings.js'
import { fill, PATHS } from '../../server/contract/paths.js'
import { getJson, sendJson, withQuery } from './http'

export type FiringsFilters = z.output<typeof firingsInput>

/** A page of the list. */
export function firingsQuery(network: string, filters: FiringsFilters) {
  return queryOptions({
    queryKey: ['firings', network, filters],
    queryFn: ({ signal }) =>
      getJson(fill(PATHS.firings, { network }), { schema: firingsOutput, query: filters, signal }),
    placeholderData: (before) => before,
  })
}

/** How many firings pass a filter, without their rows. */
export function firingsTotalQuery(network: string, filters: Partial<FiringsFilters>) {
  return queryOptions({
    queryKey: ['firings', network, 'total', filters],
    queryFn: async ({ signal }) =>
      (
        await getJson(fill(PATHS.firings, { network }), {
          schema: firingsOutput,
          query: { ...filters, pageSize: 1 },
          signal,
        })
      ).total,
  })
}

/** The list as a file, whole, whatever page is shown. */
export function firingsCsvHref(network: string, filters: FiringsFilters): string {
  return withQuery(fill(PATHS.firingsCsv, { network }), {
    ...filters,
    page: undefined,
    pageSize: undefined,
  })
}

/** One firing whole: lots, losses, revisions. */
export function firingQuery(network: string, firing: string) {
  return queryOptions({
    queryKey: ['firing', network, firing],
    queryFn: ({ signal }) => getFiring(network, firing, signal),
  })
}

export function getFiring(
  network: string,
  firing: string,
  signal?: AbortSignal,
): Promise<FiringDetail> {
  return getJson(fill(PATHS.firing, { network, firing }), { schema: firingOutput, signal })
}

/** The load to copy for "as last time", or null. */
export function lastFiringQuery(network: string, kiln: string, kind: string) {
  return queryOptions({
    queryKey: ['last-firing', network, kiln, kind],
    queryFn: async ({ signal }) =>
      (
        await getJson(fill(PATHS.lastFiring, { network }), {
          schema: lastFiringOutput,
          query: { kiln, kind },
          signal,
        })
      ).firing,
  })
}

/** Writes a revision: sent twice with the same uid and body it is one. @throws {ApiError} `stale`, `different-body`, `invalid` ... */
export function sendRevision(
  network: string,
  firing: string,
  revision: string,
  body: RevisionInput,
): Promise<FiringDetail> {
  return sendJson(fill(PATHS.firingRevision, { network, firing, revision }), {
    method: 'PUT',
    body,
    schema: firingOutput,
  })
}

export function voidFiring(
  network: string,
  firing: string,
  body: z.input<typeof voidInput>,
): Promise<FiringDetail> {
  return sendJson(fill(PATHS.firingVoid, { network, firing }), {
    method: 'POST',
    body,
    schema: firingOutput,
  })
}
