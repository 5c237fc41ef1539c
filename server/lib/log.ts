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

export type LogOptions = { readonly destination?: DestinationStream; readonly level?: 'debug' | 'info' | 'warn' | 'silent' }

/**
 * Makes the log. Line breaks in what a person typed stay inside JSON strings, so no input can forge a line. Standard error by
 * default: standard output is for the words that people read.
 */
export function createLog({ destination = pino.destination({ fd: 2, sync: true }), level = 'info' }: LogOptions = {}): Log {
  return pino(
    {
      base: null,
      level,
      timestamp: () => `,"at":"${new Date().toISOString()}"`,
      formatters: { level: (label) => ({ level: label }) },
      redact: { paths: redactedPaths, censor: '[left out]' },
      serializers: { err: describeError, error: describeError },
      hooks: {
        logMethod(args, method) {
          // Without words of the caller's the error's own would become the line's, and those may quote what a person entered.
          const [first, words] = args as [unknown, string?]
          const fields = first instanceof Error ? { err: first } : first
          const isError = typeof fields === 'object' && fields !== null && 'err' in fields
          method.apply(this, isError && words === undefined ? [fields, 'failed'] : ([fields, ...args.slice(1)] as Parameters<typeof method>))
        },
      },
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
