import { QueryClientProvider } from '@tanstack/react-query'
import { render } from '@testing-library/react'
import { userEvent } from '@testing-library/user-event'
import { createMemoryRouter, RouterProvider } from 'react-router-dom'

import { createQueryClient } from '#src/lib/query-client.ts'
import { createRoutes } from '#src/router.tsx'

/** The whole client at an address, with the real router and a real query client; `fakeApi` stands in for the server. */
export function renderApp(path: string) {
  const client = createQueryClient()
  const { queries } = client.getDefaultOptions()
  client.setDefaultOptions({ queries: { ...queries, retryDelay: 0 } })
  const router = createMemoryRouter(createRoutes(client), { initialEntries: [path] })
  render(
    <QueryClientProvider client={client}>
      <RouterProvider router={router} />
    </QueryClientProvider>,
  )
  return { user: userEvent.setup(), router, client }
}
