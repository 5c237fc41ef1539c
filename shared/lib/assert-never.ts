/** Closes a switch over a union: a case that was forgotten does not compile, and one that arrives all the same throws. */
export function assertNever(value: never): never {
  throw new Error(`Unexpected value: ${JSON.stringify(value)}`)
}
