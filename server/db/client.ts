import { sql } from 'drizzle-orm'
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
  /** Lets running work end and writes everything out; past the deadline it stops all the same. */
  readonly close: (deadlineMs?: number) => Promise<void>
}

/** True when the engine answers a bare question. */
export async function isAnswering(db: Db): Promise<boolean> {
  try {
    await db.execute(sql`select 1`)
    return true
  } catch {
    return false // The health page says so; the failing statement of a person's own request says why.
  }
}
