import { z } from 'zod'
import { personIdSchema } from '#shared/lib/ids.ts'
import { roles } from '#shared/trade/roles.ts'
import { doneSchema, momentSchema } from './contract.ts'
import { emailSchema, passwordSchema, personNameSchema } from './session.ts'

/** A person of the shop as the owner sees them. `invited` has not set a password yet. */
export const personSchema = z.strictObject({
  id: personIdSchema,
  name: z.string(),
  email: z.string(),
  role: z.enum(roles),
  status: z.enum(['invited', 'active', 'deactivated']),
  linkExpiresAt: momentSchema.nullable(),
  lastSeenAt: momentSchema.nullable(),
})
/** A person of the shop as the owner sees them. */
export type Person = z.infer<typeof personSchema>

/** A person of the shop as everybody in it sees them. */
export const colleagueSchema = z.strictObject({ id: personIdSchema, name: z.string(), role: z.enum(roles) })
/** A person of the shop as everybody in it sees them. */
export type Colleague = z.infer<typeof colleagueSchema>

/** A one-time link to hand over; shown once, kept only as a hash. */
export const oneTimeLinkSchema = z.strictObject({ url: z.string(), expiresAt: momentSchema })

const params = z.strictObject({ id: personIdSchema })
const tokenParams = z.strictObject({ token: z.string().min(1).max(200) })

/** GET /api/people: owner. */
export const listPeople = { response: z.strictObject({ people: z.array(personSchema) }) }
/** GET /api/people/active: anybody signed in; who can be handed a walk: neither the deactivated nor those who have set no password yet. */
export const listActivePeople = { response: z.strictObject({ people: z.array(colleagueSchema) }) }
/** POST /api/people: owner; adds a person and gives the link where they set their password (`e-mail-taken`). */
export const addPerson = {
  body: z.strictObject({ name: personNameSchema, email: emailSchema, role: z.enum(roles) }),
  response: z.strictObject({ person: personSchema, link: oneTimeLinkSchema }),
}
/** PATCH /api/people/:id: owner; acts on that person's next request (`last-owner`). */
export const updatePerson = {
  params,
  body: z.strictObject({ name: personNameSchema.optional(), role: z.enum(roles).optional(), isActive: z.boolean().optional() }),
  response: z.strictObject({ person: personSchema }),
}
/** POST /api/people/:id/link: owner; a new one-time link (invitation or password reset). Earlier ones die. */
export const createLink = { params, response: z.strictObject({ person: personSchema, link: oneTimeLinkSchema }) }

/** GET /api/links/:token: anybody who holds it; changes nothing (`link-used-up`). */
export const getLink = {
  params: tokenParams,
  response: z.strictObject({ purpose: z.enum(['invite', 'reset']), name: z.string(), email: z.string(), expiresAt: momentSchema }),
}
/** POST /api/links/:token: sets the password, once; ends that person's sessions; does not sign in. */
export const useLink = { params: tokenParams, body: z.strictObject({ password: passwordSchema }), response: doneSchema }
