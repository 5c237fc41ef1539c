import type { Problem, ProblemCode } from '#shared/api/problem.ts'

/** Status and title of every refusal: the one place where a code becomes HTTP (RFC 9110, RFC 6585). */
export const problems: Readonly<Record<ProblemCode, { readonly status: number; readonly title: string }>> = {
  'invalid-input': { status: 422, title: 'Something in this was not understood' },
  'not-json': { status: 415, title: 'Send JSON' },
  'too-large': { status: 413, title: 'Too large' },
  'not-found': { status: 404, title: 'Not found' },
  'method-not-allowed': { status: 405, title: 'Not possible here' },
  'signed-out': { status: 401, title: 'Sign in first' },
  'not-allowed': { status: 403, title: 'Not for your role' },
  'cross-site': { status: 403, title: 'Sent from another site' },
  'wrong-sign-in': { status: 401, title: 'E-mail or password is wrong' },
  'too-many-tries': { status: 429, title: 'Too many tries' },
  'weak-password': { status: 422, title: 'Choose another password' },
  'wrong-present-password': { status: 422, title: 'The present password is wrong' },
  'wrong-code': { status: 422, title: 'The code is wrong' },
  'already-set-up': { status: 409, title: 'This shop has its owner' },
  'link-used-up': { status: 410, title: 'This link no longer works' },
  'e-mail-taken': { status: 409, title: 'This e-mail address is taken' },
  'last-owner': { status: 409, title: 'A shop needs an owner' },
  'demo-only': { status: 403, title: 'Only in the demo shop' },
  'not-a-chart': { status: 422, title: 'Not a chart' },
  'too-new': { status: 422, title: 'Made by a newer program' },
  'invalid-chart': { status: 422, title: 'The chart has faults' },
  'chart-has-errors': { status: 422, title: 'The chart check found faults' },
  'warnings-unseen': { status: 409, title: 'The chart check has warnings' },
  'draft-moved-on': { status: 412, title: 'The draft moved on' },
  'if-match-missing': { status: 428, title: 'Say which draft you changed' },
  'already-published': { status: 409, title: 'Nothing new to publish' },
  'chart-exists': { status: 409, title: 'This chart exists' },
  'walk-exists': { status: 409, title: 'This walk exists' },
  'wrong-walk': { status: 422, title: 'An event of another walk' },
  busy: { status: 503, title: 'Busy' },
  'no-space': { status: 507, title: 'The disk is full' },
  broken: { status: 500, title: 'Something broke' },
}

/** Media type of a problem document (RFC 9457, section 3). */
export const problemType = 'application/problem+json'

/** A problem document (RFC 9457); `more` are members of its own that a code is documented to carry. */
export function toProblem(code: ProblemCode, detail: string, instance: string, more: Readonly<Record<string, unknown>> = {}): Problem {
  const { status, title } = problems[code]
  return { ...more, type: `/problems/${code}`, title, status, detail, instance, code }
}
