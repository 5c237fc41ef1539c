/** What the server refused, and where: `pointer` is a JSON pointer into the body that was sent ('#/email'). */
export type FieldProblem = { readonly pointer: string; readonly detail: string }

/** A refusal of the server (RFC 9457), or of the way to it: status 0 is "no answer". The message can be shown as it is. */
export class ProblemError extends Error {
  readonly status: number
  readonly code: string
  readonly errors: readonly FieldProblem[]

  constructor(status: number, code: string, detail: string, errors: readonly FieldProblem[] = []) {
    super(detail)
    this.name = 'ProblemError'
    this.status = status
    this.code = code
    this.errors = errors
  }
}

/** The one thing that is asked of a schema here; every zod schema has it. */
type Contract<T> = { safeParse: (value: unknown) => { success: true; data: T } | { success: false } }

export type RequestInitJson = {
  readonly method?: 'GET' | 'POST' | 'PUT' | 'PATCH' | 'DELETE'
  readonly body?: unknown
  readonly headers?: Readonly<Record<string, string>>
  readonly signal?: AbortSignal
}

type UnauthorizedHandler = () => void
let onUnauthorized: UnauthorizedHandler | null = null

/** One listener hears of every 401 but those of the sign-in itself: the session ended, whatever was being done. */
export function setUnauthorizedHandler(handler: UnauthorizedHandler | null): void {
  onUnauthorized = handler
}

/** Asks the API and hands back what the contract says. Throws `ProblemError`; an abort passes through as it is. */
export async function request<T>(path: string, contract: Contract<T>, init: RequestInitJson = {}): Promise<T> {
  const response = await send(path, init)
  const body = await readJson(response)
  if (!response.ok) throw refuse(response.status, body, path, init)
  const parsed = contract.safeParse(body)
  if (!parsed.success) {
    throw new ProblemError(
      response.status,
      'unexpected-answer',
      'The server answered in a form that this page does not know. Nothing was lost: load the page again.',
    )
  }
  return parsed.data
}

async function send(path: string, { method = 'GET', body, headers, signal }: RequestInitJson): Promise<Response> {
  try {
    return await fetch(path, {
      method,
      credentials: 'same-origin',
      headers: { accept: 'application/json', ...(body === undefined ? {} : { 'content-type': 'application/json' }), ...headers },
      ...(body === undefined ? {} : { body: JSON.stringify(body) }),
      ...(signal === undefined ? {} : { signal }),
    })
  } catch (cause) {
    if (signal?.aborted === true) throw cause
    throw new ProblemError(0, 'no-answer', 'The server does not answer. What is on this page is still here: try again in a moment.')
  }
}

async function readJson(response: Response): Promise<unknown> {
  if (response.status === 204) return undefined
  try {
    return await response.json()
  } catch {
    return undefined
  }
}

function refuse(status: number, body: unknown, path: string, init: RequestInitJson): ProblemError {
  const problem = readProblem(status, body)
  const isSignIn = path === '/api/session' && init.method === 'POST'
  if (status === 401 && !isSignIn) onUnauthorized?.()
  return problem
}

function readProblem(status: number, body: unknown): ProblemError {
  const fields: Record<string, unknown> = typeof body === 'object' && body !== null ? { ...body } : {}
  const words = [fields['detail'], fields['title']].find((value) => typeof value === 'string' && value !== '')
  const code = typeof fields['code'] === 'string' ? fields['code'] : `http-${status}`
  const detail = typeof words === 'string' ? words : 'The server could not do this. Nothing was changed: try again in a moment.'
  const errors = Array.isArray(fields['errors']) ? fields['errors'].filter(isFieldProblem) : []
  return new ProblemError(status, code, detail, errors)
}

function isFieldProblem(value: unknown): value is FieldProblem {
  return (
    typeof value === 'object' &&
    value !== null &&
    'pointer' in value &&
    typeof value.pointer === 'string' &&
    'detail' in value &&
    typeof value.detail === 'string'
  )
}
