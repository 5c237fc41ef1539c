import type { QueryClient } from '@tanstack/react-query'
import { useQuery } from '@tanstack/react-query'
import { useState } from 'react'
import type { LoaderFunction } from 'react-router-dom'
import { useParams } from 'react-router-dom'

import { peopleQueries } from '#src/api/people.ts'
import { QuietPage } from '#src/components/layout/quiet-page.tsx'
import { ButtonLink } from '#src/components/ui/button.tsx'
import { Notice } from '#src/components/ui/notice.tsx'
import { Placeholder } from '#src/components/ui/placeholder.tsx'
import { TextLink } from '#src/components/ui/text-link.tsx'
import { AcceptLinkForm } from '#src/features/account/accept-link-form.tsx'
import { formatMoment } from '#src/lib/format.ts'
import { paths } from '#src/lib/paths.ts'
import { toWords } from '#src/lib/problem-words.ts'

export function createLoader(client: QueryClient): LoaderFunction {
  return ({ params }) => {
    void client.prefetchQuery(peopleQueries.link(params['token'] ?? ''))
    return null
  }
}

/** Where a one-time link leads: the person sets a password, once, and then signs in with it. */
export function Component() {
  const { token = '' } = useParams()
  const link = useQuery(peopleQueries.link(token))
  const [isDone, setDone] = useState(false)

  if (isDone) {
    return (
      <QuietPage over="Pullcord" title="The password is set" knot="cause">
        <p>The link is used up. Sign in with your e-mail and the new password.</p>
        <p className="mt-6">
          <ButtonLink look="primary" size="large" to={paths.signIn()}>
            Sign in
          </ButtonLink>
        </p>
      </QuietPage>
    )
  }
  if (link.isPending) {
    return (
      <QuietPage over="Pullcord" title="Set a password">
        <Placeholder words="Looking at the link" />
      </QuietPage>
    )
  }
  if (link.isError) {
    return (
      <QuietPage over="Pullcord" title="This link does not work" knot="hold">
        <Notice state="bad" title="No password can be set with it">
          {toWords(link.error)}
        </Notice>
        <p className="mt-6">
          <TextLink to={paths.signIn()}>To the sign-in page</TextLink>
        </p>
      </QuietPage>
    )
  }
  const { purpose, name, email, expiresAt } = link.data
  return (
    <QuietPage over={purpose === 'invite' ? `Welcome, ${name}` : name} title={purpose === 'invite' ? 'Set your password' : 'Set a new password'}>
      <p className="mb-6">
        You will sign in as <strong className="font-semibold">{email}</strong>. The link works once, until {formatMoment(expiresAt)}.
      </p>
      <AcceptLinkForm token={token} email={email} onDone={() => setDone(true)} />
    </QuietPage>
  )
}
