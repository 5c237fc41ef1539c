import '#src/styles/fonts.css'
import '#src/styles/theme.css'
import '#src/styles/print.css'

import { QueryClientProvider } from '@tanstack/react-query'
import { StrictMode } from 'react'
import { createRoot } from 'react-dom/client'
import { createBrowserRouter, RouterProvider } from 'react-router-dom'

import { createQueryClient } from '#src/lib/query-client.ts'
import { createRoutes } from '#src/router.tsx'

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
