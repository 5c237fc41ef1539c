import { sql } from 'drizzle-orm'
import { boolean, check, index, pgTable, text, uniqueIndex, uuid } from 'drizzle-orm/pg-core'
import type { PersonId } from '#shared/lib/ids.ts'
import { roles } from '#shared/trade/roles.ts'
import { moment } from './columns.ts'

export const people = pgTable(
  'people',
  {
    id: uuid('id').primaryKey().$type<PersonId>(),
    name: text('name').notNull(),
    email: text('email').notNull(),
    role: text('role', { enum: roles }).notNull(),
    /** Null until the person has set one through a one-time link. */
    passwordHash: text('password_hash'),
    isActive: boolean('is_active').notNull().default(true),
    createdAt: moment('created_at').notNull(),
    lastSeenAt: moment('last_seen_at'),
  },
  (table) => [uniqueIndex('people_email_key').on(sql`lower(${table.email})`), check('people_role_known', sql`${table.role} in ('junior', 'lead', 'owner')`)],
)

/** One row a sign-in. The cookie carries the row's id and a secret of which only the hash is kept. */
export const sessions = pgTable(
  'sessions',
  {
    id: uuid('id').primaryKey(),
    personId: uuid('person_id')
      .notNull()
      .$type<PersonId>()
      .references(() => people.id, { onDelete: 'cascade' }),
    secretHash: text('secret_hash').notNull(),
    browser: text('browser').notNull(),
    startedAt: moment('started_at').notNull(),
    lastSeenAt: moment('last_seen_at').notNull(),
  },
  (table) => [index('sessions_person_id_idx').on(table.personId), index('sessions_last_seen_at_idx').on(table.lastSeenAt)],
)

/** What a one-time link may be used for; a link never stands in for one of another purpose. */
export const linkPurposes = ['invite', 'reset', 'first-owner'] as const

/** One-time links and the code for the first owner, kept as hashes only. */
export const oneTimeLinks = pgTable(
  'one_time_links',
  {
    id: uuid('id').primaryKey(),
    purpose: text('purpose', { enum: linkPurposes }).notNull(),
    /** Null for the first owner, who is nobody yet. */
    personId: uuid('person_id')
      .$type<PersonId>()
      .references(() => people.id, { onDelete: 'cascade' }),
    tokenHash: text('token_hash').notNull(),
    createdAt: moment('created_at').notNull(),
    expiresAt: moment('expires_at').notNull(),
    usedAt: moment('used_at'),
  },
  (table) => [
    uniqueIndex('one_time_links_token_hash_key').on(table.tokenHash),
    index('one_time_links_person_id_idx').on(table.personId),
    check('one_time_links_purpose_known', sql`${table.purpose} in ('invite', 'reset', 'first-owner')`),
    check('one_time_links_person_named', sql`(${table.purpose} = 'first-owner') = (${table.personId} is null)`),
  ],
)
