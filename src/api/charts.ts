import { keepPreviousData, queryOptions } from '@tanstack/react-query'

import { getReach, getVersion, listCharts, searchSymptoms } from '#shared/api/charts.ts'
import type { ChartId } from '#shared/lib/ids.ts'
import { request } from '#src/lib/api-client.ts'
import { paths } from '#src/lib/paths.ts'

export const chartQueries = {
  lists: () => ['charts', 'list'] as const,
  details: () => ['charts', 'detail'] as const,
  list: () =>
    queryOptions({
      queryKey: chartQueries.lists(),
      queryFn: ({ signal }) => request(paths.api.charts(), listCharts.response, { signal }),
    }),
  /** The symptoms that the words bring up, best first; all of them for no words. The last answer stays until the next one is there. */
  symptoms: (words: string) =>
    queryOptions({
      queryKey: ['charts', 'symptoms', words],
      queryFn: ({ signal }) => request(paths.api.symptoms(words), searchSymptoms.response, { signal }),
      placeholderData: keepPreviousData,
    }),
  /** A published version never changes. */
  version: (chartId: ChartId, version: number) =>
    queryOptions({
      queryKey: [...chartQueries.details(), chartId, 'version', version],
      queryFn: ({ signal }) => request(paths.api.chartVersion(chartId, version), getVersion.response, { signal }),
      staleTime: Infinity,
    }),
  /** What a walk that starts in this chart pins: its published version and that of every chart in reach. */
  reach: (chartId: ChartId) =>
    queryOptions({
      queryKey: [...chartQueries.details(), chartId, 'reach'],
      queryFn: ({ signal }) => request(paths.api.chartReach(chartId), getReach.response, { signal }),
    }),
}
