import { boolean, doublePrecision, jsonb, pgTable, text } from 'drizzle-orm/pg-core'
import type { MachineModel } from '#shared/api/models.ts'
import type { Remedy, SpecKey } from '#shared/chart/document.ts'
import type { CauseId, ModelId, ServiceItemId, SpecKeyId } from '#shared/lib/ids.ts'
import { engineKinds, equipmentClasses } from '#shared/trade/equipment.ts'
import { systems } from '#shared/trade/systems.ts'
import type { SpecLimits } from '#shared/units/limits.ts'
import type { Quantity, Unit } from '#shared/units/quantities.ts'
import { moment } from './columns.ts'

/** The shop's causes, contributing ones included. A chart brings what is new by id and never changes what stands here. */
export const causes = pgTable('causes', {
  id: text('id').primaryKey().$type<CauseId>(),
  title: text('title').notNull(),
  system: text('system', { enum: systems }).notNull(),
  isUnsafe: boolean('is_unsafe').notNull(),
  isContributing: boolean('is_contributing').notNull(),
  advice: text('advice'),
  remedy: jsonb('remedy').$type<Remedy>(),
  createdAt: moment('created_at').notNull(),
})

export const serviceItems = pgTable('service_items', {
  id: text('id').primaryKey().$type<ServiceItemId>(),
  title: text('title').notNull(),
  minutes: doublePrecision('minutes'),
  createdAt: moment('created_at').notNull(),
})

export const specKeys = pgTable('spec_keys', {
  id: text('id').primaryKey().$type<SpecKeyId>(),
  title: text('title').notNull(),
  quantity: text('quantity').$type<Quantity>().notNull(),
  unit: text('unit').$type<Unit>().notNull(),
  general: jsonb('general').$type<NonNullable<SpecKey['general']>>(),
  createdAt: moment('created_at').notNull(),
})

/** Equipment models with their spec sheets. */
export const models = pgTable('models', {
  id: text('id').primaryKey().$type<ModelId>(),
  maker: text('maker').notNull(),
  name: text('name').notNull(),
  class: text('class', { enum: equipmentClasses }).notNull(),
  engine: text('engine', { enum: engineKinds }).notNull(),
  limits: jsonb('limits').$type<SpecLimits>().notNull(),
  sources: jsonb('sources').$type<MachineModel['sources']>().notNull(),
  createdAt: moment('created_at').notNull(),
})
