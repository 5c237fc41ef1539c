import type { QueryClient } from '@tanstack/react-query'
import type { ComponentType } from 'react'
import type { LoaderFunction, RouteObject } from 'react-router-dom'

import { NotFound } from '#src/routes/not-found.tsx'
import { RootError } from '#src/routes/root-error.tsx'
import { FirstPaint, Root } from '#src/routes/root.tsx'
import { SignedIn } from '#src/routes/signed-in.tsx'
import { requireNobody, requireNoOwner, requirePerson } from '#src/routes/session-gate.ts'

/** What a screen's file exports: the screen, and what starts its requests before it is drawn. */
type ScreenFile = { readonly Component: ComponentType; readonly createLoader?: (client: QueryClient) => LoaderFunction }

/**
 * The table of addresses. Each screen is a file of its own under src/routes and is fetched when it is first shown. Inside
 * `SignedIn` somebody is signed in; `requirePerson(client, role)` on a route asks for more than a junior.
 */
export function createRoutes(client: QueryClient): RouteObject[] {
  const screen = (load: () => Promise<ScreenFile>) => async () => {
    const { Component, createLoader } = await load()
    return { Component, ...(createLoader && { loader: createLoader(client) }) }
  }
  return [
    {
      path: '/',
      Component: Root,
      HydrateFallback: FirstPaint,
      ErrorBoundary: RootError,
      children: [
        { path: 'sign-in', loader: requireNobody(client), lazy: screen(() => import('#src/routes/sign-in.tsx')) },
        { path: 'set-up', loader: requireNoOwner(client), lazy: screen(() => import('#src/routes/set-up.tsx')) },
        { path: 'link/:token', lazy: screen(() => import('#src/routes/accept-link.tsx')) },
        {
          Component: SignedIn,
          loader: requirePerson(client, 'junior'),
          children: [
            { path: 'account', lazy: screen(() => import('#src/routes/account.tsx')) },
            { loader: requirePerson(client, 'owner'), children: [{ path: 'people', lazy: screen(() => import('#src/routes/people.tsx')) }] },
          ],
        },
        { path: '*', Component: NotFound },
      ],
    },
  ]
}
