import { z } from 'zod'

/** What an endpoint takes and gives: every input has a strict schema, so that what is not listed is refused by name. */
export interface Contract {
  readonly params?: z.ZodType
  readonly query?: z.ZodType
  readonly body?: z.ZodType
  readonly response: z.ZodType
}

/** A moment in JSON: ISO 8601 in UTC. */
export const momentSchema = z.iso.datetime()

/** The answer of an act that has nothing to say but that it is done. */
export const doneSchema = z.strictObject({ done: z.literal(true) })
