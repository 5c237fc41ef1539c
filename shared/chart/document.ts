import { z } from 'zod'
import {
  accessIdSchema,
  causeIdSchema,
  cautionIdSchema,
  chartIdSchema,
  checkIdSchema,
  nodeIdSchema,
  outcomeIdSchema,
  photoIdSchema,
  safetyPartIdSchema,
  serviceItemIdSchema,
  specKeyIdSchema,
} from '#shared/lib/ids.ts'
import { engineKinds, equipmentClasses } from '#shared/trade/equipment.ts'
import { causeGrades, likelihoodGrades } from '#shared/trade/node-kinds.ts'
import { harms, signalWords } from '#shared/trade/signal-words.ts'
import { systems } from '#shared/trade/systems.ts'
import { printedLimitSchema, unitSchema } from '#shared/units/limits.ts'
import { quantities, type Quantity } from '#shared/units/quantities.ts'

/** The format version that this program writes. */
export const currentFormatVersion = 1

/** One line of text. */
const line = z.string().max(500)
/** A paragraph. */
const text = z.string().max(10_000)
/** Bench minutes, never negative. */
const minutes = z.number().min(0).max(10_000)

const classSchema = z.enum(equipmentClasses)
const engineSchema = z.enum(engineKinds)
const quantitySchema = z.enum(quantities as [Quantity, ...Quantity[]])

/** Where a fact comes from; nothing is claimed that the mark does not cover. */
export const sourceSchema = z.strictObject({
  mark: z.enum(['read', 'from memory', 'common practice', 'own arithmetic']),
  title: line.optional(),
  year: z.number().int().min(1800).max(2200).optional(),
  section: line.optional(),
})
/** Where a fact comes from. */
export type Source = z.infer<typeof sourceSchema>

/** Limits of a reading: a key of the spec sheets, numbers in the node's unit, or figures as printed. */
export const limitsSchema = z.union([
  z.strictObject({ spec: specKeyIdSchema }),
  z.strictObject({ as: z.array(printedLimitSchema).min(1).max(6) }),
  z.strictObject({ min: z.number().optional(), max: z.number().optional() }),
])
/** Limits of a reading as the chart states them. */
export type ChartLimits = z.infer<typeof limitsSchema>

/** An end of a band: a limit of the reading, or a number in the node's unit. */
const bandEndSchema = z.union([z.literal('min'), z.literal('max'), z.number()])

/** The values that stand for one outcome; a missing end is open to infinity, an end is excluded unless it says included. */
export const bandSchema = z.strictObject({
  outcome: outcomeIdSchema,
  from: bandEndSchema.optional(),
  fromIncluded: z.boolean().optional(),
  to: bandEndSchema.optional(),
  toIncluded: z.boolean().optional(),
})
/** The values that stand for one outcome of a reading. */
export type Band = z.infer<typeof bandSchema>

/** One possible answer. Two to nine stand on a check; their order gives the balloons 1 to 9. */
export const outcomeSchema = z.strictObject({
  id: outcomeIdSchema,
  title: line,
  normal: z.boolean().optional(),
  serviceable: z.boolean().optional(),
  serviceItem: serviceItemIdSchema.optional(),
  reproduced: z.boolean().optional(),
  confirms: z.boolean().optional(),
  seen: text.optional(),
})
/** One possible answer of a check. */
export type Outcome = z.infer<typeof outcomeSchema>

/** A picture of what good looks like: a file shipped beside the chart, or a photo of the shop. */
export const pictureSchema = z.strictObject({ file: line.optional(), photoId: photoIdSchema.optional(), alt: line })

/** For which machines a node is meant; on any other the walk passes it. Absent lists mean any. */
export const onlyForSchema = z.strictObject({
  classes: z.array(classSchema).optional(),
  engines: z.array(engineSchema).optional(),
  otherwise: nodeIdSchema.optional(),
})

/** What any node may carry. */
const anyNode = {
  id: nodeIdSchema,
  title: line.optional(),
  do: text.optional(),
  good: text.optional(),
  why: text.optional(),
  minutes: minutes.optional(),
  picture: pictureSchema.optional(),
  machine: z.enum(['running', 'stopped']).optional(),
  needs: z.array(accessIdSchema).max(50).optional(),
  needsOneOf: z.array(z.array(accessIdSchema).max(50)).max(9).optional(),
  closed: z.array(accessIdSchema).max(50).optional(),
  cautions: z.array(cautionIdSchema).max(50).optional(),
  defeats: z.array(safetyPartIdSchema).max(20).optional(),
  restores: z.array(safetyPartIdSchema).max(20).optional(),
  tools: z.array(line).max(30).optional(),
  timer: z.strictObject({ seconds: z.number().min(1).max(86_400), rule: z.enum(['at-most', 'at-least']), missed: line.optional() }).optional(),
  onlyFor: onlyForSchema.optional(),
  source: sourceSchema.optional(),
}

/** What any node with outcomes may carry. */
const anyDecision = {
  ...anyNode,
  outcomes: z.array(outcomeSchema).max(50),
  checkId: checkIdSchema.optional(),
  sameAs: nodeIdSchema.optional(),
  misleads: z.number().min(0).max(1).optional(),
  rows: z.record(causeIdSchema, z.record(outcomeIdSchema, z.enum(likelihoodGrades))).optional(),
  ifSkipped: outcomeIdSchema.optional(),
}

const startSchema = z.strictObject({ ...anyNode, kind: z.literal('start') })
const stepSchema = z.strictObject({ ...anyNode, kind: z.literal('step') })
const checkSchema = z.strictObject({ ...anyDecision, kind: z.literal('check'), reproduces: z.boolean().optional() })
const readingSchema = z.strictObject({
  ...anyDecision,
  kind: z.literal('reading'),
  reproduces: z.boolean().optional(),
  quantity: quantitySchema,
  unit: unitSchema,
  limits: limitsSchema.optional(),
  bands: z.array(bandSchema).max(50).optional(),
  repeat: z.strictObject({ equal: z.number().int().min(2).max(9), within: z.number().min(0), atMost: z.number().int().min(2).max(20) }).optional(),
})
const proofSchema = z.strictObject({
  ...anyDecision,
  kind: z.literal('proof'),
  suspect: causeIdSchema.optional(),
  by: z.enum(['isolation', 'put-right', 'sight']).optional(),
  change: line.optional(),
  afterwards: z.enum(['put-back', 'keep']).optional(),
  compares: z.strictObject({ node: nodeIdSchema, confirmsWhen: z.array(outcomeIdSchema).max(9).optional() }).optional(),
})
const causeNodeSchema = z.strictObject({ ...anyNode, kind: z.literal('cause'), causeId: causeIdSchema })
const jumpSchema = z.strictObject({
  ...anyNode,
  kind: z.literal('jump'),
  chart: chartIdSchema.optional(),
  at: nodeIdSchema.optional(),
  returns: z.boolean().optional(),
  pick: z.literal('symptom').optional(),
})
const escalateSchema = z.strictObject({ ...anyNode, kind: z.literal('escalate'), reason: line.optional() })
const holdSchema = z.strictObject({ ...anyNode, kind: z.literal('hold'), causeId: causeIdSchema.optional() })
const backSchema = z.strictObject({ ...anyNode, kind: z.literal('back') })

/** A node of a chart; its `kind` decides its other fields. */
export const nodeSchema = z.discriminatedUnion('kind', [
  startSchema,
  stepSchema,
  checkSchema,
  readingSchema,
  proofSchema,
  causeNodeSchema,
  jumpSchema,
  escalateSchema,
  holdSchema,
  backSchema,
])
/** A node of a chart. */
export type ChartNode = z.infer<typeof nodeSchema>
/** A node with outcomes. */
export type DecisionNode = Extract<ChartNode, { kind: 'check' | 'reading' | 'proof' }>
/** A node that asks for a measured value. */
export type ReadingNode = Extract<ChartNode, { kind: 'reading' }>
/** A node that isolates one suspect. */
export type ProofNode = Extract<ChartNode, { kind: 'proof' }>
/** A node of one given kind. */
export type NodeOf<Kind extends ChartNode['kind']> = Extract<ChartNode, { kind: Kind }>

/** Where an outcome leads; the edge of a node without outcomes carries none. */
export const edgeSchema = z.strictObject({ from: nodeIdSchema, outcome: outcomeIdSchema.optional(), to: nodeIdSchema })
/** Where an outcome leads. */
export type ChartEdge = z.infer<typeof edgeSchema>

/** What can hurt someone, and how to avoid it. `again` makes it pending once more when one of these changed. */
export const cautionSchema = z.strictObject({
  id: cautionIdSchema,
  word: z.enum(signalWords),
  harm: z.enum(harms),
  hazard: text,
  consequence: text.optional(),
  avoid: text,
  standing: z.boolean().optional(),
  /** Access states, safety parts, or the word `running`. */
  again: z.array(z.string().max(64)).max(50).optional(),
  source: sourceSchema.optional(),
})
/** A caution of a chart. */
export type Caution = z.infer<typeof cautionSchema>

/** A state of the machine that costs minutes once and then serves several checks. */
export const accessSchema = z.strictObject({
  id: accessIdSchema,
  title: line,
  minutes,
  closeMinutes: minutes.optional(),
  waitMinutes: minutes.optional(),
  needs: z.array(accessIdSchema).max(50).optional(),
  excludes: z.array(accessIdSchema).max(50).optional(),
  cautions: z.array(cautionIdSchema).max(50).optional(),
  trap: text.optional(),
})
/** A state of the machine that costs minutes once. */
export type Access = z.infer<typeof accessSchema>

/** What puts a cause right. Minutes are bench minutes. */
export const remedySchema = z.strictObject({
  text,
  minutes: minutes.optional(),
  parts: z
    .array(z.strictObject({ title: line, quantity: z.number().min(0).max(1000) }))
    .max(50)
    .optional(),
})
/** What puts a cause right. */
export type Remedy = z.infer<typeof remedySchema>

/** A cause of the shop's library, as this version of the chart knows it. */
export const causeSchema = z.strictObject({
  id: causeIdSchema,
  title: line,
  system: z.enum(systems),
  grade: z.enum(causeGrades).optional(),
  unsafe: z.boolean().optional(),
  contributing: z.boolean().optional(),
  advice: text.optional(),
  remedy: remedySchema.optional(),
})
/** A cause, or a contributing cause. */
export type Cause = z.infer<typeof causeSchema>

/** Work for the way out that is not the cause. */
export const serviceItemSchema = z.strictObject({ id: serviceItemIdSchema, title: line, minutes: minutes.optional() })
/** Work for the way out that is not the cause. */
export type ServiceItem = z.infer<typeof serviceItemSchema>

/** A key of the spec sheets, with values that hold in general where a model has none of its own. */
export const specKeySchema = z.strictObject({
  id: specKeyIdSchema,
  title: line,
  quantity: quantitySchema,
  unit: unitSchema,
  general: z
    .array(
      z.strictObject({
        classes: z.array(classSchema).optional(),
        engines: z.array(engineSchema).optional(),
        min: z.number().optional(),
        max: z.number().optional(),
        source: sourceSchema.optional(),
      }),
    )
    .max(50)
    .optional(),
})
/** A key of the spec sheets. */
export type SpecKey = z.infer<typeof specKeySchema>

/** The chart's own copy of what it takes from the shop's library. */
export const librarySchema = z.strictObject({
  causes: z.array(causeSchema).optional(),
  serviceItems: z.array(serviceItemSchema).optional(),
  specKeys: z.array(specKeySchema).optional(),
})
/** The chart's own copy of what it takes from the shop's library. */
export type ChartLibrary = z.infer<typeof librarySchema>

/** A troubleshooting chart, format version 1: what the door lets in. Whether it makes sense is the chart check's business. */
export const chartDocumentSchema = z.strictObject({
  format: z.literal('pullcord-chart'),
  formatVersion: z.literal(currentFormatVersion),
  id: chartIdSchema,
  title: line,
  searchWords: z.array(line).max(200).optional(),
  basis: z.enum(['own', 'printed-table']).optional(),
  appliesTo: z.strictObject({ classes: z.array(classSchema).optional(), engines: z.array(engineSchema).optional() }).optional(),
  contributing: z.array(causeIdSchema).optional(),
  safetyParts: z.array(safetyPartIdSchema).optional(),
  source: sourceSchema.optional(),
  cautions: z.array(cautionSchema).optional(),
  access: z.array(accessSchema).optional(),
  library: librarySchema,
  nodes: z.array(nodeSchema),
  edges: z.array(edgeSchema),
  positions: z.record(nodeIdSchema, z.strictObject({ x: z.number(), y: z.number() })).optional(),
})
/** A troubleshooting chart, format version 1. */
export type ChartDocument = z.infer<typeof chartDocumentSchema>
