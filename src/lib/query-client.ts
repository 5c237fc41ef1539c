import { QueryClient } from '@tanstack/react-query'

import { ProblemError } from '#src/lib/api-client.ts'

const mostTries = 2

/** A refusal is an answer and is not asked again; only silence and a stumbling server are. */
function shouldRetry(failures: number, error: Error): boolean {
  if (failures >= mostTries) return false
  return !(error instanceof ProblemError) || error.status === 0 || error.status >= 500
}

export function createQueryClient(): QueryClient {
  return new QueryClient({
    defaultOptions: {
      // The server may stand in the shop's own network: the browser's idea of being online says nothing about it.
      queries: { retry: shouldRetry, staleTime: 15_000, networkMode: 'always' },
      mutations: { retry: false, networkMode: 'always' },
    },
  })
}
