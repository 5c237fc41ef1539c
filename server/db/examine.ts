import { sql } from 'drizzle-orm'

import type { Db } from './client.ts'
import { people } from './schema/people.ts'
import { walkEvents, walks } from './schema/walks.ts'

/** What a look at the database finds; a walk whose log has a hole, or fewer events than its row says, is not whole. */
export type Findings = { readonly people: number; readonly walks: number; readonly events: number; readonly walksWithHoles: readonly string[] }

/** Counts the shop's rows and looks for walk logs that are not whole. */
export async function examine(db: Db): Promise<Findings> {
  const { rows } = await db.execute<{ walk: string }>(sql`
    select w.id::text as walk from ${walks} w left join ${walkEvents} e on e.walk_id = w.id
    group by w.id, w.last_seq having count(e.id) <> w.last_seq or max(e.seq) <> w.last_seq or min(e.seq) <> 1 order by 1`)
  return { people: await db.$count(people), walks: await db.$count(walks), events: await db.$count(walkEvents), walksWithHoles: rows.map((row) => row.walk) }
}
