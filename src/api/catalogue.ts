/** Studios, kilns and levels of a network: what the load sheet and the filters choose from. */
import { queryOptions } from '@tanstack/vue-query'
import { catalogueOutput } from '../../server/contract/catalogue.js'
import { fill, PATHS } from '../../server/contract/paths.js'
import { getJson } from './http'

/** All of it in one answer; it changes rarely, so it stays fresh for some minutes. */
export function catalogueQuery(network: string) {
  return queryOptions({
    queryKey: ['catalogue', network],
    queryFn: ({ signal }) =>
      getJson(fill(PATHS.catalogue, { network }), { schema: catalogueOutput, signal }),
    staleTime: 5 * 60_000,
  })
}
