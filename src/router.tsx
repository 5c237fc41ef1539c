import type { QueryClient } from '@tanstack/react-query'
import type { ComponentType } from 'react'
import type { LoaderFunction, RouteObject } from 'react-router-dom'

import type { Role } from '#shared/trade/roles.ts'
import { NotFound } from '#src/routes/not-found.tsx'
import { RootError } from '#src/routes/root-error.tsx'
import { FirstPaint, Root } from '#src/routes/root.tsx'

/** What a screen's file exports: the screen, and what starts its requests before it is drawn. */
type ScreenFile = { readonly Component: ComponentType; readonly createLoader?: (client: QueryClient) => LoaderFunction }

/**
 * The table of addresses. Each screen is a file of its own under src/routes and is fetched when it is first shown, and so is
 * all that parses answers: the first bundle is React, the router and the query client. Screens inside the signed-in part
 * are listed with the role that they want.
 */
export function createRoutes(client: QueryClient): RouteObject[] {
  const gate = () => import('#src/routes/session-gate.ts')
  const requirePerson =
    (role: Role): LoaderFunction =>
    async (args) =>
      (await gate()).requirePerson(client, role)(args)
  const screen = (load: () => Promise<ScreenFile>) => async () => {
    const { Component, createLoader } = await load()
    return { Component, ...(createLoader && { loader: createLoader(client) }) }
  }
  /** A screen for a role and the higher ones: nothing of it is asked for before the gate has let the person in. */
  const screenFor = (role: Role, load: () => Promise<ScreenFile>) => async () => {
    const { Component, createLoader } = await load()
    const loader: LoaderFunction = async (args) => {
      await requirePerson(role)(args)
      return (await createLoader?.(client)(args)) ?? null
    }
    return { Component, loader }
  }

  return [
    {
      path: '/',
      Component: Root,
      HydrateFallback: FirstPaint,
      ErrorBoundary: RootError,
      children: [
        {
          path: 'sign-in',
          loader: async (args) => (await gate()).requireNobody(client)(args),
          lazy: screen(() => import('#src/routes/sign-in.tsx')),
        },
        {
          path: 'set-up',
          loader: async (args) => (await gate()).requireNoOwner(client)(args),
          lazy: screen(() => import('#src/routes/set-up.tsx')),
        },
        { path: 'link/:token', lazy: screen(() => import('#src/routes/accept-link.tsx')) },
        {
          loader: requirePerson('junior'),
          lazy: screen(() => import('#src/routes/signed-in.tsx')),
          children: [
            { index: true, lazy: screenFor('junior', () => import('#src/routes/bench.tsx')) },
            { path: 'start/:chartId', lazy: screenFor('junior', () => import('#src/routes/start.tsx')) },
            { path: 'walks', lazy: screenFor('junior', () => import('#src/routes/walks.tsx')) },
            { path: 'walks/:walkId', lazy: screenFor('junior', () => import('#src/routes/walk.tsx')) },
            { path: 'walks/:walkId/review', lazy: screenFor('junior', () => import('#src/routes/walk-review.tsx')) },
            { path: 'charts', lazy: screenFor('junior', () => import('#src/routes/charts.tsx')) },
            { path: 'charts/:chartId', lazy: screenFor('junior', () => import('#src/routes/chart.tsx')) },
            { path: 'account', lazy: screenFor('junior', () => import('#src/routes/account.tsx')) },
            { path: 'people', lazy: screenFor('owner', () => import('#src/routes/people.tsx')) },
          ],
        },
        { path: '*', Component: NotFound },
      ],
    },
  ]
}
