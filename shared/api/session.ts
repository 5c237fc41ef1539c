import { z } from 'zod'
import { personIdSchema } from '#shared/lib/ids.ts'
import { roles } from '#shared/trade/roles.ts'
import { numberFormatSchema } from '#shared/units/number-format.ts'
import { doneSchema, momentSchema } from './contract.ts'

/** An e-mail address as it is compared: trimmed, at most 254 characters. */
export const emailSchema = z.string().trim().max(254, 'At most 254 characters.').pipe(z.email('Write an e-mail address, like name@shop.example.'))
/** A password as it was typed, never trimmed, never cut. What makes one good enough is the server's to say. */
export const passwordSchema = z.string().min(1, 'Write your password.').max(1000, 'At most 1000 characters.')
/** The name of a person as others read it. */
export const personNameSchema = z.string().trim().min(1, 'Write a name.').max(100, 'At most 100 characters.')

/** The person who is signed in. */
export const signedInSchema = z.strictObject({ id: personIdSchema, name: z.string(), email: z.string(), role: z.enum(roles) })
/** The person who is signed in. */
export type SignedIn = z.infer<typeof signedInSchema>

/** Who is signed in, in which shop. `person` is null when nobody is; `needsOwner` while the shop has no owner yet. */
export const sessionSchema = z.strictObject({
  person: signedInSchema.nullable(),
  shop: z.strictObject({ name: z.string(), numberFormat: numberFormatSchema }),
  needsOwner: z.boolean(),
  /** Sign-ins of the demo shop; an empty list in a real one. */
  demoSignIns: z.array(z.strictObject({ name: z.string(), role: z.enum(roles), email: z.string(), password: z.string() })),
})
/** Who is signed in, in which shop. */
export type Session = z.infer<typeof sessionSchema>

/** GET /api/session: anybody. */
export const getSession = { response: sessionSchema }

/** POST /api/session: sign in. Refused alike for known and unknown addresses (`wrong-sign-in`, `too-many-tries`). */
export const signIn = { body: z.strictObject({ email: emailSchema, password: passwordSchema }), response: sessionSchema }

/** DELETE /api/session: sign out; the session is dead on the server. */
export const signOut = { response: sessionSchema }

/** POST /api/owner: the first owner, with the one-time code that the server printed (`wrong-code`, `already-set-up`). Signs in. */
export const createFirstOwner = {
  body: z.strictObject({ code: z.string().trim().min(1, 'Write the code that the server printed.').max(100), name: personNameSchema, email: emailSchema, password: passwordSchema }),
  response: sessionSchema,
}

/** GET /api/sessions: where this person is signed in. */
export const listSessions = {
  response: z.strictObject({
    sessions: z.array(z.strictObject({ id: z.uuid(), isThisOne: z.boolean(), startedAt: momentSchema, lastSeenAt: momentSchema, browser: z.string() })),
  }),
}
/** DELETE /api/sessions/:id: end one of one's own sessions. */
export const endSession = { params: z.strictObject({ id: z.uuid() }), response: doneSchema }

/** PUT /api/session/password: change one's own; needs the present one; ends the other sessions. */
export const changePassword = { body: z.strictObject({ present: passwordSchema, password: passwordSchema }), response: doneSchema }
