import { sql } from 'drizzle-orm'
import { afterAll, beforeAll, describe, expect, test } from 'vitest'

import { createTestDb } from '#tests/support/test-db.ts'
import type { TestDb } from '#tests/support/test-db.ts'
import { isUniqueViolation, readSqlState } from './sql-state.ts'

let testDb: TestDb
beforeAll(async () => {
  testDb = await createTestDb()
  await testDb.db.execute(sql`create table nuts (id integer constraint nuts_id primary key)`)
}, 60_000)
afterAll(() => testDb.close())

async function failureOf(statement: string): Promise<unknown> {
  return testDb.db.execute(sql.raw(statement)).then(() => null, (error: unknown) => error)
}

describe('the state of a failed statement', () => {
  test('a second row with the same key is told from other failures, and by the name of its constraint', async () => {
    const failure = await failureOf('insert into nuts values (1), (1)')
    expect(isUniqueViolation(failure)).toBe(true)
    expect(isUniqueViolation(failure, 'nuts_id')).toBe(true)
    expect(isUniqueViolation(failure, 'bolts_id')).toBe(false)
    expect(isUniqueViolation(await failureOf('insert into nuts values (null)'))).toBe(false)
  })

  test('anything else has its own state, and what did not come from the database has none', async () => {
    expect(readSqlState(await failureOf('select * from nowhere'))).toBe('42P01')
    expect(readSqlState(new Error('no'))).toBe(null)
    expect(readSqlState('no')).toBe(null)
  })
})
