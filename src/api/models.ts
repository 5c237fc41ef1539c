import { queryOptions } from '@tanstack/react-query'

import { listModels } from '#shared/api/models.ts'
import { request } from '#src/lib/api-client.ts'
import { paths } from '#src/lib/paths.ts'

export const modelQueries = {
  list: () =>
    queryOptions({
      queryKey: ['models', 'list'],
      queryFn: ({ signal }) => request(paths.api.models(), listModels.response, { signal }),
      staleTime: 5 * 60_000,
    }),
}
