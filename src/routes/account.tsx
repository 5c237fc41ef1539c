import type { QueryClient } from '@tanstack/react-query'
import { useQuery } from '@tanstack/react-query'
import type { LoaderFunction } from 'react-router-dom'

import { sessionQueries, usePerson } from '#src/api/session.ts'
import { AppShell } from '#src/components/layout/app-shell.tsx'
import { roleWords } from '#src/components/layout/role-words.ts'
import { Notice } from '#src/components/ui/notice.tsx'
import { Placeholder } from '#src/components/ui/placeholder.tsx'
import { RuledPairs, RuledSection } from '#src/components/ui/ruled.tsx'
import { ChangePasswordForm } from '#src/features/account/change-password-form.tsx'
import { SessionList } from '#src/features/account/session-list.tsx'
import { toWords } from '#src/lib/problem-words.ts'

export function createLoader(client: QueryClient): LoaderFunction {
  return () => {
    void client.prefetchQuery(sessionQueries.own())
    return null
  }
}

export function Component() {
  const person = usePerson()
  const sessions = useQuery(sessionQueries.own())
  if (person === null) return null
  return (
    <AppShell surface="Your account">
      <div className="grid max-w-sheet gap-12 pt-8">
        <RuledPairs
          pairs={[
            { name: 'Name', value: person.name },
            { name: 'E-mail', value: person.email },
            { name: 'Role', value: roleWords[person.role] },
          ]}
        />
        <RuledSection title="Password">
          <div className="pt-4">
            <ChangePasswordForm email={person.email} />
          </div>
        </RuledSection>
        <RuledSection title="Where you are signed in">
          {sessions.isPending && <Placeholder />}
          {sessions.isError && (
            <Notice state="bad" title="The list could not be read" className="mt-4">
              {toWords(sessions.error)}
            </Notice>
          )}
          {sessions.isSuccess && <SessionList sessions={sessions.data.sessions} />}
        </RuledSection>
      </div>
    </AppShell>
  )
}
