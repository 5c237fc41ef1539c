import { sql } from 'drizzle-orm'
import { boolean, check, doublePrecision, index, integer, jsonb, pgTable, primaryKey, text, uniqueIndex, uuid } from 'drizzle-orm/pg-core'
import type { CauseId, ChartId, DeviceId, EventId, PersonId, WalkId } from '#shared/lib/ids.ts'
import type { Machine, WalkEvent, WalkEventType } from '#shared/walk/events.ts'
import { moment } from './columns.ts'
import { people } from './people.ts'

/** A walk as lists tell it. Everything here is derived from the log and written in the transaction that appends to it. */
export const walks = pgTable(
  'walks',
  {
    id: uuid('id').primaryKey().$type<WalkId>(),
    kind: text('kind', { enum: ['bench', 'practice', 'free'] }).notNull(),
    chartId: text('chart_id').notNull().$type<ChartId>(),
    chartTitle: text('chart_title').notNull(),
    version: integer('version').notNull(),
    machine: jsonb('machine').$type<Machine>().notNull(),
    machineTitle: text('machine_title').notNull(),
    phase: text('phase').notNull(),
    isPaused: boolean('is_paused').notNull(),
    isOpen: boolean('is_open').notNull(),
    standsAt: text('stands_at').notNull(),
    minutesUsed: doublePrecision('minutes_used').notNull(),
    causeId: text('cause_id').$type<CauseId>(),
    causeTitle: text('cause_title'),
    hasQuestion: boolean('has_question').notNull(),
    startedBy: uuid('started_by')
      .notNull()
      .$type<PersonId>()
      .references(() => people.id),
    holderPersonId: uuid('holder_person_id')
      .notNull()
      .$type<PersonId>()
      .references(() => people.id),
    holderDeviceId: uuid('holder_device_id').notNull().$type<DeviceId>(),
    startedAt: moment('started_at').notNull(),
    lastEventAt: moment('last_event_at').notNull(),
    lastSeq: integer('last_seq').notNull(),
  },
  (table) => [
    // Nothing that changes with every event is indexed: the row is then rewritten in place.
    index('walks_started_at_idx').on(table.startedAt.desc(), table.id.desc()),
    check('walks_from_one', sql`${table.lastSeq} >= 1`),
  ],
)

/** Whose walk it is: who started it, and everyone it was handed to. */
export const walkPeople = pgTable(
  'walk_people',
  {
    walkId: uuid('walk_id')
      .notNull()
      .$type<WalkId>()
      .references(() => walks.id),
    personId: uuid('person_id')
      .notNull()
      .$type<PersonId>()
      .references(() => people.id),
  },
  (table) => [primaryKey({ columns: [table.personId, table.walkId] })],
)

/** The log. A trigger refuses to change or remove an event. */
export const walkEvents = pgTable(
  'walk_events',
  {
    id: uuid('id').primaryKey().$type<EventId>(),
    walkId: uuid('walk_id')
      .notNull()
      .$type<WalkId>()
      .references(() => walks.id),
    seq: integer('seq').notNull(),
    type: text('type').$type<WalkEventType>().notNull(),
    personId: uuid('person_id').notNull().$type<PersonId>(),
    deviceId: uuid('device_id').notNull().$type<DeviceId>(),
    /** The event as it was sent. */
    event: jsonb('event').$type<WalkEvent>().notNull(),
    /** Hash of the event without its number: the same tap sent again under another number is still the same tap. */
    bodyHash: text('body_hash').notNull(),
    receivedAt: moment('received_at').notNull(),
  },
  (table) => [uniqueIndex('walk_events_walk_id_seq_key').on(table.walkId, table.seq), check('walk_events_from_one', sql`${table.seq} >= 1`)],
)

/** Events that did not make it into a log, kept for the person who tapped them. The walk itself may never have been started. */
export const walkSideEvents = pgTable(
  'walk_side_events',
  {
    id: uuid('id').primaryKey().$type<EventId>(),
    walkId: uuid('walk_id').notNull().$type<WalkId>(),
    personId: uuid('person_id').notNull().$type<PersonId>(),
    deviceId: uuid('device_id').notNull().$type<DeviceId>(),
    event: jsonb('event').$type<WalkEvent>().notNull(),
    bodyHash: text('body_hash').notNull(),
    status: text('status', { enum: ['fork', 'refused'] }).notNull(),
    code: text('code').notNull(),
    receivedAt: moment('received_at').notNull(),
  },
  (table) => [index('walk_side_events_walk_id_idx').on(table.walkId, table.receivedAt)],
)
