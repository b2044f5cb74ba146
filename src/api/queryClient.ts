import { QueryClient } from '@tanstack/vue-query'
import { ApiError } from './http'

/** What went wrong on the way may pass; what the server decided stays decided. */
function worthAnotherTry(failures: number, error: Error): boolean {
  const decided = error instanceof ApiError && error.status >= 200 && error.status < 500
  return !decided && failures < 2
}

/** The cache of reads. Half a minute fresh: a page that is reopened at the kiln shows at once and then looks again. */
export function makeQueryClient(): QueryClient {
  return new QueryClient({
    defaultOptions: {
      queries: { retry: worthAnotherTry, staleTime: 30_000, gcTime: 10 * 60_000 },
      mutations: { retry: false },
    },
  })
}
