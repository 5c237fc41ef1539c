import type { QueryClient } from '@tanstack/react-query'
import { useQuery } from '@tanstack/react-query'
import type { LoaderFunction } from 'react-router-dom'
import { useParams } from 'react-router-dom'

import type { WalkId } from '#shared/lib/ids.ts'
import { walkIdSchema } from '#shared/lib/ids.ts'
import { useSession } from '#src/api/session.ts'
import { walkQueries } from '#src/api/walks.ts'
import { AppShell } from '#src/components/layout/app-shell.tsx'
import { Notice } from '#src/components/ui/notice.tsx'
import { Placeholder } from '#src/components/ui/placeholder.tsx'
import { WalkReview } from '#src/features/walk-review/walk-review.tsx'
import { toWords } from '#src/lib/problem-words.ts'
import { NotFound } from '#src/routes/not-found.tsx'

/** An open walk is looked at again this often. */
const pollMs = 10_000

export function createLoader(client: QueryClient): LoaderFunction {
  return ({ params }) => {
    const walkId = walkIdSchema.safeParse(params['walkId'])
    if (walkId.success) {
      void client.prefetchQuery(walkQueries.detail(walkId.data))
      void client.prefetchQuery(walkQueries.sideEvents(walkId.data))
    }
    return null
  }
}

export function Component() {
  const walkId = walkIdSchema.safeParse(useParams()['walkId'])
  return walkId.success ? <Review walkId={walkId.data} /> : <NotFound />
}

function Review({ walkId }: { readonly walkId: WalkId }) {
  const session = useSession().data
  const { data, error } = useQuery({ ...walkQueries.detail(walkId), refetchInterval: (query) => (query.state.data?.walk.isOpen === true ? pollMs : false) })
  const person = session?.person ?? null
  if (session === undefined || person === null) return null
  return (
    <AppShell surface={data?.walk.machineTitle ?? 'Walk'}>
      {data === undefined && error === null && <Placeholder words="Reading the walk" rows={6} />}
      {data === undefined && error !== null && (
        <Notice state="bad" title="This walk could not be read" className="mt-6">
          {toWords(error)}
        </Notice>
      )}
      {data !== undefined && <WalkReview detail={data} person={person} format={session.shop.numberFormat} />}
    </AppShell>
  )
}
