import { readFile } from 'node:fs/promises'
import { fileURLToPath } from 'node:url'

import { sql } from 'drizzle-orm'
import { readMigrationFiles } from 'drizzle-orm/migrator'
import type { MigrationMeta } from 'drizzle-orm/migrator'
import type { PgDialect, PgSession } from 'drizzle-orm/pg-core'
import { z } from 'zod'

import { StartRefusal } from '#server/lib/start-refusal.ts'
import type { Db } from './client.ts'

/** Where the migrations of this version lie. */
export const migrationsFolder = fileURLToPath(new URL('../../drizzle', import.meta.url))

type Applied = { readonly hash: string; readonly when: number }
const appliedSchema = z.array(z.object({ hash: z.string(), when: z.coerce.number() }))
const journalSchema = z.object({ entries: z.array(z.object({ tag: z.string(), when: z.number() })) })

/**
 * Brings the database to the schema of this version; answers how many migrations were applied before and now. The migrator itself
 * compares nothing but the newest moment: it passes over a migration that came in late, never notices an edited one, and says success
 * both times. So the journal is compared with the table, one by one, before and after; a difference is refused with nothing changed.
 */
export async function migrate(db: Db, folder = migrationsFolder): Promise<{ readonly before: number; readonly after: number }> {
  const tags = await readTags(folder)
  const migrations = readMigrationFiles({ migrationsFolder: folder })
  const before = await listApplied(db)
  refuseDifference(before, migrations, tags)
  // The migrator of either driver is these two lines; the internal fields are those that it reads.
  const { dialect, session } = db as unknown as { readonly dialect: PgDialect; readonly session: PgSession }
  if (before.length < migrations.length) await dialect.migrate(migrations, session, { migrationsFolder: folder })
  const after = await listApplied(db)
  refuseDifference(after, migrations, tags)
  if (after.length !== migrations.length) throw new StartRefusal(`Only ${after.length} of ${migrations.length} migrations were applied, without an error. ${wayOut}`)
  return { before: before.length, after: after.length }
}

const wayOut = 'Nothing was changed. Start the version of Pullcord that last ran here, or take the migrations from a fresh copy of this one.'

/** Reads the journal and refuses one whose moments don't rise: a migration with an older moment would be passed over. */
async function readTags(folder: string): Promise<readonly string[]> {
  const { entries } = journalSchema.parse(JSON.parse(await readFile(`${folder}/meta/_journal.json`, 'utf8')))
  for (const [index, entry] of entries.entries()) {
    const earlier = entries[index - 1]
    if (earlier && earlier.when >= entry.when) {
      throw new StartRefusal(`The migration ${entry.tag} is dated no later than ${earlier.tag}, so databases that have the earlier one would pass over it. ${wayOut}`)
    }
  }
  return entries.map((entry) => entry.tag)
}

async function listApplied(db: Db): Promise<readonly Applied[]> {
  const there = await db.execute(sql`select 1 from information_schema.tables where table_schema = 'drizzle' and table_name = '__drizzle_migrations'`)
  if (there.rows.length === 0) return []
  const { rows } = await db.execute(sql`select hash, created_at::text as "when" from drizzle.__drizzle_migrations order by id`)
  return appliedSchema.parse(rows)
}

function refuseDifference(applied: readonly Applied[], migrations: readonly MigrationMeta[], tags: readonly string[]): void {
  for (const [index, row] of applied.entries()) {
    const ours = migrations[index]
    if (!ours) {
      throw new StartRefusal(`The database has ${applied.length} migrations and this version of Pullcord knows ${migrations.length}: a newer version has run here. ${wayOut}`)
    }
    if (ours.hash === row.hash && ours.folderMillis === row.when) continue
    const tag = tags[index] ?? String(index)
    throw new StartRefusal(
      ours.folderMillis === row.when
        ? `The migration ${tag} was edited after this database had applied it. ${wayOut}`
        : `The migration ${tag} is not the one that this database applied in its place: one was skipped or slipped in. ${wayOut}`,
    )
  }
}
