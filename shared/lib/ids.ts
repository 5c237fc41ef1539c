import { z } from 'zod'

/** Names that every object answers to; as an id they would find what nobody wrote. */
const reserved = new Set(Object.getOwnPropertyNames(Object.prototype))

/** An id inside a chart: letters, digits, dot, dash and underscore, at most 64, beginning with a letter or digit. */
const documentId = z
  .string()
  .regex(/^[A-Za-z0-9][A-Za-z0-9._-]{0,63}$/, 'An id is 1 to 64 letters, digits, dots, dashes or underscores, and begins with a letter or digit.')
  .refine((id) => !reserved.has(id) && id !== 'prototype', 'This word is reserved and cannot be an id.')

/** Names a chart through all its versions. */
export const chartIdSchema = documentId.brand<'ChartId'>()
/** Names a chart through all its versions. */
export type ChartId = z.infer<typeof chartIdSchema>

/** Names a node inside one chart. */
export const nodeIdSchema = documentId.brand<'NodeId'>()
/** Names a node inside one chart. */
export type NodeId = z.infer<typeof nodeIdSchema>

/** A node seen from outside its chart: `chartId/nodeId`. */
export const placeSchema = z
  .string()
  .regex(/^[A-Za-z0-9][A-Za-z0-9._-]{0,63}\/[A-Za-z0-9][A-Za-z0-9._-]{0,63}$/, 'A node is named chart/node, for example no-full-speed/n7.')
  .brand<'Place'>()
/** A node seen from outside its chart: `chartId/nodeId`. */
export type Place = z.infer<typeof placeSchema>

/** Names a node from outside its chart. */
export function toPlace(chartId: ChartId, nodeId: NodeId): Place {
  return `${chartId}/${nodeId}` as Place
}

/** Takes a place apart; both parts of a `Place` have been checked by its schema. */
export function splitPlace(place: Place): { chartId: ChartId; nodeId: NodeId } {
  const slash = place.indexOf('/')
  return { chartId: place.slice(0, slash) as ChartId, nodeId: place.slice(slash + 1) as NodeId }
}

/** Names an outcome inside one node. */
export const outcomeIdSchema = documentId.brand<'OutcomeId'>()
/** Names an outcome inside one node. */
export type OutcomeId = z.infer<typeof outcomeIdSchema>

/** Names a cause, a contributing cause included, in the whole shop. */
export const causeIdSchema = documentId.brand<'CauseId'>()
/** Names a cause, a contributing cause included, in the whole shop. */
export type CauseId = z.infer<typeof causeIdSchema>

/** Names an access state ("clutch cover off"). */
export const accessIdSchema = documentId.brand<'AccessId'>()
/** Names an access state ("clutch cover off"). */
export type AccessId = z.infer<typeof accessIdSchema>

/** Names a caution. */
export const cautionIdSchema = documentId.brand<'CautionId'>()
/** Names a caution. */
export type CautionId = z.infer<typeof cautionIdSchema>

/** Names a key of the spec sheets ("fullSpeed"). */
export const specKeyIdSchema = documentId.brand<'SpecKeyId'>()
/** Names a key of the spec sheets ("fullSpeed"). */
export type SpecKeyId = z.infer<typeof specKeyIdSchema>

/** Names a service item. */
export const serviceItemIdSchema = documentId.brand<'ServiceItemId'>()
/** Names a service item. */
export type ServiceItemId = z.infer<typeof serviceItemIdSchema>

/** Names a safety part that a test may put out of action and must put back. */
export const safetyPartIdSchema = documentId.brand<'SafetyPartId'>()
/** Names a safety part that a test may put out of action and must put back. */
export type SafetyPartId = z.infer<typeof safetyPartIdSchema>

/** Names one physical check that several nodes, in any chart, may ask. */
export const checkIdSchema = documentId.brand<'CheckId'>()
/** Names one physical check that several nodes, in any chart, may ask. */
export type CheckId = z.infer<typeof checkIdSchema>

/** Names an equipment model whose spec sheet the shop keeps. */
export const modelIdSchema = documentId.brand<'ModelId'>()
/** Names an equipment model whose spec sheet the shop keeps. */
export type ModelId = z.infer<typeof modelIdSchema>

/** Names a walk; made by the device that starts it (UUIDv7). An id is a name, never an order. */
export const walkIdSchema = z.uuid().brand<'WalkId'>()
/** Names a walk. */
export type WalkId = z.infer<typeof walkIdSchema>

/** Names an event; made by the device that recorded it, before it is first sent (UUIDv7). */
export const eventIdSchema = z.uuid().brand<'EventId'>()
/** Names an event. */
export type EventId = z.infer<typeof eventIdSchema>

/** Names a person of the shop. */
export const personIdSchema = z.uuid().brand<'PersonId'>()
/** Names a person of the shop. */
export type PersonId = z.infer<typeof personIdSchema>

/** Names a browser on one device; made there once and kept. */
export const deviceIdSchema = z.uuid().brand<'DeviceId'>()
/** Names a browser on one device. */
export type DeviceId = z.infer<typeof deviceIdSchema>

/** Names a photo; made by the device that took it. */
export const photoIdSchema = z.uuid().brand<'PhotoId'>()
/** Names a photo. */
export type PhotoId = z.infer<typeof photoIdSchema>

/** Names a question to the lead; made by the device that asks. */
export const questionIdSchema = z.uuid().brand<'QuestionId'>()
/** Names a question to the lead. */
export type QuestionId = z.infer<typeof questionIdSchema>

/** Names a ticket. */
export const ticketIdSchema = z.uuid().brand<'TicketId'>()
/** Names a ticket. */
export type TicketId = z.infer<typeof ticketIdSchema>
