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
import { TextLink } from '#src/components/ui/text-link.tsx'
import { WalkPlayer } from '#src/features/walk-player/walk-player.tsx'
import { paths } from '#src/lib/paths.ts'
import { toWords } from '#src/lib/problem-words.ts'
import { NotFound } from '#src/routes/not-found.tsx'

export function createLoader(client: QueryClient): LoaderFunction {
  return ({ params }) => {
    const walkId = walkIdSchema.safeParse(params['walkId'])
    if (walkId.success) void client.prefetchQuery(walkQueries.detail(walkId.data))
    return null
  }
}

export function Component() {
  const walkId = walkIdSchema.safeParse(useParams()['walkId'])
  return walkId.success ? <Walk walkId={walkId.data} /> : <NotFound />
}

function Walk({ walkId }: { readonly walkId: WalkId }) {
  const session = useSession().data
  const { data, error, refetch } = useQuery(walkQueries.detail(walkId))
  const person = session?.person ?? null
  if (session === undefined || person === null) return null
  if (data !== undefined) return <WalkPlayer key={`${person.id} ${walkId}`} detail={data} person={person} format={session.shop.numberFormat} />
  return (
    <AppShell surface="Walk" mode="bench">
      {error === null ? (
        <Placeholder words="Reading the walk" />
      ) : (
        <Notice state="bad" title="This walk could not be read" role="alert" className="mt-6">
          <p>{toWords(error)}</p>
          <p className="mt-3 flex flex-wrap gap-x-6">
            <button type="button" onClick={() => void refetch()} className="min-h-14 text-cord underline underline-offset-4">
              Try again
            </button>
            <TextLink to={paths.bench()} className="flex min-h-14 items-center">
              To the bench
            </TextLink>
          </p>
        </Notice>
      )}
    </AppShell>
  )
}
