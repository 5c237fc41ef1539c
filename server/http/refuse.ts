import type { ErrorRequestHandler, Request, Response } from 'express'
import type { ProblemCode } from '#shared/api/problem.ts'
import { AppError, type AppErrorExtras } from '#server/lib/app-error.ts'
import type { Deps } from '#server/lib/deps.ts'
import { toDatabaseRefusal } from '#server/services/database-trouble.ts'
import { problems, problemType, toProblem } from './problems.ts'

/** A refusal by the door itself, where one code has more than one status. */
export class DoorError extends AppError {
  readonly status: number

  constructor(status: number, code: ProblemCode, detail: string, extras: AppErrorExtras = {}) {
    super(code, detail, extras)
    this.status = status
  }
}

const nothingChanged = 'Nothing was changed.'

/** Body reader faults (by `type`) in words. */
function toBodyError(type: string, limit: unknown): DoorError | null {
  switch (type) {
    case 'entity.too.large':
      return new DoorError(413, 'too-large', `This is larger than ${Number(limit)} bytes, the most that is taken here. ${nothingChanged}`)
    case 'entity.parse.failed':
      return new DoorError(400, 'not-json', `This can't be read as JSON. ${nothingChanged}`)
    case 'encoding.unsupported':
    case 'charset.unsupported':
      return new DoorError(415, 'not-json', 'Send JSON in UTF-8, not packed.')
    case 'request.aborted':
    case 'request.size.invalid':
      return new DoorError(400, 'not-json', `The request ended before all of it was here. ${nothingChanged}`)
    default:
      return null
  }
}

/** What an error that is no refusal of ours says to the other side: never more than that something failed. */
function toRefusal(error: unknown): AppError | null {
  if (error instanceof AppError) return error
  if (error instanceof URIError || (error instanceof Error && 'status' in error && error.status === 400 && !('type' in error))) {
    return new AppError('not-found', 'There is nothing at this address.')
  }
  if (error instanceof Error && 'type' in error && typeof error.type === 'string') {
    return toBodyError(error.type, 'limit' in error ? error.limit : null)
  }
  return toDatabaseRefusal(error)
}

/** Sends a refusal as a problem document; a second one for the same request is dropped. */
export function sendRefusal(response: Response, refusal: AppError): void {
  if (response.headersSent) return
  const { errors, members, retryAfterSeconds } = refusal.extras
  const problem = toProblem(refusal.code, refusal.detail, `urn:uuid:${String(response.locals['requestId'])}`, { ...members, ...(errors ? { errors } : {}) })
  const status = refusal instanceof DoorError ? refusal.status : problems[refusal.code].status
  response.locals['problem'] = refusal.code
  if (retryAfterSeconds !== undefined) response.set('Retry-After', String(retryAfterSeconds))
  response
    .status(status)
    .type(`${problemType}; charset=utf-8`)
    .send(JSON.stringify({ ...problem, status }))
}

/** The last resort: every error becomes a problem document, and what is nobody's refusal is written to the log with the request's id. */
export function createErrorHandler(deps: Deps): ErrorRequestHandler {
  return (error: unknown, _request: Request, response: Response, _next) => {
    const refusal = toRefusal(error)
    if (refusal === null) deps.log.error({ event: 'broken', requestId: response.locals['requestId'], err: error }, 'a request failed')
    const words = `Something broke on the server, and it was written down with the number of this request. ${nothingChanged} Try again; if it stays, show the log to whoever looks after the server.`
    sendRefusal(response, refusal ?? new AppError('broken', words))
  }
}
