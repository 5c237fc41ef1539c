import type { Server } from 'node:http'

import type { RequestHandler } from 'express'
import { createServer } from 'vite'

/** The pages as they are written, compiled on demand and replaced in the browser, on the server's own port. */
export async function createDevPages(server: Server): Promise<RequestHandler> {
  const vite = await createServer({ server: { middlewareMode: true, hmr: { server } }, appType: 'spa' })
  return vite.middlewares
}
