import type { z } from 'zod'
import type { Deps } from '#server/lib/deps.ts'
import type { Endpoint } from './endpoint.ts'

/**
 * What may leave: the answer as its contract reads it. An answer that does not fit is a bug, and throws; in production it leaves
 * without the fields that nobody promised, and the log says so, since a page that shows most of a walk serves better than none.
 */
export function checkAnswer(deps: Deps, endpoint: Endpoint, answer: unknown): unknown {
  const result = endpoint.contract.response.safeParse(answer)
  if (result.success) return result.data
  if (!deps.config.isProduction)
    throw new Error(`The answer of ${endpoint.name} is not what its contract says: ${JSON.stringify(result.error.issues.slice(0, 5))}`)
  deps.log.error(
    {
      event: 'answer-off-contract',
      endpoint: endpoint.name,
      issues: result.error.issues.slice(0, 20).map(({ path, code }) => ({ path: path.join('/'), reason: code })),
    },
    'an answer does not fit its contract',
  )
  return withoutUnknownFields(answer, result.error.issues)
}

function withoutUnknownFields(answer: unknown, issues: readonly z.core.$ZodIssue[]): unknown {
  const copy: unknown = structuredClone(answer)
  for (const issue of issues) {
    if (issue.code !== 'unrecognized_keys') continue
    const holder = issue.path.reduce<unknown>((here, part) => (isRecord(here) ? here[String(part)] : undefined), copy)
    if (isRecord(holder)) for (const key of issue.keys) delete holder[key]
  }
  return copy
}

function isRecord(value: unknown): value is Record<string, unknown> {
  return typeof value === 'object' && value !== null
}
