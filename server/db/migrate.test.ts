import { cp, mkdtemp, readFile, rm, writeFile } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'

import { sql } from 'drizzle-orm'
import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, test } from 'vitest'

import { createTestDb } from '#tests/support/test-db.ts'
import type { TestDb } from '#tests/support/test-db.ts'
import { migrate, migrationsFolder } from './migrate.ts'

type Journal = { entries: { idx: number; when: number; tag: string; version: string; breakpoints: boolean }[] }

let testDb: TestDb
let folder: string
beforeAll(async () => {
  testDb = await createTestDb()
}, 60_000)
afterAll(() => testDb.close())
beforeEach(async () => {
  folder = await mkdtemp(join(tmpdir(), 'pullcord-migrations-'))
  await cp(migrationsFolder, folder, { recursive: true })
})
afterEach(() => rm(folder, { recursive: true }))

async function changeJournal(change: (journal: Journal) => void): Promise<void> {
  const path = join(folder, 'meta/_journal.json')
  const journal = JSON.parse(await readFile(path, 'utf8')) as Journal
  change(journal)
  await writeFile(path, JSON.stringify(journal))
}

async function add(tag: string, statements: string, when: (newest: number) => number = (newest) => newest + 1): Promise<void> {
  await writeFile(join(folder, `${tag}.sql`), statements)
  await changeJournal(({ entries }) => {
    const newest = entries.at(-1)?.when ?? 0
    entries.push({ idx: entries.length, when: when(newest), tag, version: '7', breakpoints: true })
  })
}

const listTables = async (): Promise<unknown> => (await testDb.db.execute(sql`select tablename from pg_tables where schemaname = 'public' order by 1`)).rows

/** The refusal's words, once it is sure that no table came or went. */
async function refusalOf(): Promise<string> {
  const before = await listTables()
  const words = await migrate(testDb.db, folder).then(() => 'migrated', String)
  expect(await listTables()).toEqual(before)
  return words
}

describe('migrations', () => {
  test('a database that has them all stays as it is', async () => {
    const { before, after } = await migrate(testDb.db)
    expect(before).toBe(after)
    expect(before).toBeGreaterThan(0)
  })

  test('one that was edited after it was applied is refused, and named', async () => {
    const { entries } = JSON.parse(await readFile(join(folder, 'meta/_journal.json'), 'utf8')) as Journal
    const tag = entries[0]?.tag ?? ''
    await writeFile(join(folder, `${tag}.sql`), 'select 1;')
    expect(await refusalOf()).toMatch(new RegExp(`StartRefusal: The migration ${tag} was edited.*Nothing was changed`))
  })

  test('one that came in late, with a date before the newest applied one, is refused: it would be passed over', async () => {
    await changeJournal(({ entries }) => {
      const newest = entries.at(-1)
      if (newest) newest.when += 1
    })
    expect(await refusalOf()).toMatch(/StartRefusal: The migration .* is not the one that this database applied/)
  })

  test('a journal whose dates do not rise is refused', async () => {
    await add('9000_late', 'create table late (id integer);', (newest) => newest)
    expect(await refusalOf()).toMatch(/StartRefusal: The migration 9000_late is dated no later than/)
  })

  test('a database of a newer version is refused', async () => {
    await changeJournal(({ entries }) => void entries.pop())
    expect(await refusalOf()).toMatch(/a newer version has run here/)
  })

  test('one that fails half-way leaves nothing of itself', async () => {
    await add('9000_broken', 'create table half (id integer);--> statement-breakpoint\ncreate table half (id integer);')
    expect(await refusalOf()).toMatch(/half/)
  })

  test('a new one is applied once, and then the database has it', async () => {
    await add('9000_new', 'create table bolts (id integer);')
    const { before, after } = await migrate(testDb.db, folder)
    expect(after).toBe(before + 1)
    expect(await migrate(testDb.db, folder)).toEqual({ before: after, after })
    expect(JSON.stringify(await listTables())).toContain('bolts')
  })
})
