import type { Fault, ProblemCode } from '#shared/api/problem.ts'

/** What a refusal may carry beside its words: the faults of an input, and members of its own that the caller can act on. */
export type AppErrorExtras = {
  readonly errors?: readonly Fault[]
  /** Further members of the problem document, for example the current version of a draft that moved on. */
  readonly members?: Readonly<Record<string, unknown>>
  /** Seconds after which another try makes sense. */
  readonly retryAfterSeconds?: number
}

/** A refusal by a service: a stable code and plain words. Which HTTP status that is, only server/http knows. */
export class AppError extends Error {
  override readonly name = 'AppError'
  readonly code: ProblemCode
  readonly detail: string
  readonly extras: AppErrorExtras

  constructor(code: ProblemCode, detail: string, extras: AppErrorExtras = {}) {
    super(`${code}: ${detail}`)
    this.code = code
    this.detail = detail
    this.extras = extras
  }
}
