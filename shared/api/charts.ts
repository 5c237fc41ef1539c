import { z } from 'zod'
import { chartDocumentSchema } from '#shared/chart/document.ts'
import { chartIdSchema, nodeIdSchema } from '#shared/lib/ids.ts'
import { engineKinds, equipmentClasses } from '#shared/trade/equipment.ts'
import { momentSchema } from './contract.ts'

/** Largest chart that the API takes, in bytes. The command line takes more. */
export const chartMaxBytes = 2_000_000

const params = z.strictObject({ id: chartIdSchema })
const versionNumber = z.coerce.number().int().min(1).max(1_000_000)

/** A published version with its document; immutable. */
export const chartVersionSchema = z.strictObject({
  chartId: chartIdSchema,
  version: z.number().int(),
  document: chartDocumentSchema,
  publishedAt: momentSchema,
  publishedBy: z.string(),
  changeNote: z.string(),
})
/** A published version with its document. */
export type ChartVersion = z.infer<typeof chartVersionSchema>

/** What the chart check says. */
export const remarkSchema = z.strictObject({
  code: z.string(),
  severity: z.enum(['error', 'warning', 'note']),
  node: nodeIdSchema.optional(),
  edge: z.strictObject({ from: nodeIdSchema, outcome: z.string().optional() }).optional(),
  message: z.string(),
})

/** A chart in the list: its published version, if any, and what the bench chooses by. */
export const chartRowSchema = z.strictObject({
  id: chartIdSchema,
  title: z.string(),
  basis: z.enum(['own', 'printed-table']),
  version: z.number().int().nullable(),
  publishedAt: momentSchema.nullable(),
  hasDraft: z.boolean(),
  starts: z.array(z.strictObject({ id: nodeIdSchema, title: z.string() })),
  classes: z.array(z.enum(equipmentClasses)),
  engines: z.array(z.enum(engineKinds)),
})
/** A chart in the list. */
export type ChartRow = z.infer<typeof chartRowSchema>

/** GET /api/charts: everybody signed in. */
export const listCharts = { response: z.strictObject({ charts: z.array(chartRowSchema) }) }
/** GET /api/charts/:id/versions/:n: everybody signed in. */
export const getVersion = { params: z.strictObject({ id: chartIdSchema, n: versionNumber }), response: chartVersionSchema }
/** GET /api/charts/:id/reach: the published version of this chart and of every chart that its jumps reach; what a walk pins. */
export const getReach = { params, response: z.strictObject({ charts: z.array(chartVersionSchema) }) }

/** A draft; `revision` rises with every save and is the ETag `"r<revision>"`. */
export const draftSchema = z.strictObject({
  chartId: chartIdSchema,
  revision: z.number().int(),
  document: chartDocumentSchema,
  savedAt: momentSchema,
  savedBy: z.string(),
})
/** POST /api/charts: lead; a new chart as a draft (`chart-exists`). The document is judged by the chart door, hence unknown here. */
export const createChart = { body: z.strictObject({ document: z.unknown() }), response: draftSchema }
/** GET /api/charts/:id/draft: lead. */
export const getDraft = { params, response: draftSchema }
/** PUT /api/charts/:id/draft with If-Match: lead (`if-match-missing`, `draft-moved-on`). */
export const saveDraft = { params, body: z.strictObject({ document: z.unknown() }), response: draftSchema }
/** POST /api/charts/:id/publish: lead; refused with errors, and with warnings that were not accepted (`chart-has-errors`, `warnings-unseen`). */
export const publishDraft = {
  params,
  body: z.strictObject({
    revision: z.number().int().min(1),
    changeNote: z.string().trim().min(1, 'Say in a few words what changed.').max(2000),
    acceptsWarnings: z.boolean(),
  }),
  response: chartVersionSchema,
}
/** POST /api/charts/check: lead; the remarks, nothing stored. */
export const checkChart = { body: z.strictObject({ document: z.unknown() }), response: z.strictObject({ remarks: z.array(remarkSchema) }) }

/** A symptom that the search found: a start of a published chart. */
export const symptomSchema = z.strictObject({
  chartId: chartIdSchema,
  version: z.number().int(),
  startId: nodeIdSchema,
  title: z.string(),
  chartTitle: z.string(),
  /** The words of the chart that matched, when the title alone does not show it. */
  matched: z.string().nullable(),
  classes: z.array(z.enum(equipmentClasses)),
  engines: z.array(z.enum(engineKinds)),
})
/** A symptom that the search found. */
export type Symptom = z.infer<typeof symptomSchema>
/** GET /api/symptoms?q=…: everybody signed in; best first; every symptom when `q` is empty. */
export const searchSymptoms = {
  query: z.strictObject({ q: z.string().max(200).optional() }),
  response: z.strictObject({ symptoms: z.array(symptomSchema) }),
}
