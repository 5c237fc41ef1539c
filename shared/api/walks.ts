import { z } from 'zod'
import { chartIdSchema, deviceIdSchema, eventIdSchema, personIdSchema, walkIdSchema } from '#shared/lib/ids.ts'
import { batchMaxEvents, machineSchema, walkEventSchema } from '#shared/walk/events.ts'
import { chartVersionSchema } from './charts.ts'
import { momentSchema } from './contract.ts'

/** What became of one event of a batch. */
export const eventStatuses = ['appended', 'duplicate', 'gap', 'fork', 'refused', 'conflict'] as const

/** The answer to a batch: one result an event, in order, and the last number of the server's log. Always 200 when the batch could be read. */
export const batchResultSchema = z.strictObject({
  results: z.array(z.strictObject({ id: eventIdSchema, status: z.enum(eventStatuses), code: z.string().optional() })),
  lastSeq: z.number().int(),
})
/** The answer to a batch. */
export type BatchResult = z.infer<typeof batchResultSchema>

/** A walk in a list: where it stands, told without its log. */
export const walkRowSchema = z.strictObject({
  id: walkIdSchema,
  kind: z.enum(['bench', 'practice', 'free']),
  chartId: chartIdSchema,
  chartTitle: z.string(),
  version: z.number().int(),
  machine: machineSchema,
  machineTitle: z.string(),
  phase: z.string(),
  isPaused: z.boolean(),
  isOpen: z.boolean(),
  /** The page where it stands, in words: "check 6 · compression". */
  standsAt: z.string(),
  minutesUsed: z.number(),
  causeTitle: z.string().nullable(),
  hasQuestion: z.boolean(),
  startedBy: z.strictObject({ id: personIdSchema, name: z.string() }),
  heldBy: z.strictObject({ personId: personIdSchema, name: z.string(), deviceId: deviceIdSchema }),
  startedAt: momentSchema,
  lastEventAt: momentSchema,
  lastSeq: z.number().int(),
})
/** A walk in a list. */
export type WalkRow = z.infer<typeof walkRowSchema>

const params = z.strictObject({ id: walkIdSchema })

/** GET /api/walks: one's own (started by, or handed to); a lead may ask for the shop's. Newest first, a page at a time. */
export const listWalks = {
  query: z.strictObject({
    scope: z.enum(['mine', 'shop']).optional(),
    state: z.enum(['open', 'ended', 'all']).optional(),
    page: z.coerce.number().int().min(1).max(10_000).optional(),
  }),
  response: z.strictObject({ walks: z.array(walkRowSchema), page: z.number().int(), hasMore: z.boolean() }),
}
/** POST /api/walks: the same as appending event 1 to a new walk. */
export const startWalk = { body: z.strictObject({ id: walkIdSchema, event: walkEventSchema }), response: batchResultSchema }
/** GET /api/walks/:id: the log with the pinned chart versions, all that replay needs, and who held the pen. */
export const getWalk = {
  params,
  response: z.strictObject({
    walk: walkRowSchema,
    events: z.array(walkEventSchema),
    charts: z.array(chartVersionSchema),
    /** Names of the people that the events mention. */
    people: z.record(personIdSchema, z.string()),
    lastSeq: z.number().int(),
  }),
}
/** POST /api/walks/:id/events: a batch, idempotent by event id, judged in order in one transaction. */
export const postEvents = { params, body: z.strictObject({ events: z.array(walkEventSchema).min(1).max(batchMaxEvents) }), response: batchResultSchema }

/** An event that did not make it into the log, kept for the person who tapped it. */
export const sideEventSchema = z.strictObject({
  event: walkEventSchema,
  status: z.enum(['fork', 'refused']),
  code: z.string(),
  receivedAt: momentSchema,
})
/** GET /api/walks/:id/side-events: one's own; all of them for a lead. */
export const listSideEvents = { params, response: z.strictObject({ sideEvents: z.array(sideEventSchema) }) }
