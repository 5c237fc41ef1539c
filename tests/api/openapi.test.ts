import { afterAll, beforeAll, describe, expect, test } from 'vitest'
import { problemCodes } from '#shared/api/problem.ts'
import { problemsOf } from '#server/http/openapi.ts'
import { problems } from '#server/http/problems.ts'
import { endpoints } from '#server/routes/endpoints.ts'
import { openTestShop, type TestShop } from './test-shop.ts'

type Json = { readonly [key: string]: unknown }
type Operation = {
  readonly operationId: string
  readonly summary: string
  readonly security: readonly Json[]
  readonly parameters: readonly { readonly name: string; readonly in: string; readonly required: boolean; readonly schema: Json }[]
  readonly requestBody?: { readonly content: { readonly 'application/json': { readonly schema: Json } } }
  readonly responses: { readonly [status: string]: { readonly description: string; readonly content: { readonly [type: string]: { readonly schema: Json } } } }
}

let shop: TestShop
let document: {
  openapi: string
  paths: { [path: string]: { [method: string]: Operation } }
  components: { schemas: { [name: string]: Json }; securitySchemes: Json }
} & Json
beforeAll(async () => {
  shop = await openTestShop({ withPeople: false })
  document = (await shop.newClient().get('/api/openapi.json')).body as typeof document
})
afterAll(() => shop.close())

const operations = () =>
  Object.entries(document.paths).flatMap(([path, methods]) => Object.entries(methods).map(([method, operation]) => ({ path, method, operation })))

/** Every object in a JSON value. */
function* objectsIn(value: unknown): Generator<Json> {
  if (typeof value !== 'object' || value === null) return
  if (!Array.isArray(value)) yield value as Json
  for (const inner of Object.values(value)) yield* objectsIn(inner)
}

describe('the description of the API', () => {
  test('is OpenAPI 3.1, without a base path, and names every endpoint once', () => {
    expect(document.openapi).toBe('3.1.0')
    expect(document['servers']).toBeUndefined()
    expect(
      operations()
        .map(({ path, method }) => `${method} ${path}`)
        .sort(),
    ).toEqual(endpoints.map(({ path, method }) => `${method} ${path.replaceAll(/:(\w+)/g, '{$1}')}`).sort())
    const ids = operations().map(({ operation }) => operation.operationId)
    expect(new Set(ids).size).toBe(ids.length)
  })

  test('every reference leads somewhere, and every named part is used', () => {
    const references = [...objectsIn(document)].flatMap(({ $ref }) => (typeof $ref === 'string' ? [$ref] : []))
    for (const reference of references) {
      const found = reference
        .slice(2)
        .split('/')
        .reduce<unknown>((here, part) => (here as Json | undefined)?.[part], document)
      expect([reference, typeof found]).toEqual([reference, 'object'])
    }
    for (const name of Object.keys(document.components.schemas)) expect(references).toContain(`#/components/schemas/${name}`)
  })

  test('the parameters of a path are those that stand in it', () => {
    for (const { path, operation } of operations()) {
      const inPath = [...path.matchAll(/\{(\w+)\}/g)].map(([, name]) => name)
      expect([path, operation.parameters.filter((parameter) => parameter.in === 'path').map(({ name, required }) => [name, required])]).toEqual([
        path,
        inPath.map((name) => [name, true]),
      ])
      for (const { schema } of operation.parameters) expect(Object.keys(schema).length).toBeGreaterThan(0)
    }
  })

  test('every object that the API takes is closed, so that a field too many is refused by the document too', () => {
    for (const { path, method, operation } of operations()) {
      const schema = operation.requestBody?.content['application/json'].schema
      if (schema !== undefined && 'properties' in schema) expect([method, path, schema['additionalProperties']]).toEqual([method, path, false])
    }
  })

  test('every operation tells who may, what it answers, and each refusal with its codes as a problem document', () => {
    for (const { path, method, operation } of operations()) {
      const endpoint = endpoints.find((one) => one.name === operation.operationId)
      expect(operation.summary.length).toBeGreaterThan(3)
      expect([path, operation.security]).toEqual([path, endpoint?.role === 'anyone' ? [] : [{ session: [] }]])
      const statuses = Object.keys(operation.responses)
      expect([method, path, statuses.filter((status) => status.startsWith('2'))]).toEqual([method, path, [String(endpoint?.status ?? 200)]])
      expect(statuses).toContain('500')
      expect(statuses).toContain('503')
      for (const status of statuses.filter((one) => !one.startsWith('2'))) {
        expect(Object.keys(operation.responses[status]?.content ?? {})).toEqual(['application/problem+json'])
        expect(JSON.stringify(operation.responses[status])).toMatch(/#\/components\/schemas\/Problem.*"enum":\[/)
      }
    }
  })

  test('every code has one status, and each that is not kept for later is in the document of some endpoint', () => {
    const documented = new Set(endpoints.flatMap((endpoint) => [...problemsOf(endpoint).values()].flat()))
    // Told by the router itself, at addresses that are no operation.
    documented.add('method-not-allowed')
    expect(problemCodes.filter((code) => !documented.has(code))).toEqual([])
    for (const code of problemCodes) expect(problems[code].status).toBeGreaterThanOrEqual(400)
  })
})
