import { isDiskFull, isWorthRetrying, readSqlState } from '#server/db/sql-state.ts'
import { AppError } from '#server/lib/app-error.ts'

/** What trouble of the database itself says to whoever waits for it; null when the error is something else. */
export function toDatabaseRefusal(error: unknown): AppError | null {
  if (isDiskFull(error)) return new AppError('no-space', 'The disk of the server is full. Nothing was changed. Make room on it, then try again.')
  // Classes 08, 53 and 57P: no connection, no resources, shutting down; 55P03: a lock that was not given in time.
  const isBusy = isWorthRetrying(error) || /^(08...|53...|57P..|55P03)$/.test(readSqlState(error) ?? '')
  return isBusy ? new AppError('busy', 'The database does not answer just now. Nothing was changed. Try again in a moment.', { retryAfterSeconds: 2 }) : null
}
