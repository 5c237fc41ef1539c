import type { QueryClient } from '@tanstack/react-query'
import { useQuery } from '@tanstack/react-query'
import type { LoaderFunction } from 'react-router-dom'
import { useParams } from 'react-router-dom'

import type { ChartId } from '#shared/lib/ids.ts'
import { chartIdSchema } from '#shared/lib/ids.ts'
import { chartQueries } from '#src/api/charts.ts'
import { useSession } from '#src/api/session.ts'
import { AppShell } from '#src/components/layout/app-shell.tsx'
import { EmptyState } from '#src/components/ui/empty-state.tsx'
import { Notice } from '#src/components/ui/notice.tsx'
import { Placeholder } from '#src/components/ui/placeholder.tsx'
import { TextLink } from '#src/components/ui/text-link.tsx'
import { ChartSheet } from '#src/features/charts/chart-sheet.tsx'
import { paths } from '#src/lib/paths.ts'
import { toWords } from '#src/lib/problem-words.ts'
import { NotFound } from '#src/routes/not-found.tsx'

export function createLoader(client: QueryClient): LoaderFunction {
  return () => {
    void client.prefetchQuery(chartQueries.list())
    return null
  }
}

export function Component() {
  const chartId = chartIdSchema.safeParse(useParams()['chartId'])
  return chartId.success ? <Chart chartId={chartId.data} /> : <NotFound />
}

function Chart({ chartId }: { readonly chartId: ChartId }) {
  const session = useSession().data
  const { data, error } = useQuery(chartQueries.list())
  const row = data?.charts.find(({ id }) => id === chartId)
  if (session === undefined) return null
  return (
    <AppShell surface={row?.title ?? 'Chart'}>
      {data === undefined && error === null && <Placeholder words="Reading the chart" rows={6} />}
      {error !== null && (
        <Notice state="bad" title="The chart could not be read" className="mt-6">
          {toWords(error)}
        </Notice>
      )}
      {data !== undefined && row?.version == null && (
        <EmptyState title="This chart is not on the bench" act={<TextLink to={paths.charts()}>All charts</TextLink>}>
          It has no published version, or there is no such chart.
        </EmptyState>
      )}
      {row != null && row.version !== null && <ChartSheet chartId={chartId} version={row.version} format={session.shop.numberFormat} />}
    </AppShell>
  )
}
