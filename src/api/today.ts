/** What waits for this person, and what happened. */
import { queryOptions } from '@tanstack/vue-query'
import { fill, PATHS } from '../../server/contract/paths.js'
import { todayOutput } from '../../server/contract/today.js'
import { getJson } from './http'

export function todayQuery(network: string) {
  return queryOptions({
    queryKey: ['today', network],
    queryFn: ({ signal }) =>
      getJson(fill(PATHS.today, { network }), { schema: todayOutput, signal }),
  })
}
