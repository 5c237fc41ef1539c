/** The SQLSTATEs that services turn into refusals (PostgreSQL documentation, appendix A). */
const uniqueViolation = '23505'
const serializationFailure = '40001'
const deadlockDetected = '40P01'
const diskFull = '53100'

/** The SQLSTATE of a failed statement, or null: the query builder wraps the engine's error, whose class differs between the engines. */
export function readSqlState(error: unknown): string | null {
  return readField(error, 'code')
}

/** True when a statement failed because a row with that key is there already; `constraint` narrows it to one key. */
export function isUniqueViolation(error: unknown, constraint?: string): boolean {
  return readSqlState(error) === uniqueViolation && (constraint === undefined || readField(error, 'constraint') === constraint)
}

/** True when the same transaction, tried again, may well succeed. */
export function isWorthRetrying(error: unknown): boolean {
  const state = readSqlState(error)
  return state === serializationFailure || state === deadlockDetected
}

/** True when there is no room left where the database writes. */
export function isDiskFull(error: unknown): boolean {
  return readSqlState(error) === diskFull
}

function readField(error: unknown, field: 'code' | 'constraint'): string | null {
  if (!(error instanceof Error)) return null
  const value: unknown = Reflect.get(error, field)
  if (typeof value === 'string') return value
  return readField(error.cause, field)
}
