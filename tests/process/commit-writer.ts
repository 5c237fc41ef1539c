import { sql } from 'drizzle-orm'

import { holdFolder } from '#server/db/folder-lock.ts'
import { openDatabase } from '#server/db/open-database.ts'

/** Writes rows one after the other and says each number once its commit is acknowledged, until it is killed. */
const hold = await holdFolder(process.argv[2] ?? '', 'writer')
const { db } = await openDatabase({ hold })
await db.execute(sql`create table if not exists rows_of_test (id integer primary key)`)
const { rows } = await db.execute<{ id: number }>(sql`select id from rows_of_test order by id`)
process.stdout.write(`found ${rows.map((row) => row.id).join(',')}\n`)
for (let id = (rows.at(-1)?.id ?? 0) + 1; ; id += 1) {
  await db.transaction(async (tx) => tx.execute(sql`insert into rows_of_test values (${id})`))
  process.stdout.write(`${id}\n`)
}
