import { pino } from 'pino'
import type { DestinationStream, Logger } from 'pino'

/** The log that everything writes to: one JSON object a line, moments in UTC. */
export type Log = Logger

/** Fields that never reach the log, wherever a caller puts them: one or two levels down. */
const secretFields = [
  'password', 'newPassword', 'presentPassword', 'passwordHash', 'token', 'tokenHash', 'secret', 'sessionSecret', 'databaseUrl',
  'cookie', 'authorization', '["set-cookie"]', 'email',
]
const redactedPaths = secretFields.flatMap((field) => {
  const step = field.startsWith('[') ? field : `.${field}`
  return [field, `*${step}`, `*.*${step}`]
})

/**
 * Makes the log. Line breaks in what a person typed stay inside JSON strings, so no input can forge a line. Standard error by
 * default: standard output is for the words that people read.
 */
export function createLog(destination: DestinationStream = pino.destination({ fd: 2, sync: true })): Log {
  return pino(
    {
      base: null,
      timestamp: () => `,"at":"${new Date().toISOString()}"`,
      formatters: { level: (label) => ({ level: label }) },
      redact: { paths: redactedPaths, censor: '[left out]' },
      serializers: { err: describeError, error: describeError },
    },
    destination,
  )
}

/**
 * Says what went wrong without what people entered: a failed query carries its parameters in its message, and PostgreSQL quotes
 * the offending row in `detail`; both stay out.
 */
function describeError(error: unknown, depth = 0): unknown {
  if (!(error instanceof Error)) return { message: String(error) }
  const message = 'query' in error && 'params' in error ? `Failed query: ${String(error.query)}` : error.message
  const frames = error.stack?.split('\n').filter((line) => /^\s+at /.test(line)) ?? []
  return {
    type: error.name,
    message,
    ...('code' in error ? { sqlState: error.code } : {}),
    ...('constraint' in error ? { constraint: error.constraint } : {}),
    stack: frames.join('\n'),
    ...(error.cause !== undefined && depth < 5 ? { cause: describeError(error.cause, depth + 1) } : {}),
  }
}
