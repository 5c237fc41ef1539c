import type { QueryClient } from '@tanstack/react-query'
import type { LoaderFunctionArgs } from 'react-router-dom'
import { redirect } from 'react-router-dom'

import type { Role } from '#shared/trade/roles.ts'
import { hasRole } from '#shared/trade/roles.ts'
import { sessionQueries } from '#src/api/session.ts'
import { paths, toLocalPath } from '#src/lib/paths.ts'

/** Lets in who is signed in with this role or a higher one; sends everybody else to where they can go on. The API decides for itself. */
export function requirePerson(client: QueryClient, role: Role) {
  return async ({ request }: LoaderFunctionArgs): Promise<null> => {
    const { person, needsOwner } = await client.ensureQueryData(sessionQueries.current())
    if (needsOwner) throw redirect(paths.setUp())
    if (person === null) {
      const { pathname, search } = new URL(request.url)
      throw redirect(paths.signIn(`${pathname}${search}`))
    }
    if (!hasRole(person.role, role)) throw redirect(paths.bench())
    return null
  }
}

/** The sign-in page: only for who is not signed in, and only once the shop has an owner. */
export function requireNobody(client: QueryClient) {
  return async ({ request }: LoaderFunctionArgs): Promise<null> => {
    const { person, needsOwner } = await client.ensureQueryData(sessionQueries.current())
    if (needsOwner) throw redirect(paths.setUp())
    if (person !== null) throw redirect(toLocalPath(new URL(request.url).searchParams.get('next')))
    return null
  }
}

/** The page for the first owner: only while there is none. */
export function requireNoOwner(client: QueryClient) {
  return async (_args: LoaderFunctionArgs): Promise<null> => {
    const { needsOwner } = await client.ensureQueryData(sessionQueries.current())
    if (!needsOwner) throw redirect(paths.bench())
    return null
  }
}
