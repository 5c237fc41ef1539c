import { z } from 'zod'

/** GET /api/health: anybody; says that the server and its database answer. */
export const getHealth = { response: z.strictObject({ status: z.literal('ok'), database: z.enum(['pglite', 'postgresql']) }) }
