import type { QueryClient } from '@tanstack/react-query'
import type { LoaderFunction } from 'react-router-dom'

import { chartQueries } from '#src/api/charts.ts'
import { AppShell } from '#src/components/layout/app-shell.tsx'
import { ChartsPage } from '#src/features/charts/charts-page.tsx'

export function createLoader(client: QueryClient): LoaderFunction {
  return () => {
    void client.prefetchQuery(chartQueries.list())
    return null
  }
}

export function Component() {
  return (
    <AppShell surface="Charts">
      <ChartsPage />
    </AppShell>
  )
}
