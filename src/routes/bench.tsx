import type { QueryClient } from '@tanstack/react-query'
import type { LoaderFunction } from 'react-router-dom'

import { chartQueries } from '#src/api/charts.ts'
import { usePerson } from '#src/api/session.ts'
import { useUnsentCount } from '#src/api/walk-logs.ts'
import { walkQueries } from '#src/api/walks.ts'
import { AppShell } from '#src/components/layout/app-shell.tsx'
import { StateMark } from '#src/components/ui/state-mark.tsx'
import { BenchPage } from '#src/features/bench/bench-page.tsx'

export function createLoader(client: QueryClient): LoaderFunction {
  return () => {
    void client.prefetchQuery(walkQueries.list({ scope: 'mine', state: 'open' }))
    void client.prefetchQuery(chartQueries.symptoms(''))
    void client.prefetchQuery(walkQueries.list({ scope: 'mine', state: 'ended' }))
    return null
  }
}

export function Component() {
  const person = usePerson()
  const unsent = useUnsentCount()
  if (person === null) return null
  return (
    <AppShell surface="Bench" mode="bench" saved={unsent > 0 && <StateMark state="care" look="caps">{`${unsent} not sent yet`}</StateMark>}>
      <BenchPage person={person} />
    </AppShell>
  )
}
