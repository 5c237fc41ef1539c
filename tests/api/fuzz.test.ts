import * as fc from 'fast-check'
import { afterAll, beforeAll, expect, test } from 'vitest'
import { problemSchema } from '#shared/api/problem.ts'
import { roles } from '#shared/trade/roles.ts'
import { endpoints } from '#server/routes/endpoints.ts'
import type { Endpoint } from '#server/http/endpoint.ts'
import { fromSchema, oddValues, spoiled } from './json-arbitrary.ts'
import { openBench } from './saw-walks.ts'
import { openTestShop, type Client, type TestShop } from './test-shop.ts'

type Json = { readonly [key: string]: unknown }

/** Requests for each endpoint; a longer run by FUZZ_RUNS. */
const runs = Number(process.env.FUZZ_RUNS ?? 25)

let shop: TestShop
let clients: readonly Client[]
let document: Json
beforeAll(async () => {
  shop = await openTestShop()
  await openBench(shop)
  clients = [shop.newClient(), ...(await Promise.all(roles.map((role) => shop.as(role))))]
  document = (await shop.newClient().get('/api/openapi.json')).body
})
afterAll(() => shop.close())

function bodyOf({ method, path }: Endpoint): fc.Arbitrary<unknown> {
  const paths = document['paths'] as { [path: string]: { [method: string]: { requestBody?: { content: { 'application/json': { schema: Json } } } } } }
  const schema = paths[path.replaceAll(/:(\w+)/g, '{$1}')]?.[method]?.requestBody?.content['application/json'].schema
  if (schema === undefined) return fc.constant(undefined)
  const valid = fromSchema(schema, (document['components'] as { schemas: Json }).schemas)
  return fc.oneof({ weight: 3, arbitrary: valid }, { weight: 5, arbitrary: spoiled(valid) }, { weight: 1, arbitrary: oddValues })
}

const pathPart = fc.oneof(
  fc.constantFrom('saw', '1', '01900000-0000-7000-8000-000000000001'),
  oddValues.map((value) => (typeof value === 'string' ? value : JSON.stringify(value)) ?? ''),
)

function addressOf({ path, contract }: Endpoint): fc.Arbitrary<string> {
  const names = [...path.matchAll(/:(\w+)/g)].map(([, name]) => name ?? '')
  const query =
    contract.query === undefined
      ? fc.constant('')
      : fc
          .array(fc.tuple(fc.constantFrom('q', 'page', 'scope', 'state', 'x', '__proto__'), pathPart), { maxLength: 3 })
          .map((pairs) => `?${pairs.map(([key, value]) => `${key}=${encode(value)}`).join('&')}`)
  return fc
    .tuple(fc.tuple(...names.map(() => pathPart)), query)
    .map(([parts, search]) => names.reduce((here, name, order) => here.replace(`:${name}`, encode(parts[order] ?? '') || 'x'), path as string) + search)
}

function encode(text: string): string {
  return encodeURIComponent(text.replace(/\p{Surrogate}/gu, '?')).slice(0, 2000)
}

test.each(endpoints.map((endpoint) => [`${endpoint.method.toUpperCase()} ${endpoint.path}`, endpoint] as const))(
  '%s answers anything that is thrown at it, and never stumbles',
  async (_name, endpoint) => {
    const headers = fc.constantFrom<Record<string, string>>({}, { 'if-match': '"r1"' }, { 'if-match': 'x' })
    await fc.assert(
      fc.asyncProperty(addressOf(endpoint), bodyOf(endpoint), headers, fc.nat(clients.length - 1), async (path, body, more, who) => {
        // A client whose session an earlier request ended asks as nobody.
        const client = clients[who] ?? clients[0]
        const answer = await client?.ask(endpoint.method.toUpperCase(), path, {
          ...(body === undefined ? {} : { body: JSON.stringify(body) ?? 'null' }),
          headers: more,
        })
        expect(answer?.status).toBeLessThan(500)
        if ((answer?.status ?? 0) >= 400) {
          expect(answer?.headers.get('content-type')).toBe('application/problem+json; charset=utf-8')
          expect(problemSchema.safeParse(answer?.body).success).toBe(true)
        }
      }),
      { numRuns: runs },
    )
  },
  120_000,
)
