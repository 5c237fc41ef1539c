import type { QueryClient } from '@tanstack/react-query'
import { queryOptions, useMutation, useQueryClient } from '@tanstack/react-query'
import type { z } from 'zod'

import type { Person } from '#shared/api/people.ts'
import { addPerson, createLink, getLink, listActivePeople, listPeople, updatePerson, useLink } from '#shared/api/people.ts'
import type { PersonId } from '#shared/lib/ids.ts'
import { request } from '#src/lib/api-client.ts'
import { paths } from '#src/lib/paths.ts'

export const peopleQueries = {
  lists: () => ['people', 'list'] as const,
  list: () =>
    queryOptions({
      queryKey: peopleQueries.lists(),
      queryFn: ({ signal }) => request(paths.api.people(), listPeople.response, { signal }),
    }),
  /** Who can be handed something; name and role alone, so that everybody may read it. */
  active: () =>
    queryOptions({
      queryKey: ['people', 'active'],
      queryFn: ({ signal }) => request(paths.api.activePeople(), listActivePeople.response, { signal }),
    }),
  link: (token: string) =>
    queryOptions({
      queryKey: ['people', 'link', token],
      queryFn: ({ signal }) => request(paths.api.link(token), getLink.response, { signal }),
      retry: false,
      retryOnMount: false,
      // Long enough for the page to come to what its loader asked for; a used link is then asked about anew.
      gcTime: 5_000,
    }),
}

function showPerson(client: QueryClient, person: Person): void {
  client.setQueryData(peopleQueries.list().queryKey, (old) =>
    old === undefined
      ? old
      : { people: old.people.some(({ id }) => id === person.id) ? old.people.map((each) => (each.id === person.id ? person : each)) : [...old.people, person] },
  )
}

function usePersonMutation<Input, Answer extends { readonly person: Person }>(mutationFn: (input: Input) => Promise<Answer>) {
  const client = useQueryClient()
  return useMutation({
    mutationFn,
    onSuccess: ({ person }) => {
      showPerson(client, person)
      void client.invalidateQueries({ queryKey: peopleQueries.active().queryKey })
      return client.invalidateQueries({ queryKey: peopleQueries.lists() })
    },
  })
}

export function useAddPerson() {
  return usePersonMutation((body: z.infer<typeof addPerson.body>) => request(paths.api.people(), addPerson.response, { method: 'POST', body }))
}

export function useUpdatePerson() {
  return usePersonMutation(({ id, ...body }: { readonly id: PersonId } & z.input<typeof updatePerson.body>) =>
    request(paths.api.person(id), updatePerson.response, { method: 'PATCH', body }),
  )
}

export function useCreateLink() {
  return usePersonMutation((id: PersonId) => request(paths.api.personLink(id), createLink.response, { method: 'POST' }))
}

/** Sets the password behind a one-time link. */
export function useAcceptLink(token: string) {
  return useMutation({
    mutationFn: (body: { password: string }) => request(paths.api.link(token), useLink.response, { method: 'POST', body }),
  })
}
