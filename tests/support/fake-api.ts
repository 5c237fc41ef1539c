import { expect, onTestFinished, vi } from 'vitest'

import type { Contract } from '#shared/api/contract.ts'
import type { ProblemCode } from '#shared/api/problem.ts'

export type FakeAnswer = { readonly status: number; readonly body: unknown }

export type FakeEndpoint = {
  readonly method: string
  /** Exact, or a pattern over the whole path with its query. */
  readonly path: string | RegExp
  readonly contract: Contract
  readonly answer: (body: unknown, path: string) => FakeAnswer | Promise<FakeAnswer>
}

export const ok = (body: unknown): FakeAnswer => ({ status: 200, body })

export const problem = (status: number, code: ProblemCode, detail: string, errors: readonly { pointer: string; detail: string }[] = []): FakeAnswer => ({
  status,
  body: { type: `/problems/${code}`, title: code, status, detail, code, errors },
})

type Call = { readonly method: string; readonly path: string; readonly body: unknown }

/**
 * Stands in for the server: what is sent must fit the contract, and so must what is answered, else the test fails at its
 * end. Endpoints are looked up anew for each call, the first that fits wins.
 */
export function fakeApi(endpoints: readonly FakeEndpoint[]): { readonly calls: readonly Call[] } {
  const calls: Call[] = []
  const faults: string[] = []
  const answer = async (path: string, init: RequestInit = {}): Promise<FakeAnswer> => {
    const method = init.method ?? 'GET'
    const body: unknown = typeof init.body === 'string' ? JSON.parse(init.body) : undefined
    calls.push({ method, path, body })
    const found = endpoints.find((each) => each.method === method && (typeof each.path === 'string' ? each.path === path : each.path.test(path)))
    if (found === undefined) {
      faults.push(`${method} ${path} is not listed`)
      return problem(404, 'not-found', 'There is no such address.')
    }
    const sent = found.contract.body?.safeParse(body)
    if (sent?.success === false) faults.push(`${method} ${path} was sent ${JSON.stringify(body)}: ${sent.error.message}`)
    if (found.contract.body === undefined && body !== undefined) faults.push(`${method} ${path} takes no body`)
    const given = await found.answer(body, path)
    const checked = given.status < 400 ? found.contract.response.safeParse(given.body) : null
    if (checked?.success === false) faults.push(`the test's own answer to ${method} ${path} does not fit: ${checked.error.message}`)
    return given
  }
  vi.stubGlobal('fetch', async (input: string | URL | Request, init?: RequestInit) => {
    const { status, body } = await answer(String(input), init)
    return new Response(JSON.stringify(body), { status, headers: { 'content-type': status < 400 ? 'application/json' : 'application/problem+json' } })
  })
  onTestFinished(() => {
    vi.unstubAllGlobals()
    expect(faults).toEqual([])
  })
  return { calls }
}
