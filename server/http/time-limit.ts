import type { RequestHandler } from 'express'
import { AppError } from '#server/lib/app-error.ts'
import { sendRefusal } from './refuse.ts'

/** No request hangs: past the limit it is answered, whatever it still waits for. */
export function createTimeLimit(limitMs: number): RequestHandler {
  return (_request, response, next) => {
    const timer = setTimeout(() => {
      sendRefusal(
        response,
        new AppError(
          'busy',
          'The server is too busy to answer this now. What was sent may still be done: look again in a moment before you send it once more.',
          { retryAfterSeconds: 5 },
        ),
      )
    }, limitMs)
    response.on('close', () => {
      clearTimeout(timer)
    })
    next()
  }
}
