import type { z } from 'zod'

import { refuseNewPassword } from './new-password.tsx'

/** A contract's body whose `password` is a new one: its length is judged before it is sent. */
export function withNewPassword<Output extends { readonly password: string }, Input>(body: z.ZodType<Output, Input>): z.ZodType<Output, Input> {
  return body.superRefine(({ password }, context) => {
    const refusal = refuseNewPassword(password)
    if (refusal !== undefined) context.addIssue({ code: 'custom', path: ['password'], message: refusal })
  })
}
