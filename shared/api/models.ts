import { z } from 'zod'
import { causeSchema, sourceSchema } from '#shared/chart/document.ts'
import { modelIdSchema, specKeyIdSchema } from '#shared/lib/ids.ts'
import { engineKinds, equipmentClasses } from '#shared/trade/equipment.ts'
import { specLimitsSchema } from '#shared/units/limits.ts'

/** A model with its spec sheet. */
export const modelSchema = z.strictObject({
  id: modelIdSchema,
  maker: z.string().min(1).max(100),
  name: z.string().min(1).max(100),
  class: z.enum(equipmentClasses),
  engine: z.enum(engineKinds),
  limits: specLimitsSchema,
  sources: z.record(specKeyIdSchema, sourceSchema),
})
/** A model with its spec sheet. */
export type MachineModel = z.infer<typeof modelSchema>

/** GET /api/models: everybody signed in. */
export const listModels = { response: z.strictObject({ models: z.array(modelSchema) }) }

/** GET /api/causes: the shop's library of causes, contributing ones included; everybody signed in. */
export const listCauses = { response: z.strictObject({ causes: z.array(causeSchema) }) }
