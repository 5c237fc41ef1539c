import { sql } from 'drizzle-orm'
import { check, customType, foreignKey, index, integer, jsonb, pgTable, primaryKey, text, uuid } from 'drizzle-orm/pg-core'
import type { ChartDocument } from '#shared/chart/document.ts'
import type { ChartId, NodeId, PersonId } from '#shared/lib/ids.ts'
import type { EngineKind, EquipmentClass } from '#shared/trade/equipment.ts'
import { moment } from './columns.ts'
import { people } from './people.ts'

const tsvector = customType<{ data: string }>({ dataType: () => 'tsvector' })
const savedBy = () =>
  uuid('saved_by')
    .notNull()
    .$type<PersonId>()
    .references(() => people.id)

export const charts = pgTable('charts', {
  id: text('id').primaryKey().$type<ChartId>(),
  /** Title of the newest version, or of the draft while nothing is published. */
  title: text('title').notNull(),
  /** Number of the newest published version. */
  version: integer('version'),
  createdAt: moment('created_at').notNull(),
})

export const chartDrafts = pgTable('chart_drafts', {
  chartId: text('chart_id')
    .primaryKey()
    .$type<ChartId>()
    .references(() => charts.id),
  document: jsonb('document').$type<ChartDocument>().notNull(),
  contentHash: text('content_hash').notNull(),
  revision: integer('revision').notNull(),
  savedAt: moment('saved_at').notNull(),
  savedBy: savedBy(),
})

/** The last saved states of a draft, for restoring one. */
export const chartDraftRevisions = pgTable(
  'chart_draft_revisions',
  {
    chartId: text('chart_id')
      .notNull()
      .$type<ChartId>()
      .references(() => charts.id),
    revision: integer('revision').notNull(),
    document: jsonb('document').$type<ChartDocument>().notNull(),
    savedAt: moment('saved_at').notNull(),
    savedBy: savedBy(),
  },
  (table) => [primaryKey({ columns: [table.chartId, table.revision] })],
)

/** Published versions. A trigger refuses to change or remove one. */
export const chartVersions = pgTable(
  'chart_versions',
  {
    chartId: text('chart_id')
      .notNull()
      .$type<ChartId>()
      .references(() => charts.id),
    version: integer('version').notNull(),
    document: jsonb('document').$type<ChartDocument>().notNull(),
    contentHash: text('content_hash').notNull(),
    changeNote: text('change_note').notNull(),
    publishedAt: moment('published_at').notNull(),
    publishedBy: uuid('published_by')
      .notNull()
      .$type<PersonId>()
      .references(() => people.id),
  },
  (table) => [primaryKey({ columns: [table.chartId, table.version] }), check('chart_versions_from_one', sql`${table.version} >= 1`)],
)

/** What the symptom search reads: one row for every start of every newest version, written when it is published. */
export const chartSymptoms = pgTable(
  'chart_symptoms',
  {
    chartId: text('chart_id').notNull().$type<ChartId>(),
    startId: text('start_id').notNull().$type<NodeId>(),
    version: integer('version').notNull(),
    title: text('title').notNull(),
    chartTitle: text('chart_title').notNull(),
    classes: jsonb('classes').$type<EquipmentClass[]>().notNull(),
    engines: jsonb('engines').$type<EngineKind[]>().notNull(),
    /** The chart's search words as written. */
    words: text('words').array().notNull(),
    /** All of it in lower case without accents, for likeness. */
    plain: text('plain').notNull(),
    search: tsvector('search').notNull(),
  },
  (table) => [
    primaryKey({ columns: [table.chartId, table.startId] }),
    foreignKey({ columns: [table.chartId, table.version], foreignColumns: [chartVersions.chartId, chartVersions.version] }),
    index('chart_symptoms_search_idx').using('gin', table.search),
    index('chart_symptoms_plain_idx').using('gin', sql`${table.plain} gin_trgm_ops`),
  ],
)
