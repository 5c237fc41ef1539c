import type { QueryClient } from '@tanstack/react-query'
import { queryOptions, useMutation, useQuery, useQueryClient } from '@tanstack/react-query'
import { useEffect } from 'react'

import type { SignedIn, Session } from '#shared/api/session.ts'
import { changePassword, createFirstOwner, endSession, getSession, listSessions, signIn, signOut } from '#shared/api/session.ts'
import { request, setUnauthorizedHandler } from '#src/lib/api-client.ts'
import { paths } from '#src/lib/paths.ts'

export const sessionQueries = {
  current: () =>
    queryOptions({
      queryKey: ['session', 'current'],
      queryFn: ({ signal }) => request(paths.api.session(), getSession.response, { signal }),
      staleTime: 60_000,
    }),
  own: () =>
    queryOptions({
      queryKey: ['session', 'own'],
      queryFn: ({ signal }) => request(paths.api.ownSessions(), listSessions.response, { signal }),
    }),
}

/** Another person, or nobody: what the last one saw is not the next one's to see. */
function replaceSession(client: QueryClient, session: Session): void {
  client.removeQueries({ predicate: ({ queryKey }) => queryKey[0] !== 'session' || queryKey[1] !== 'current' })
  client.setQueryData(sessionQueries.current().queryKey, session)
}

/** Any 401: the session ended, whatever was being done. The screens lead to the sign-in page and back. */
export function useSessionWatch(): void {
  const client = useQueryClient()
  useEffect(() => {
    setUnauthorizedHandler(() => {
      client.setQueryData(sessionQueries.current().queryKey, (session) => (session === undefined ? session : { ...session, person: null }))
    })
    return () => setUnauthorizedHandler(null)
  }, [client])
}

export function useSession() {
  return useQuery(sessionQueries.current())
}

/** The signed-in person of a screen that only shows to one; `null` on the others. */
export function usePerson(): SignedIn | null {
  return useSession().data?.person ?? null
}

export function useSignIn() {
  const client = useQueryClient()
  return useMutation({
    mutationFn: (body: { email: string; password: string }) => request(paths.api.session(), signIn.response, { method: 'POST', body }),
    onSuccess: (session) => replaceSession(client, session),
  })
}

export function useSignOut() {
  const client = useQueryClient()
  return useMutation({
    mutationFn: () => request(paths.api.session(), signOut.response, { method: 'DELETE' }),
    onSuccess: (session) => replaceSession(client, session),
  })
}

export function useCreateFirstOwner() {
  const client = useQueryClient()
  return useMutation({
    mutationFn: (body: { code: string; name: string; email: string; password: string }) =>
      request(paths.api.owner(), createFirstOwner.response, { method: 'POST', body }),
    onSuccess: (session) => replaceSession(client, session),
  })
}

export function useChangePassword() {
  const client = useQueryClient()
  return useMutation({
    mutationFn: (body: { present: string; password: string }) => request(paths.api.ownPassword(), changePassword.response, { method: 'PUT', body }),
    onSuccess: () => client.invalidateQueries({ queryKey: sessionQueries.own().queryKey }),
  })
}

export function useEndSession() {
  const client = useQueryClient()
  return useMutation({
    mutationFn: (id: string) => request(paths.api.ownSession(id), endSession.response, { method: 'DELETE' }),
    onSuccess: () => client.invalidateQueries({ queryKey: sessionQueries.own().queryKey }),
  })
}
