import { index, jsonb, pgTable, text, uuid } from 'drizzle-orm/pg-core'
import type { PersonId } from '#shared/lib/ids.ts'
import { moment } from './columns.ts'

/** Who did what to whom, for the owner: sign-ins, people, publishing. Never a secret. */
export const auditLog = pgTable(
  'audit_log',
  {
    id: uuid('id').primaryKey(),
    at: moment('at').notNull(),
    /** Null when nobody was signed in. Not a reference: the log outlives what it speaks of. */
    personId: uuid('person_id').$type<PersonId>(),
    act: text('act').notNull(),
    subject: text('subject').notNull(),
    detail: jsonb('detail').$type<Record<string, string | number | boolean | null>>().notNull(),
  },
  (table) => [index('audit_log_at_idx').on(table.at)],
)
