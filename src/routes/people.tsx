import type { QueryClient } from '@tanstack/react-query'
import { useQuery } from '@tanstack/react-query'
import type { LoaderFunction } from 'react-router-dom'

import { peopleQueries } from '#src/api/people.ts'
import { usePerson } from '#src/api/session.ts'
import { AppShell } from '#src/components/layout/app-shell.tsx'
import { Notice } from '#src/components/ui/notice.tsx'
import { Placeholder } from '#src/components/ui/placeholder.tsx'
import { PeopleSheet } from '#src/features/people/people-sheet.tsx'
import { toWords } from '#src/lib/problem-words.ts'

export function createLoader(client: QueryClient): LoaderFunction {
  return () => {
    void client.prefetchQuery(peopleQueries.list())
    return null
  }
}

export function Component() {
  const person = usePerson()
  const people = useQuery(peopleQueries.list())
  if (person === null) return null
  return (
    <AppShell surface="People">
      {people.isPending && <Placeholder rows={4} />}
      {people.isError && (
        <Notice state="bad" title="The list could not be read" className="mt-6">
          {toWords(people.error)}
        </Notice>
      )}
      {people.isSuccess && <PeopleSheet people={people.data.people} ownId={person.id} />}
    </AppShell>
  )
}
