import { z } from 'zod'
import { chartVersionSchema, draftSchema } from '#shared/api/charts.ts'
import { problemSchema, type ProblemCode } from '#shared/api/problem.ts'
import { chartDocumentSchema } from '#shared/chart/document.ts'
import { walkRowSchema } from '#shared/api/walks.ts'
import { walkEventSchema } from '#shared/walk/events.ts'
import type { Endpoint } from './endpoint.ts'
import { problems, problemType } from './problems.ts'

type Json = Readonly<Record<string, unknown>>

/** Schemas that are named in the document instead of being written out wherever they stand. */
const named = z.registry<{ id: string }>()
named.add(problemSchema, { id: 'Problem' })
named.add(chartDocumentSchema, { id: 'ChartDocument' })
named.add(chartVersionSchema, { id: 'ChartVersion' })
named.add(draftSchema, { id: 'Draft' })
named.add(walkEventSchema, { id: 'WalkEvent' })
named.add(walkRowSchema, { id: 'WalkRow' })

/** The OpenAPI 3.1 document of some endpoints, made from the same schemas that their inputs and answers are judged by. */
export function toOpenApi(endpoints: readonly Endpoint[]): Json {
  const components = new Components()
  const paths: Record<string, Record<string, Json>> = {}
  for (const endpoint of endpoints) {
    const path = endpoint.path.replaceAll(/:(\w+)/g, '{$1}')
    paths[path] = { ...paths[path], [endpoint.method]: toOperation(endpoint, components) }
  }
  const problem = components.read(problemSchema, 'output')
  return {
    openapi: '3.1.0',
    info: {
      title: 'Pullcord',
      version: '1',
      description:
        'Guided diagnosis for the repair bench. Refusals are problem documents (RFC 9457); their codes are stable. Writes take JSON and come from the same origin.',
    },
    paths,
    components: {
      schemas: { ...components.schemas, ...(Object.hasOwn(components.schemas, 'Problem') ? {} : { Problem: problem }) },
      securitySchemes: {
        session: { type: 'apiKey', in: 'cookie', name: 'pullcord-session', description: 'Given by sign-in; on https its name begins with __Host-.' },
      },
    },
  }
}

/** Collects the named schemas while others are turned into JSON Schema. */
class Components {
  readonly schemas: Record<string, unknown> = {}

  read(schema: z.ZodType, io: 'input' | 'output'): Json {
    const json: unknown = JSON.parse(
      JSON.stringify(z.toJSONSchema(schema, { io, metadata: named, unrepresentable: 'any' })).replaceAll('"#/$defs/', '"#/components/schemas/'),
    )
    const { $schema: _, $defs = {}, id: __, ...own } = json as Record<string, unknown>
    for (const [name, definition] of Object.entries($defs as Record<string, Json>)) {
      const { id: ___, ...body } = definition
      this.schemas[name] = body
    }
    return own
  }
}

function toOperation(endpoint: Endpoint, components: Components): Json {
  const { contract } = endpoint
  return {
    operationId: endpoint.name,
    summary: endpoint.summary,
    tags: [endpoint.path.split('/')[2] ?? 'api'],
    'x-role': endpoint.role,
    security: endpoint.role === 'anyone' ? [] : [{ session: [] }],
    parameters: [
      ...toParameters(contract.params, 'path', components),
      ...toParameters(contract.query, 'query', components),
      ...(endpoint.needsIfMatch === true
        ? [
            {
              name: 'If-Match',
              in: 'header',
              required: true,
              description: 'The ETag of the state that is changed.',
              schema: { type: 'string', pattern: '^"r[0-9]+"$' },
            },
          ]
        : []),
    ],
    ...(contract.body ? { requestBody: { required: true, content: { 'application/json': { schema: components.read(contract.body, 'input') } } } } : {}),
    responses: {
      [String(endpoint.status ?? 200)]: {
        description: 'Done',
        ...(endpoint.givesEtag === true ? { headers: { ETag: { description: 'Names the state that the body shows.', schema: { type: 'string' } } } } : {}),
        content: { 'application/json': { schema: components.read(contract.response, 'output') } },
      },
      ...toProblemResponses(endpoint),
    },
  }
}

function toParameters(schema: z.ZodType | undefined, where: 'path' | 'query', components: Components): Json[] {
  if (!schema) return []
  const { properties = {}, required = [] } = components.read(schema, 'output') as { properties?: Record<string, Json>; required?: string[] }
  return Object.entries(properties).map(([name, json]) => ({ name, in: where, required: required.includes(name), schema: json }))
}

/** Every refusal that an endpoint of this form can give, by status. */
export function problemsOf({ contract, method, role, problems: own = [], needsIfMatch }: Endpoint): ReadonlyMap<number, readonly ProblemCode[]> {
  const codes: (readonly [number, ProblemCode])[] = [...own.map((code) => [problems[code].status, code] as const)]
  const add = (code: ProblemCode, status = problems[code].status) => void codes.push([status, code])
  if (role !== 'anyone') add('signed-out')
  if (role === 'lead' || role === 'owner') add('not-allowed')
  if (contract.params) add('not-found')
  if (contract.query) add('invalid-input')
  if (method !== 'get') {
    add('cross-site')
    add('not-json')
  }
  if (contract.body) {
    add('not-json', 400)
    add('too-large')
    add('invalid-input')
  }
  if (needsIfMatch === true) add('if-match-missing')
  for (const code of ['broken', 'busy', 'no-space'] as const) add(code)
  const byStatus = new Map<number, ProblemCode[]>()
  for (const [status, code] of codes) byStatus.set(status, [...new Set([...(byStatus.get(status) ?? []), code])])
  return new Map([...byStatus].sort(([one], [other]) => one - other))
}

function toProblemResponses(endpoint: Endpoint): Json {
  const responses = [...problemsOf(endpoint)].map(([status, codes]) => [
    String(status),
    {
      description: codes.map((code) => `${problems[code].title} (\`${code}\`)`).join(' · '),
      content: { [problemType]: { schema: { allOf: [{ $ref: '#/components/schemas/Problem' }, { properties: { code: { enum: codes } } }] } } },
    },
  ])
  return Object.fromEntries(responses) as Json
}
