import { z } from 'zod'

/** Codes of refusals that an answer may carry; the last part of a problem's `type`. Never renamed. */
export const problemCodes = [
  'invalid-input',
  'not-json',
  'too-large',
  'not-found',
  'method-not-allowed',
  'signed-out',
  'not-allowed',
  'cross-site',
  'wrong-sign-in',
  'too-many-tries',
  'weak-password',
  'wrong-present-password',
  'wrong-code',
  'already-set-up',
  'link-used-up',
  'e-mail-taken',
  'last-owner',
  'demo-only',
  'not-a-chart',
  'too-new',
  'invalid-chart',
  'chart-has-errors',
  'warnings-unseen',
  'draft-moved-on',
  'if-match-missing',
  'already-published',
  'chart-exists',
  'walk-exists',
  'wrong-walk',
  'busy',
  'no-space',
  'broken',
] as const
/** A code of a refusal. */
export type ProblemCode = (typeof problemCodes)[number]

/** One fault of an input: where it is (JSON pointer, RFC 6901, as a URI fragment) and what to do about it. */
export const faultSchema = z.object({ pointer: z.string(), detail: z.string() })
/** One fault of an input. */
export type Fault = z.infer<typeof faultSchema>

/** A problem document (RFC 9457); members we do not know are let through, as the RFC asks of clients. */
export const problemSchema = z.looseObject({
  type: z.string(),
  title: z.string(),
  status: z.number(),
  detail: z.string(),
  instance: z.string().optional(),
  code: z.enum(problemCodes),
  errors: z.array(faultSchema).optional(),
})
/** A problem document (RFC 9457). */
export type Problem = z.infer<typeof problemSchema>
