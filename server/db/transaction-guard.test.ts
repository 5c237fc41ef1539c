import { sql } from 'drizzle-orm'
import { integer, pgTable } from 'drizzle-orm/pg-core'
import { afterAll, beforeAll, describe, expect, test } from 'vitest'

import { createTestDb } from '#tests/support/test-db.ts'
import type { TestDb } from '#tests/support/test-db.ts'

const screws = pgTable('screws', { id: integer('id').primaryKey() })
let testDb: TestDb

beforeAll(async () => {
  testDb = await createTestDb()
  await testDb.db.execute(sql`create table screws (id integer primary key)`)
}, 60_000)
afterAll(() => testDb.close())

describe('use of the outer client inside a transaction', () => {
  const words = /Use the tx/

  test('a statement throws at once, and the transaction is rolled back', async () => {
    const { db } = testDb
    await expect(
      db.transaction(async (tx) => {
        await tx.insert(screws).values({ id: 1 })
        await db.insert(screws).values({ id: 2 })
      }),
    ).rejects.toThrow(words)
    expect(await db.select().from(screws)).toEqual([])
  })

  test('a raw statement, a prepared one, a count and a second transaction throw as well', async () => {
    const { db } = testDb
    const prepared = db.select().from(screws).prepare('all_screws')
    const uses = [() => db.execute(sql`select 1`), () => prepared.execute(), () => db.$count(screws), () => db.transaction(async () => 1)]
    for (const use of uses) {
      await expect(db.transaction(async () => void (await use()))).rejects.toThrow(words)
    }
  })

  test('it is found however deep in the calls it is, and after a wait', async () => {
    const { db } = testDb
    const deep = async (): Promise<void> => {
      await new Promise((resolve) => setImmediate(resolve))
      await db.select().from(screws)
    }
    await expect(db.transaction(async () => deep())).rejects.toThrow(words)
  })

  test('the transaction handed down works, nested ones included, and so does the outer client beside and after it', async () => {
    const { db } = testDb
    let late: Promise<unknown> = Promise.resolve()
    const beside = db.transaction(async (tx) => {
      await tx.transaction(async (inner) => inner.insert(screws).values({ id: 3 }))
      late = new Promise((resolve) => setTimeout(resolve, 50)).then(() => db.select().from(screws))
    })
    const [, rows] = await Promise.all([beside, db.execute(sql`select 1 as one`)])
    expect(rows.rows).toEqual([{ one: 1 }])
    expect(await late).toEqual([{ id: 3 }])
  })
})
