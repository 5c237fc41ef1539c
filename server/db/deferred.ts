/** A promise with its two ends in hand (Node 20 has no `Promise.withResolvers` yet). */
export type Deferred<T> = { readonly promise: Promise<T>; readonly resolve: (value: T) => void; readonly reject: (error: unknown) => void }

export function defer<T>(): Deferred<T> {
  let ends: Pick<Deferred<T>, 'resolve' | 'reject'> | null = null
  const promise = new Promise<T>((resolve, reject) => {
    ends = { resolve, reject }
  })
  // The promise's own function runs before `new Promise` returns.
  return { promise, ...(ends as unknown as Pick<Deferred<T>, 'resolve' | 'reject'>) }
}
