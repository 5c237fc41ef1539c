import { sql } from 'drizzle-orm'
import { boolean, check, integer, jsonb, pgTable, text } from 'drizzle-orm/pg-core'
import type { NumberFormat } from '#shared/units/number-format.ts'
import { moment } from './columns.ts'

/** The one row of shop settings: a database is one shop. */
export const shops = pgTable(
  'shops',
  {
    id: integer('id').primaryKey(),
    name: text('name').notNull(),
    numberFormat: jsonb('number_format').$type<NumberFormat>().notNull(),
    isDemo: boolean('is_demo').notNull(),
    createdAt: moment('created_at').notNull(),
  },
  (table) => [check('shops_one_row', sql`${table.id} = 1`)],
)
