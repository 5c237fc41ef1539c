import type { PgDatabase, PgQueryResultHKT } from 'drizzle-orm/pg-core'

/** What both engines answer to `db.execute(sql…)`: counts come back as `::int` or through `mapWith(Number)`, never bare. */
export type EngineAnswer<Row> = { readonly rows: readonly Row[]; readonly rowCount: number | null }
interface EngineResult extends PgQueryResultHKT {
  type: EngineAnswer<this['row']>
}

/**
 * The client that services use, on PGlite and on PostgreSQL alike; a transaction's `tx` is one too. The outer client throws when it
 * is used inside a transaction: hand `tx` down.
 */
export type Db = PgDatabase<EngineResult>

/** An open database. */
export type Database = {
  readonly engine: 'pglite' | 'postgresql'
  readonly db: Db
  /** True when the database was empty when it was opened. */
  readonly isNew: boolean
  /** Asks the engine for an answer, for the health page. */
  readonly isAnswering: () => Promise<boolean>
  /** Settles when the engine has stopped by itself; only a new start helps then. */
  readonly lost: Promise<Error>
  /** Lets running work end, writes everything out and lets go of the data folder; past the deadline it stops all the same. */
  readonly close: (deadlineMs?: number) => Promise<void>
}
