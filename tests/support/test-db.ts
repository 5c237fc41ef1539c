import { createHash, randomBytes } from 'node:crypto'
import { mkdir, readdir, readFile, rename, writeFile } from 'node:fs/promises'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'

import { sql } from 'drizzle-orm'
import pg from 'pg'

import type { Database, Db } from '#server/db/client.ts'
import { migrationsFolder } from '#server/db/migrate.ts'
import { openInMemory } from '#server/db/pglite.ts'
import { openPostgres } from '#server/db/postgres.ts'

/** A migrated database of a test's own. */
export type TestDb = {
  readonly db: Db
  readonly database: Database
  /** Empties every table, which is quicker than a new database: for between the tests of one file. */
  readonly clear: () => Promise<void>
  readonly close: () => Promise<void>
}

const cacheFolder = fileURLToPath(new URL('../../node_modules/.cache/pullcord', import.meta.url))

/**
 * Makes an empty, migrated database: in memory, cloned from an image that the first call makes and keeps; or, when
 * `PULLCORD_TEST_DATABASE_URL` names a PostgreSQL server, a fresh database there. The same tests run on both.
 */
export async function createTestDb(): Promise<TestDb> {
  const server = process.env.PULLCORD_TEST_DATABASE_URL
  return server === undefined || server === '' ? createInMemory() : createOnServer(server)
}

async function createInMemory(): Promise<TestDb> {
  const database = await openInMemory(await readImage())
  return { db: database.db, database, clear: () => clear(database.db), close: () => database.close() }
}

/** The image of a migrated, empty database, named for the migrations that made it; several test processes may make it at once. */
async function readImage(): Promise<Uint8Array<ArrayBuffer>> {
  const path = join(cacheFolder, `${await hashMigrations()}.image`)
  const kept = await readFile(path).catch(() => null)
  if (kept) return new Uint8Array(kept)
  const database = await openInMemory(null)
  const image = await database.image()
  await database.close()
  await mkdir(cacheFolder, { recursive: true })
  const draft = `${path}.${process.pid}`
  await writeFile(draft, image)
  await rename(draft, path)
  return image
}

async function createOnServer(server: string): Promise<TestDb> {
  const template = `pullcord_${(await hashMigrations()).slice(0, 16)}`
  const name = `test_${randomBytes(8).toString('hex')}`
  await makeTemplate(server, template)
  await administer(server, (client) => client.query(`create database ${name} template ${template}`))
  const database = await openPostgres(withDatabase(server, name), () => undefined)
  return {
    db: database.db,
    database,
    clear: () => clear(database.db),
    close: async () => {
      await database.close()
      await administer(server, (client) => client.query(`drop database ${name} with (force)`))
    },
  }
}

/** Makes the migrated database that the others are copied from, once; whoever comes second waits for the first. */
async function makeTemplate(server: string, template: string): Promise<void> {
  await administer(server, async (client) => {
    await client.query('select pg_advisory_lock(1)')
    const { rowCount } = await client.query('select 1 from pg_database where datname = $1', [template])
    if (rowCount) return
    await client.query(`drop database if exists ${template}_draft`)
    await client.query(`create database ${template}_draft`)
    const database = await openPostgres(withDatabase(server, `${template}_draft`), () => undefined)
    await database.close()
    await client.query(`alter database ${template}_draft rename to ${template}`)
  })
}

async function administer(server: string, act: (client: pg.Client) => Promise<unknown>): Promise<void> {
  const client = new pg.Client({ connectionString: server })
  await client.connect()
  try {
    await act(client)
  } finally {
    await client.end()
  }
}

function withDatabase(server: string, name: string): string {
  const url = new URL(server)
  url.pathname = `/${name}`
  return url.href
}

async function clear(db: Db): Promise<void> {
  const { rows } = await db.execute<{ name: string }>(sql`select quote_ident(tablename) as name from pg_tables where schemaname = 'public'`)
  if (rows.length > 0) await db.execute(sql.raw(`truncate ${rows.map((row) => row.name).join(', ')} restart identity cascade`))
}

async function hashMigrations(): Promise<string> {
  const hash = createHash('sha256')
  for (const name of (await readdir(migrationsFolder)).sort()) {
    if (name.endsWith('.sql')) hash.update(name).update(await readFile(join(migrationsFolder, name)))
  }
  return hash.digest('hex')
}
