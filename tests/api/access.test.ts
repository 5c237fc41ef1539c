import { randomUUID } from 'node:crypto'
import { afterAll, beforeAll, describe, expect, test } from 'vitest'
import { hasRole, roles } from '#shared/trade/roles.ts'
import { endpoints } from '#server/routes/endpoints.ts'
import { sawChart } from '#tests/support/walk-charts.ts'
import { started } from '#tests/support/walk-builder.ts'
import { logOf, openBench } from './saw-walks.ts'
import { openTestShop, type Client, type TestShop } from './test-shop.ts'

let shop: TestShop
beforeAll(async () => {
  shop = await openTestShop()
  await openBench(shop)
})
afterAll(() => shop.close())

type Sample = {
  readonly params?: Readonly<Record<string, string>>
  readonly query?: string
  readonly body?: () => unknown
  readonly headers?: Readonly<Record<string, string>>
}

const anyWalk = () => logOf(shop.person('junior'), [started()])

/** One well-formed request for every endpoint. An endpoint that is missing here fails the test. */
const samples: Readonly<Record<string, Sample>> = {
  getHealth: {},
  getOpenApi: {},
  getSession: {},
  signIn: { body: () => ({ email: 'nobody@fernhill.example', password: 'not anybody at all' }) },
  signOut: {},
  changePassword: { body: () => ({ present: 'not mine', password: 'vellum tractor paris' }) },
  listSessions: {},
  endSession: { params: { id: randomUUID() } },
  createFirstOwner: { body: () => ({ code: 'AAAA', name: 'A', email: 'a@fernhill.example', password: 'vellum tractor paris' }) },
  listPeople: {},
  listActivePeople: {},
  addPerson: { body: () => ({ name: 'New', email: `${randomUUID()}@fernhill.example`, role: 'junior' }) },
  updatePerson: { params: { id: randomUUID() }, body: () => ({ name: 'Newer' }) },
  createLink: { params: { id: randomUUID() } },
  getLink: { params: { token: 'x'.repeat(43) } },
  useLink: { params: { token: 'x'.repeat(43) }, body: () => ({ password: 'vellum tractor paris' }) },
  listCharts: {},
  createChart: { body: () => ({ document: sawChart }) },
  checkChart: { body: () => ({ document: sawChart }) },
  getVersion: { params: { id: 'saw', n: '1' } },
  getReach: { params: { id: 'saw' } },
  getDraft: { params: { id: 'saw' } },
  saveDraft: { params: { id: 'saw' }, body: () => ({ document: sawChart }), headers: { 'if-match': '"r1"' } },
  publishDraft: { params: { id: 'saw' }, body: () => ({ revision: 1, changeNote: 'Again', acceptsWarnings: true }) },
  searchSymptoms: { query: '?q=guts' },
  listModels: {},
  listCauses: {},
  listWalks: {},
  startWalk: {
    body: () => {
      const { walkId, events } = anyWalk()
      return { id: walkId, event: events[0] }
    },
  },
  getWalk: { params: { id: randomUUID() } },
  postEvents: { params: { id: randomUUID() }, body: () => ({ events: anyWalk().events }) },
  listSideEvents: { params: { id: randomUUID() } },
}

describe('every endpoint, as every role', () => {
  test('the table knows every endpoint, and no other', () => {
    expect(Object.keys(samples).sort()).toEqual(endpoints.map(({ name }) => name).sort())
  })

  test.each(endpoints.map((endpoint) => [`${endpoint.method.toUpperCase()} ${endpoint.path}`, endpoint] as const))(
    '%s lets in whom it should, and nobody else',
    async (_name, endpoint) => {
      const { params = {}, query = '', body, headers = {} } = samples[endpoint.name] ?? {}
      const path = endpoint.path.replaceAll(/:(\w+)/g, (_, name: string) => encodeURIComponent(params[name] ?? '')) + query
      const ask = async (client: Client) =>
        (await client.ask(endpoint.method.toUpperCase(), path, { ...(body ? { body: body() } : {}), headers })).body['code'] as unknown

      const nobody = await ask(shop.newClient())
      if (endpoint.role === 'anyone') expect(['signed-out', 'not-allowed']).not.toContain(nobody)
      else expect(nobody).toBe('signed-out')
      for (const role of roles) {
        const code = await ask(await shop.as(role))
        if (endpoint.role === 'anyone' || hasRole(role, endpoint.role)) expect(['signed-out', 'not-allowed']).not.toContain(code)
        else expect(code).toBe('not-allowed')
      }
    },
  )

  test('nothing is served that is not in the list', async () => {
    const owner = await shop.as('owner')
    for (const path of ['/api', '/api/', '/api/nothing', '/api/walks/', '/api/Walks', '/api/people/1/2/3', '/api/charts/saw', '/api/settings']) {
      const answer = await owner.get(path)
      expect([path, answer.status, answer.headers.get('content-type')]).toEqual([path, 404, 'application/problem+json; charset=utf-8'])
    }
  })

  test('another method at a known address is refused with those that there are', async () => {
    const owner = await shop.as('owner')
    const answer = await owner.ask('PUT', '/api/people', { body: {} })
    expect([answer.status, answer.body['code'], answer.headers.get('allow')]).toEqual([405, 'method-not-allowed', 'GET, POST'])
    expect((await owner.ask('PATCH', '/api/health', { body: {} })).status).toBe(405)
  })
})

describe('fields that nobody may set', () => {
  test.each([
    ['addPerson', 'POST', '/api/people', { name: 'N', email: 'n@fernhill.example', role: 'junior' }],
    ['updatePerson', 'PATCH', `/api/people/${randomUUID()}`, { name: 'N' }],
    ['signIn', 'POST', '/api/session', { email: 'n@fernhill.example', password: 'x' }],
    ['publishDraft', 'POST', '/api/charts/saw/publish', { revision: 1, changeNote: 'x', acceptsWarnings: true }],
  ])('%s takes no field that its contract does not list', async (_name, method, path, body) => {
    const owner = await shop.as('owner')
    for (const field of ['id', 'createdBy', 'passwordHash', 'isActiv', 'version', 'constructor', '__proto__']) {
      const text = JSON.stringify(body).replace(/}$/, `,${JSON.stringify(field)}:{"role":"owner"}}`)
      const answer = await owner.ask(method, path, { body: text })
      expect([field, answer.status, answer.body['code']]).toEqual([field, 422, 'invalid-input'])
      expect(answer.body['errors']).toContainEqual({ pointer: `#/${field}`, detail: 'There is no such field here: take it out.' })
    }
  })

  test('what leaves holds nothing that the contract does not promise: no hash, no secret', async () => {
    const owner = await shop.as('owner')
    for (const path of ['/api/people', '/api/session', '/api/sessions', '/api/walks?scope=shop']) {
      expect((await owner.get(path)).text).not.toMatch(/hash|secret|\$2[aby]\$|password_|createdAt/i)
    }
  })
})
