import { afterAll, beforeAll, expect, test } from 'vitest'
import { loadDemo } from '#seeds-demo/load-demo.ts'
import type { ChartVersion } from '#shared/api/charts.ts'
import type { WalkRow } from '#shared/api/walks.ts'
import type { WalkEvent } from '#shared/walk/events.ts'
import { toPinnedCharts } from '#shared/walk/pinned-charts.ts'
import { replay } from '#shared/walk/replay.ts'
import { signIn } from '#server/services/sign-in.ts'
import { openTestShop, type Client, type TestShop } from './test-shop.ts'

let shop: TestShop
let lead: Client
type SignIn = { name: string; email: string; password: string; role: string }
let signIns: SignIn[]

beforeAll(async () => {
  shop = await openTestShop({ withPeople: false })
  await loadDemo(shop.deps)
  signIns = (await shop.newClient().get('/api/session')).body['demoSignIns'] as SignIn[]
  lead = shop.newClient()
  const { email, password } = signIns.find(({ role }) => role === 'lead') ?? { email: '', password: '' }
  await lead.post('/api/session', { email, password })
}, 120_000)
afterAll(() => shop.close())

const walks = async (query = '') => (await lead.get(`/api/walks?scope=shop${query}`)).body['walks'] as WalkRow[]

test('the demo shop lists its sign-ins, and each of them works', async () => {
  expect(signIns.map(({ role }) => role)).toEqual(['owner', 'lead', 'junior'])
  for (const { email, password, name } of signIns) {
    const answer = await shop.newClient().post('/api/session', { email, password })
    expect([answer.status, answer.body['person'], answer.body['shop']]).toMatchObject([200, { name }, { name: 'Alder Row Small Engines' }])
  }
})

test('nobody signs in with them, and nothing is loaded, with NODE_ENV=production', async () => {
  const production = { ...shop.deps, config: { ...shop.deps.config, isProduction: true } }
  const { email, password } = signIns[0] ?? { email: '', password: '' }
  await expect(signIn(production, { email, password, address: '192.0.2.1', browser: '', knownBrowser: null, oldSessionId: null })).rejects.toMatchObject({
    code: 'demo-only',
  })
  await expect(loadDemo(production)).rejects.toThrow('NODE_ENV=production')
})

test('every chart is published, every symptom can be found, and the models have their sheets', async () => {
  const charts = (await lead.get('/api/charts')).body['charts'] as { version: number; hasDraft: boolean }[]
  expect(charts.length).toBeGreaterThanOrEqual(3)
  for (const chart of charts) expect(chart).toMatchObject({ version: 1, hasDraft: false })
  expect((await lead.get('/api/symptoms')).body['symptoms']).toHaveLength(charts.length)
  const models = (await lead.get('/api/models')).body['models'] as { id: string }[]
  expect(models.map(({ id }) => id).toSorted()).toEqual([
    'brackenfeld-43',
    'brackenfeld-71',
    'marrowby-160',
    'marrowby-50',
    'orrinvale-50',
    'tolvane-25-4',
    'tolvane-26',
    'tolvane-65',
  ])
})

test('its walks ended in the causes that their stories tell, and the open ones wait at the bench', async () => {
  const ended = await walks('&state=ended')
  expect(
    ended
      .filter(({ phase }) => phase === 'closed')
      .map(({ causeTitle }) => causeTitle)
      .toSorted(),
  ).toEqual([
    'Air filter packed',
    'Brake band drags',
    'Chain too tight',
    'Choke part closed',
    'Plug fouled',
    'Spark screen shut',
    'Stale fuel',
    'Water in the fuel',
  ])
  const open = await walks('&state=open')
  expect(open.map(({ hasQuestion, isPaused }) => [hasQuestion, isPaused])).toEqual([
    [false, false],
    [true, false],
    [false, true],
    [true, false],
  ])
})

test('every row says what its log comes to', async () => {
  for (const row of await walks()) {
    const { body } = await lead.get(`/api/walks/${row.id}`)
    const state = replay(toPinnedCharts(body['charts'] as ChartVersion[]), body['events'] as WalkEvent[])
    expect([state.phase, state.phase === 'new' ? 0 : state.lastSeq, state.phase === 'new' ? 0 : state.minutesUsed]).toEqual([
      row.phase,
      row.lastSeq,
      row.minutesUsed,
    ])
  }
})

test("loading again changes nothing, and a shop of somebody's own is left as it is", async () => {
  const before = JSON.stringify(await walks())
  await loadDemo(shop.deps)
  expect(JSON.stringify(await walks())).toBe(before)
  const own = await openTestShop()
  await loadDemo(own.deps)
  expect((await own.newClient().get('/api/session')).body).toMatchObject({ shop: { name: 'Our shop' }, demoSignIns: [] })
  await own.close()
}, 90_000)
