/** The outcome of something that may be refused: a value, or a refusal that the caller must look at. */
export type Result<T, E> = { readonly ok: true; readonly value: T } | { readonly ok: false; readonly error: E }

/** Wraps a value as a success. */
export function ok<T>(value: T): { readonly ok: true; readonly value: T } {
  return { ok: true, value }
}

/** Wraps a refusal. */
export function err<E>(error: E): { readonly ok: false; readonly error: E } {
  return { ok: false, error }
}
