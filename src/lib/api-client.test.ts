import { afterEach, expect, test, vi } from 'vitest'
import { z } from 'zod'

import { ProblemError, request, setUnauthorizedHandler } from './api-client.ts'

const contract = z.strictObject({ done: z.literal(true) })

function answerWith(status: number, body: string): ReturnType<typeof vi.fn> {
  const fetch = vi.fn(() => Promise.resolve(new Response(body, { status })))
  vi.stubGlobal('fetch', fetch)
  return fetch
}

async function problemOf(promise: Promise<unknown>): Promise<ProblemError> {
  const error: unknown = await promise.then(
    () => null,
    (reason: unknown) => reason,
  )
  if (!(error instanceof ProblemError)) throw new Error('nothing was refused')
  return error
}

afterEach(() => {
  vi.unstubAllGlobals()
  setUnauthorizedHandler(null)
})

test('what is sent is JSON from the same origin, and what comes back is what the contract says', async () => {
  const fetch = answerWith(200, '{"done":true}')
  await expect(request('/api/x', contract, { method: 'POST', body: { a: 1 } })).resolves.toEqual({ done: true })
  expect(fetch).toHaveBeenCalledWith('/api/x', {
    method: 'POST',
    credentials: 'same-origin',
    headers: { accept: 'application/json', 'content-type': 'application/json' },
    body: '{"a":1}',
  })
})

test('a refusal keeps its code, its words and the places that it names', async () => {
  answerWith(
    409,
    JSON.stringify({
      title: 'Taken',
      status: 409,
      code: 'e-mail-taken',
      detail: 'Somebody has it.',
      errors: [{ pointer: '#/email', detail: 'Taken.' }, 'junk'],
    }),
  )
  const problem = await problemOf(request('/api/x', contract))
  expect([problem.status, problem.code, problem.message, problem.errors]).toEqual([
    409,
    'e-mail-taken',
    'Somebody has it.',
    [{ pointer: '#/email', detail: 'Taken.' }],
  ])
})

test.each([['<html>gateway</html>'], [''], ['null'], ['[]'], ['{"detail":7}']])('an error that is no problem document (%s) still has words', async (body) => {
  answerWith(502, body)
  const problem = await problemOf(request('/api/x', contract))
  expect(problem.code).toBe('http-502')
  expect(problem.message).toMatch(/Nothing was changed/)
})

test('an answer that the contract does not know is refused, not cast', async () => {
  answerWith(200, '{"done":"yes"}')
  expect((await problemOf(request('/api/x', contract))).code).toBe('unexpected-answer')
})

test('silence is a refusal with status 0', async () => {
  vi.stubGlobal('fetch', () => Promise.reject(new TypeError('Failed to fetch')))
  const problem = await problemOf(request('/api/x', contract))
  expect([problem.status, problem.code]).toEqual([0, 'no-answer'])
})

test('an aborted request is no refusal', async () => {
  vi.stubGlobal('fetch', () => Promise.reject(new DOMException('gone', 'AbortError')))
  await expect(request('/api/x', contract, { signal: AbortSignal.abort() })).rejects.toBeInstanceOf(DOMException)
})

test('a 401 is heard by the session, unless it is the sign-in that was refused', async () => {
  const heard = vi.fn()
  setUnauthorizedHandler(heard)
  answerWith(401, '{}')
  await problemOf(request('/api/session', contract, { method: 'POST', body: {} }))
  expect(heard).not.toHaveBeenCalled()
  await problemOf(request('/api/walks', contract))
  expect(heard).toHaveBeenCalledOnce()
})
