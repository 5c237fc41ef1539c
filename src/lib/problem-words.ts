import { ProblemError } from './api-client.ts'

/** Words for whatever went wrong; a fault of ours is said as one. */
export function toWords(error: unknown): string {
  return error instanceof ProblemError ? error.message : 'This page stumbled over a fault of its own. What you typed is still here: try again.'
}
