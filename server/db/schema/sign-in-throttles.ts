import { index, integer, pgTable, text } from 'drizzle-orm/pg-core'
import { moment } from './columns.ts'

/** Tries counted in windows of time; in the database so that a restart, or another process of the same shop, forgets none. */
export const signInThrottles = pgTable(
  'sign_in_throttles',
  {
    /** What is counted, and the hash of whom: an account, a browser, a network address. */
    key: text('key').primaryKey(),
    tries: integer('tries').notNull(),
    endsAt: moment('ends_at').notNull(),
  },
  (table) => [index('sign_in_throttles_ends_at_idx').on(table.endsAt)],
)
