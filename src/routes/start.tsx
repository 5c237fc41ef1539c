import type { QueryClient } from '@tanstack/react-query'
import type { LoaderFunction } from 'react-router-dom'
import { useParams, useSearchParams } from 'react-router-dom'

import { chartIdSchema, nodeIdSchema } from '#shared/lib/ids.ts'
import { chartQueries } from '#src/api/charts.ts'
import { modelQueries } from '#src/api/models.ts'
import { usePerson } from '#src/api/session.ts'
import { AppShell } from '#src/components/layout/app-shell.tsx'
import { StartPage } from '#src/features/bench/start-page.tsx'
import { NotFound } from '#src/routes/not-found.tsx'

export function createLoader(client: QueryClient): LoaderFunction {
  return ({ params }) => {
    const chartId = chartIdSchema.safeParse(params['chartId'])
    if (chartId.success) void client.prefetchQuery(chartQueries.reach(chartId.data))
    void client.prefetchQuery(modelQueries.list())
    return null
  }
}

export function Component() {
  const person = usePerson()
  const chartId = chartIdSchema.safeParse(useParams()['chartId'])
  const [search] = useSearchParams()
  const startId = nodeIdSchema.safeParse(search.get('at'))
  if (person === null) return null
  if (!chartId.success) return <NotFound />
  return (
    <AppShell surface="Start a walk" mode="bench">
      <StartPage chartId={chartId.data} startId={startId.success ? startId.data : null} person={person} />
    </AppShell>
  )
}
