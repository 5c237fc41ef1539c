import { z } from 'zod'
import { specKeyIdSchema } from '#shared/lib/ids.ts'
import { units, type Unit } from './quantities.ts'

/** A unit of the closed list. */
export const unitSchema = z.enum(units as [Unit, ...Unit[]])

/** One figure of a limit that law or a standard prints in several units; judged in the unit that was typed, never converted. */
export const printedLimitSchema = z.strictObject({ min: z.number().optional(), max: z.number().optional(), unit: unitSchema })

/** Limits of a measured value: one range in one unit, or figures as law or a standard printed them. Both ends belong to the range. */
export const specLimitSchema = z.union([
  z.strictObject({ as: z.array(printedLimitSchema).min(1).max(6) }),
  z.strictObject({ min: z.number().optional(), max: z.number().optional(), unit: unitSchema }),
])
/** Limits of a measured value. */
export type SpecLimit = z.infer<typeof specLimitSchema>

/** Limits by spec key, as the spec sheet of one machine gives them. */
export const specLimitsSchema = z.record(specKeyIdSchema, specLimitSchema)
/** Limits by spec key. */
export type SpecLimits = z.infer<typeof specLimitsSchema>
