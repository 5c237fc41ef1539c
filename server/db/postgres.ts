import { sql } from 'drizzle-orm'
import { drizzle } from 'drizzle-orm/node-postgres'
import pg from 'pg'

import { StartRefusal } from '#server/lib/start-refusal.ts'
import { isAnswering } from './client.ts'
import type { Database, Db } from './client.ts'
import { migrate } from './migrate.ts'
import { readSqlState } from './sql-state.ts'
import { guardOuterClient } from './transaction-guard.ts'

const oldestMajor = 15
/** Any number will do, as long as every version of the program uses the same one. */
const migrationLock = 7_055_267_311

/** Connects to a PostgreSQL server; several processes may do so at once, and one of them migrates. */
export async function openPostgres(databaseUrl: string, say: (words: string) => void): Promise<Database> {
  const { hostname, port, pathname } = new URL(databaseUrl)
  say(`Connecting to the PostgreSQL server ${hostname || 'on this machine'}${port ? `:${port}` : ''}, database ${pathname.slice(1)}`)
  const pool = new pg.Pool({
    connectionString: databaseUrl,
    max: 10,
    connectionTimeoutMillis: 5_000,
    // A runaway statement gives way before it holds up the shop.
    statement_timeout: 10_000,
    idle_in_transaction_session_timeout: 30_000,
  })
  // A connection that breaks while nobody uses it is replaced by the pool; one in use fails the statement that uses it.
  pool.on('error', () => undefined)
  try {
    const { before, after } = await migrateOnce(pool)
    if (before < after) say(`Brought the database to schema ${after}`)
    const db = guardOuterClient(drizzle({ client: pool }))
    return {
      engine: 'postgresql',
      db,
      isNew: before === 0,
      isAnswering: () => isAnswering(db),
      lost: new Promise(() => undefined), // The pool connects anew by itself.
      close: (deadlineMs = 5_000) => endPool(pool, deadlineMs),
    }
  } catch (error) {
    await endPool(pool, 1_000)
    throw toRefusal(error)
  }
}

async function migrateOnce(pool: pg.Pool): Promise<{ before: number; after: number }> {
  const connection = await pool.connect()
  const db: Db = drizzle({ client: connection })
  try {
    const { rows } = await db.execute<{ major: number }>(sql`select current_setting('server_version_num')::int / 10000 as major`)
    const major = rows[0]?.major ?? 0
    if (major < oldestMajor) throw new StartRefusal(`The PostgreSQL server is of version ${major}; Pullcord needs ${oldestMajor} or later. Nothing was changed.`)
    await db.execute(sql`set statement_timeout = 0`)
    await db.execute(sql`select pg_advisory_lock(${migrationLock})`)
    return await migrate(db)
  } finally {
    // Ending the connection gives back the lock and the changed time limit with it, whatever state it is in.
    connection.release(true)
  }
}

async function endPool(pool: pg.Pool, deadlineMs: number): Promise<void> {
  let timer: NodeJS.Timeout | undefined
  const deadline = new Promise<void>((resolve) => {
    timer = setTimeout(resolve, deadlineMs)
  })
  await Promise.race([pool.end(), deadline])
  clearTimeout(timer)
}

function toRefusal(error: unknown): unknown {
  if (error instanceof StartRefusal) return error
  const state = readSqlState(error)
  const words: Readonly<Record<string, string>> = {
    ECONNREFUSED: 'nobody answers at that address; start the server, or correct DATABASE_URL',
    ENOTFOUND: 'there is no machine of that name; correct DATABASE_URL',
    '28P01': 'it refuses the password; correct DATABASE_URL',
    '28000': 'it refuses this user; correct DATABASE_URL',
    '3D000': 'it has no database of that name; create it with createdb, or correct DATABASE_URL',
    '42501': 'this user may not create tables there; make it the owner of the database',
  }
  const said = state === null ? undefined : words[state]
  if (said !== undefined) return new StartRefusal(`The PostgreSQL server can't be used: ${said}. Nothing was changed.`)
  if (error instanceof Error && /timeout/i.test(error.message)) return new StartRefusal('The PostgreSQL server did not answer within 5 seconds. Correct DATABASE_URL, or look after the server. Nothing was changed.')
  return error
}
