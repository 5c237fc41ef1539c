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
  if (isLostModule(error)) return <LostModule />
  const isSilence = error instanceof ProblemError && error.status === 0
  return (
    <QuietPage over="Pullcord" title={isSilence ? 'The server does not answer' : 'This page could not be shown'} knot="escalate">
      <p role="alert" className="max-w-words">
        {error instanceof ProblemError && !isSilence ? error.message : 'What was recorded before is safe on the server.'}{' '}
        {isSilence
          ? 'See whether it runs and whether this device is in its network, then try again.'
          : 'Load the page again; if it stays like this, tell whoever runs the server.'}
      </p>
      <WaysOn />
    </QuietPage>
  )
}

/** A page comes as a file of its own; the browsers tell a file that did not come in words only. */
function isLostModule(error: unknown): boolean {
  return error instanceof TypeError && /module|dynamically imported/i.test(error.message)
}

function LostModule() {
  return (
    <QuietPage over="Pullcord" title="This page could not be fetched" knot="escalate">
      <p role="alert" className="max-w-words">
        The server does not answer, or it was renewed while this page stood open. What was recorded before is safe on the server. See whether it runs and
        whether this device is in its network, then load the page again.
      </p>
      <WaysOn />
    </QuietPage>
  )
}

function WaysOn() {
  return (
    <p className="mt-6 flex flex-wrap items-center gap-4">
      <Button look="primary" onClick={() => window.location.reload()}>
        Load the page again
      </Button>
      <TextLink to={paths.bench()} reloadDocument>
        To the bench
      </TextLink>
    </p>
  )
}
