import type { RequestHandler } from 'express'
import type { Deps } from '#server/lib/deps.ts'
import type { Endpoint } from './endpoint.ts'

/**
 * Gives every request an id and writes one line about it when it is over. The line names the route, never the address that was
 * asked for: some addresses hold a one-time token.
 */
export function createRequestLog(deps: Deps): RequestHandler {
  return (request, response, next) => {
    const startedAt = performance.now()
    const requestId = deps.newId()
    response.locals['requestId'] = requestId
    response.on('close', () => {
      const endpoint = response.locals['endpoint'] as Endpoint | undefined
      const line = {
        event: 'request',
        requestId,
        method: request.method,
        route: endpoint?.path ?? (request.path.startsWith('/api/') ? '/api/…' : 'page'),
        status: response.statusCode,
        ...(response.writableFinished ? {} : { isCut: true }),
        ...(response.locals['problem'] === undefined ? {} : { problem: String(response.locals['problem']) }),
        personId: (response.locals['personId'] as string | null | undefined) ?? null,
        ms: Math.round((performance.now() - startedAt) * 10) / 10,
      }
      if (endpoint === undefined && response.statusCode < 400) deps.log.debug(line, 'request')
      else deps.log.info(line, 'request')
    })
    next()
  }
}
