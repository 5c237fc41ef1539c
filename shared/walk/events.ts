import { z } from 'zod'
import {
  accessIdSchema,
  causeIdSchema,
  cautionIdSchema,
  chartIdSchema,
  deviceIdSchema,
  eventIdSchema,
  modelIdSchema,
  nodeIdSchema,
  outcomeIdSchema,
  personIdSchema,
  photoIdSchema,
  placeSchema,
  questionIdSchema,
  serviceItemIdSchema,
  ticketIdSchema,
  walkIdSchema,
} from '#shared/lib/ids.ts'
import { engineKinds, equipmentClasses } from '#shared/trade/equipment.ts'
import { specLimitSchema, specLimitsSchema, unitSchema } from '#shared/units/limits.ts'
import { refusalWords } from './refusals.ts'

/** Most that a note may hold, in bytes of UTF-8. */
export const noteMaxBytes = 10_000
/** Most events that one batch may hold. */
export const batchMaxEvents = 500

/** Length of a text in bytes of UTF-8, counted without an encoder so that every platform agrees. */
function utf8Length(text: string): number {
  let bytes = 0
  for (const char of text) {
    const code = char.codePointAt(0) ?? 0
    bytes += code < 0x80 ? 1 : code < 0x800 ? 2 : code < 0x10000 ? 3 : 4
  }
  return bytes
}

const note = z.string().refine((text) => utf8Length(text) <= noteMaxBytes, refusalWords['note-too-long'])
const filledNote = note.refine((text) => text.trim() !== '', 'Write a word.')
const word = z.string().trim().min(1, 'Write a word.').max(200, 'At most 200 characters.')
const seconds = z
  .number()
  .min(0)
  .max(86_400 * 30)
const photoIds = z.array(photoIdSchema).max(20)

/** The machine on the bench. */
export const machineSchema = z.strictObject({
  class: z.enum(equipmentClasses),
  engine: z.enum(engineKinds),
  modelId: modelIdSchema.optional(),
  serial: z.string().trim().max(100).optional(),
  ticketId: ticketIdSchema.optional(),
})
/** The machine on the bench. */
export type Machine = z.infer<typeof machineSchema>

/** An answer to the node that a proof compares with, taken on the proof's own page before the change. */
const beforeSchema = z.strictObject({ outcome: outcomeIdSchema, value: z.number().optional(), unit: unitSchema.optional() })

/** One payload schema for every type of event. A node is named with its chart, `chartId/nodeId`, since a walk may cross several. */
export const payloadSchemas = {
  started: z.strictObject({
    kind: z.enum(['bench', 'practice', 'free']),
    chartId: chartIdSchema,
    startId: nodeIdSchema,
    /** The published version of every chart in reach of the first one, the first included. */
    pins: z.record(chartIdSchema, z.number().int().min(1)),
    machine: machineSchema,
    limits: specLimitsSchema,
  }),
  'machine-identified': z.strictObject({ machine: machineSchema, limits: specLimitsSchema }),
  'caution-acknowledged': z.strictObject({ node: placeSchema, cautionIds: z.array(cautionIdSchema).min(1).max(200) }),
  'step-done': z.strictObject({ node: placeSchema, seconds }),
  'finding-recorded': z.strictObject({
    node: placeSchema,
    outcome: outcomeIdSchema,
    value: z.number().optional(),
    /** All values taken where a reading repeats; the last one counts. */
    values: z.array(z.number()).min(1).max(20).optional(),
    unit: unitSchema.optional(),
    /** What the fingers typed, kept as it was. */
    typed: z.string().max(200).optional(),
    limits: specLimitSchema.optional(),
    judgedBy: z.enum(['limits', 'hand']),
    before: beforeSchema.optional(),
    /** The event whose answer is recorded again. */
    reuses: eventIdSchema.optional(),
    note: note.optional(),
    photoIds,
    seconds,
  }),
  'check-skipped': z.strictObject({ node: placeSchema, why: z.enum(['not-sure', 'cannot', 'not-reproduced']), note: note.optional() }),
  noticed: z.strictObject({
    node: placeSchema,
    outcome: outcomeIdSchema.optional(),
    value: z.number().optional(),
    unit: unitSchema.optional(),
    note: note.optional(),
    photoIds,
  }),
  'access-changed': z.strictObject({ opened: z.array(accessIdSchema).max(50), closed: z.array(accessIdSchema).max(50) }),
  'stepped-back': z.strictObject({ toEventId: eventIdSchema }),
  jumped: z.strictObject({
    chartId: chartIdSchema,
    version: z.number().int().min(1),
    startId: nodeIdSchema,
    /** Versions of charts newly in reach; those pinned before stay as they are. */
    pins: z.record(chartIdSchema, z.number().int().min(1)),
  }),
  'suspect-named': z.strictObject({ causeId: causeIdSchema }),
  'cause-proven': z.strictObject({
    causeId: causeIdSchema,
    proofEventId: eventIdSchema.optional(),
    sight: z.strictObject({ photoIds, note: filledNote }).optional(),
  }),
  'cause-not-proven': z.strictObject({
    causeId: causeIdSchema,
    proofEventId: eventIdSchema.optional(),
    sight: z.strictObject({ photoIds, note: filledNote }).optional(),
  }),
  'contributing-set': z.strictObject({ causeIds: z.array(causeIdSchema).max(50) }),
  'service-changed': z.strictObject({ added: z.array(serviceItemIdSchema).max(50), dropped: z.array(serviceItemIdSchema).max(50) }),
  asked: z.strictObject({ questionId: questionIdSchema, text: filledNote, photoIds }),
  answered: z.strictObject({ questionId: questionIdSchema, text: filledNote, photoIds, goTo: placeSchema.optional() }),
  escalated: z.strictObject({ reason: filledNote }),
  held: z.strictObject({ tagNo: word, why: filledNote }),
  paused: z.strictObject({ why: note.optional() }),
  resumed: z.strictObject({ why: note.optional() }),
  'handed-over': z.strictObject({ to: personIdSchema, why: note.optional() }),
  'taken-over': z.strictObject({ from: personIdSchema, why: filledNote }),
  'repair-done': z.strictObject({
    serviceDone: z.array(serviceItemIdSchema).max(200),
    partsUsed: z.array(z.strictObject({ title: word, quantity: z.number().min(0).max(1000) })).max(100),
    minutes: z.number().min(0).max(100_000),
  }),
  ticked: z.strictObject({ list: z.enum(['fix', 'service', 'run']), id: z.string().min(1).max(100), on: z.boolean() }),
  'run-passed': z.strictObject({ items: z.array(z.lazy(() => runItemSchema)).max(100) }),
  'run-failed': z.strictObject({ items: z.array(z.lazy(() => runItemSchema)).max(100), note: note.optional() }),
  'note-added': z.strictObject({ text: filledNote, photoIds }),
  flagged: z.strictObject({ node: placeSchema, text: filledNote, photoIds }),
  'check-noted': z.strictObject({ title: word, found: filledNote, photoIds }),
  'cause-noted': z.strictObject({ causeId: causeIdSchema.optional(), title: word.optional(), note: note.optional() }),
  closed: z.strictObject({
    result: z.enum(['repaired', 'no-cause-found', 'not-reproduced', 'held', 'not-repaired', 'referred']),
    why: note.optional(),
  }),
  abandoned: z.strictObject({ why: filledNote }),
} as const

/** One item of the hand-back run as it was found. */
const runItemSchema = z.strictObject({
  id: z.string().min(1).max(100),
  result: z.enum(['ok', 'failed', 'not-applicable']),
  value: z.number().optional(),
  unit: unitSchema.optional(),
})
/** One item of the hand-back run as it was found. */
export type RunItem = z.infer<typeof runItemSchema>

/** Types of event, past tense, never renamed. */
export type WalkEventType = keyof typeof payloadSchemas

/** What every event carries around its payload. */
const envelope = {
  id: eventIdSchema,
  walkId: walkIdSchema,
  /** From 1, without holes. */
  seq: z.number().int().min(1).max(1_000_000),
  /** Device time, ISO 8601 in UTC. A name for the moment, never an order: order is `seq`. */
  at: z.iso.datetime(),
  deviceId: deviceIdSchema,
  personId: personIdSchema,
}

/** An event whose payload lies flat beside its envelope. */
function eventOf<Type extends WalkEventType>(type: Type) {
  return z.strictObject({ ...envelope, type: z.literal(type), payload: payloadSchemas[type] })
}

/** An event of a walk: envelope, `type` and `payload`. */
export const walkEventSchema = z.discriminatedUnion('type', [
  eventOf('started'),
  eventOf('machine-identified'),
  eventOf('caution-acknowledged'),
  eventOf('step-done'),
  eventOf('finding-recorded'),
  eventOf('check-skipped'),
  eventOf('noticed'),
  eventOf('access-changed'),
  eventOf('stepped-back'),
  eventOf('jumped'),
  eventOf('suspect-named'),
  eventOf('cause-proven'),
  eventOf('cause-not-proven'),
  eventOf('contributing-set'),
  eventOf('service-changed'),
  eventOf('asked'),
  eventOf('answered'),
  eventOf('escalated'),
  eventOf('held'),
  eventOf('paused'),
  eventOf('resumed'),
  eventOf('handed-over'),
  eventOf('taken-over'),
  eventOf('repair-done'),
  eventOf('ticked'),
  eventOf('run-passed'),
  eventOf('run-failed'),
  eventOf('note-added'),
  eventOf('flagged'),
  eventOf('check-noted'),
  eventOf('cause-noted'),
  eventOf('closed'),
  eventOf('abandoned'),
])
/** An event of a walk. */
export type WalkEvent = z.infer<typeof walkEventSchema>
/** An event of one given type. */
export type EventOf<Type extends WalkEventType> = Extract<WalkEvent, { type: Type }>
/** A finding: what someone recorded at a check, a reading or a proof. */
export type Finding = EventOf<'finding-recorded'>
