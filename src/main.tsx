import '#src/styles/fonts.css'
import '#src/styles/theme.css'
import '#src/styles/print.css'

import { QueryClientProvider } from '@tanstack/react-query'
import { StrictMode } from 'react'
import { createRoot } from 'react-dom/client'
import { createBrowserRouter, RouterProvider } from 'react-router-dom'
import { config } from 'zod/v4/core'

import { createQueryClient } from '#src/lib/query-client.ts'
import { createRoutes } from '#src/router.tsx'

// Schemas that build functions from strings would be stopped, and reported, by the content security policy.
config({ jitless: true })

const queryClient = createQueryClient()
const router = createBrowserRouter(createRoutes(queryClient))
const root = document.getElementById('root')
if (root === null) throw new Error('index.html has no #root')

createRoot(root).render(
  <StrictMode>
    <QueryClientProvider client={queryClient}>
      <RouterProvider router={router} />
    </QueryClientProvider>
  </StrictMode>,
)
