import { isRouteErrorResponse, useRouteError } from 'react-router-dom'

import { QuietPage } from '#src/components/layout/quiet-page.tsx'
import { Button } from '#src/components/ui/button.tsx'
import { TextLink } from '#src/components/ui/text-link.tsx'
import { ProblemError } from '#src/lib/api-client.ts'
import { paths } from '#src/lib/paths.ts'

import { NotFound } from './not-found.tsx'

/** The last resort for a page that could not be drawn: what happened, what is safe, what to do. */
export function RootError() {
  const error = useRouteError()
  if (isRouteErrorResponse(error) && error.status === 404) return <NotFound />
  if (error instanceof ProblemError && error.status === 404) return <NotFound />
  const isSilence = error instanceof ProblemError && error.status === 0
  return (
    <QuietPage over="Pullcord" title={isSilence ? 'The server does not answer' : 'This page could not be shown'} knot="escalate">
      <p role="alert" className="max-w-words">
        {error instanceof ProblemError && !isSilence ? error.message : 'What was recorded before is safe on the server.'}{' '}
        {isSilence
          ? 'See whether it runs and whether this device is in its network, then try again.'
          : 'Load the page again; if it stays like this, tell whoever runs the server.'}
      </p>
      <p className="mt-6 flex flex-wrap items-center gap-4">
        <Button look="primary" onClick={() => window.location.reload()}>
          Load the page again
        </Button>
        <TextLink to={paths.bench()} reloadDocument>
          To the bench
        </TextLink>
      </p>
    </QuietPage>
  )
}
