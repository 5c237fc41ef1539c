import type { Db, Database } from '#server/db/client.ts'
import type { Config } from './config.ts'
import type { Log } from './log.ts'

/** Hashes passwords off the main thread; a password is hashed exactly as it was typed. */
export type Passwords = {
  readonly hash: (password: string) => Promise<string>
  readonly verify: (password: string, hash: string) => Promise<boolean>
}

/** Everything that a service is handed: no service reads a clock, the environment or chance by itself. */
export type Deps = {
  readonly config: Config
  /** The outer client. Inside a transaction only the `tx` of its callback may be used: this one throws there. */
  readonly db: Db
  /** Which engine answers, and whether it does. */
  readonly database: Pick<Database, 'engine' | 'isAnswering'>
  readonly log: Log
  readonly clock: () => Date
  /** A new UUID of version 7: a name, not an order. */
  readonly newId: () => string
  /** A secret of so many random bytes (at least 16), base64url. */
  readonly randomToken: (bytes: number) => string
  readonly passwords: Passwords
}
