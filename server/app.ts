import { resolve } from 'node:path'
import cookieParser from 'cookie-parser'
import express, { type Express, type RequestHandler } from 'express'
import { AppError } from './lib/app-error.ts'
import type { Deps } from './lib/deps.ts'
import { createPages } from './http/pages.ts'
import { createErrorHandler } from './http/refuse.ts'
import { createRequestLog } from './http/request-log.ts'
import { createRouter } from './http/router.ts'
import { createSecurityHeaders } from './http/security-headers.ts'
import { createTimeLimit } from './http/time-limit.ts'
import { endpoints } from './routes/endpoints.ts'

export type AppOptions = {
  /** Folder of the built pages. */
  readonly pagesFolder?: string
  /** Serves the pages while they are being written, in place of the built ones. */
  readonly devPages?: RequestHandler
  readonly timeLimitMs?: number
}

/** The whole application: no port, no globals. */
export function createApp(deps: Deps, options: AppOptions = {}): Express {
  const app = express()
  app.disable('x-powered-by')
  app.disable('etag')
  // The address of the other end is that of the connection; a header that anybody can write is not believed.
  app.set('trust proxy', false)
  app.set('case sensitive routing', true)
  app.use(createRequestLog(deps))
  app.use(createSecurityHeaders(deps, options.devPages !== undefined))
  app.use('/api', createTimeLimit(options.timeLimitMs ?? 10_000), noStore, cookieParser())
  app.use(createRouter(deps, endpoints))
  app.use('/api', () => {
    throw new AppError('not-found', 'There is nothing at this address.')
  })
  app.use(options.devPages ?? createPages(options.pagesFolder ?? resolve(import.meta.dirname, '../dist')))
  app.use(() => {
    throw new AppError('not-found', 'There is no such file.')
  })
  app.use(createErrorHandler(deps))
  return app
}

const noStore: RequestHandler = (_request, response, next) => {
  response.set('Cache-Control', 'no-store')
  next()
}
