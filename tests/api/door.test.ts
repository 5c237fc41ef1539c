import { request } from 'node:http'
import { mkdtemp, mkdir, rm, writeFile } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, beforeAll, describe, expect, test } from 'vitest'
import { problemSchema } from '#shared/api/problem.ts'
import { createApp } from '#server/app.ts'
import { endpoints } from '#server/routes/endpoints.ts'
import { openTestShop, type Answer, type Client, type TestShop } from './test-shop.ts'

let shop: TestShop
let pages: string
let owner: Client
beforeAll(async () => {
  pages = await mkdtemp(join(tmpdir(), 'pages-'))
  await mkdir(join(pages, 'assets'))
  await writeFile(join(pages, 'index.html'), '<!doctype html><title>Pullcord</title>')
  await writeFile(join(pages, 'assets', 'entry-8f2c1a.js'), 'export {}')
  await writeFile(join(pages, 'favicon.svg'), '<svg xmlns="http://www.w3.org/2000/svg"/>')
  await writeFile(join(pages, '.env'), 'SECRET=1')
  shop = await openTestShop({ app: { pagesFolder: pages } })
  owner = await shop.as('owner')
})
afterAll(async () => {
  await shop.close()
  await rm(pages, { recursive: true })
})

function isProblem(answer: Answer, status: number, code: string): void {
  expect(answer.headers.get('content-type')).toBe('application/problem+json; charset=utf-8')
  const problem = problemSchema.parse(answer.body)
  expect([answer.status, problem.status, problem.code, problem.type]).toEqual([status, status, code, `/problems/${code}`])
  expect(problem.instance).toMatch(/^urn:uuid:[0-9a-f-]{36}$/)
  expect(problem.detail.length).toBeGreaterThan(10)
}

/** A request as it is written, for what `fetch` would not send. */
function raw(
  path: string,
  { method = 'GET', headers = {}, body = '' }: { method?: string; headers?: Record<string, string | string[]>; body?: string | Buffer } = {},
): Promise<{ status: number; headers: Record<string, unknown>; text: string }> {
  const { port } = new URL(shop.base)
  return new Promise((resolve, reject) => {
    const asking = request(
      { port, host: '127.0.0.1', path, method, headers: { ...headers, ...(body.length > 0 ? { 'content-length': String(body.length) } : {}) } },
      (response) => {
        let text = ''
        response.on('data', (chunk: Buffer) => (text += chunk.toString()))
        response.on('end', () => resolve({ status: response.statusCode ?? 0, headers: response.headers, text }))
      },
    )
    asking.on('error', reject)
    asking.end(body)
  })
}

describe('a write from another site', () => {
  test.each([
    ['Sec-Fetch-Site cross-site', { 'sec-fetch-site': 'cross-site' }, false],
    ['Sec-Fetch-Site same-site', { 'sec-fetch-site': 'same-site' }, false],
    ['a foreign Origin', { origin: 'https://elsewhere.example' }, false],
    ['Origin null', { origin: 'null' }, false],
    ['our own host on another port', { origin: 'http://127.0.0.1:1' }, false],
    ['Sec-Fetch-Site same-origin', { 'sec-fetch-site': 'same-origin' }, true],
    ['no word of a browser', {}, true],
  ])('%s', async (_name, headers, isTaken) => {
    const before = (await owner.get('/api/people')).text
    const answer = await owner.post('/api/people', { name: 'X', email: 'not an address', role: 'junior' }, headers)
    if (isTaken) isProblem(answer, 422, 'invalid-input')
    else isProblem(answer, 403, 'cross-site')
    expect((await owner.get('/api/people')).text).toBe(before)
  })

  test('our own Origin is ours, by address and by public name', async () => {
    isProblem(await owner.post('/api/people', {}, { origin: shop.base }), 422, 'invalid-input')
    isProblem(await owner.post('/api/people', {}, { origin: shop.base.replace('127.0.0.1', 'localhost') }), 403, 'cross-site')
  })

  test('a form of another site can neither post text nor sign somebody out', async () => {
    isProblem(
      await owner.ask('POST', '/api/people', {
        body: '{"name":"X"}',
        headers: { 'content-type': 'text/plain', origin: 'https://elsewhere.example', 'sec-fetch-site': 'cross-site' },
      }),
      403,
      'cross-site',
    )
    isProblem(await owner.ask('DELETE', '/api/session', { headers: { origin: 'https://elsewhere.example' } }), 403, 'cross-site')
    expect((await owner.get('/api/people')).status).toBe(200)
  })

  test('a GET changes nothing: it is no way to any act', () => {
    for (const { method, path, contract } of endpoints) if (method === 'get') expect([path, 'body' in contract]).toEqual([path, false])
  })
})

describe('a body that is not what it should be', () => {
  test.each([
    ['text/plain', '{"email":"a@b.example","password":"x"}', 415],
    ['application/x-www-form-urlencoded', 'email=a', 415],
    ['multipart/form-data; boundary=x', '--x--', 415],
    ['application/jsonp', '{}', 415],
    ['application/json; charset=utf-16', '{}', 415],
    ['application/json', '{"email":', 400],
    ['application/json', '', 422],
  ])('%s (%#)', async (type, body, status) => {
    const answer = await raw('/api/session', { method: 'POST', headers: { 'content-type': type }, body })
    expect([answer.status, (JSON.parse(answer.text) as { code: string }).code]).toEqual([status, status === 422 ? 'invalid-input' : 'not-json'])
  })

  test('a packed body is not unpacked', async () => {
    const answer = await raw('/api/session', {
      method: 'POST',
      headers: { 'content-type': 'application/json', 'content-encoding': 'gzip' },
      body: Buffer.from([0x1f, 0x8b, 8, 0]),
    })
    expect(answer.status).toBe(415)
  })

  test.each(['null', '[]', '"text"', '1', 'true'])('%s is no group of fields', async (body) => {
    const answer = await shop.newClient().ask('POST', '/api/session', { body })
    isProblem(answer, 422, 'invalid-input')
    expect(answer.body['errors']).toEqual([{ pointer: '#', detail: 'This has to be a group of fields.' }])
  })

  test('every fault is named with its field and the way out', async () => {
    const answer = await owner.post('/api/people', { name: ' ', email: 'nobody', role: 'boss', admin: true })
    isProblem(answer, 422, 'invalid-input')
    expect(answer.body['errors']).toEqual([
      { pointer: '#/name', detail: 'Write a name.' },
      { pointer: '#/email', detail: 'Write an e-mail address, like name@shop.example.' },
      { pointer: '#/role', detail: 'Choose one of: junior, lead, owner.' },
      { pointer: '#/admin', detail: 'There is no such field here: take it out.' },
    ])
  })

  test('a body over the limit is refused, announced or not', async () => {
    const big = `{"email":"${'x'.repeat(70_000)}","password":"x"}`
    isProblem(await shop.newClient().ask('POST', '/api/session', { body: big }), 413, 'too-large')
    const chunked = await raw('/api/session', { method: 'POST', headers: { 'content-type': 'application/json', 'transfer-encoding': 'chunked' }, body: '' })
    expect(chunked.status).toBeLessThan(500)
  })

  test("a zero character and half a character are refused where they stand: nothing that a table can't hold gets that far", async () => {
    for (const text of ['a\\u0000b', 'a\\ud800b']) {
      const answer = await owner.ask('POST', '/api/people', { body: `{"name":"${text}","email":"a@fernhill.example","role":"junior"}` })
      isProblem(answer, 422, 'invalid-input')
      expect(answer.body['errors']).toMatchObject([{ pointer: '#/name' }])
    }
  })

  test('a body nested a hundred thousand deep is refused in no time', async () => {
    const answer = await owner.ask('POST', '/api/charts/check', { body: `{"document":${'['.repeat(100_000)}${']'.repeat(100_000)}}` })
    isProblem(answer, 422, 'invalid-input')
  })
})

describe('an address that is not what it should be', () => {
  test.each([
    '/api/walks/1',
    '/api/walks/%00',
    '/api/walks/%E0%A4%A',
    '/api/charts/__proto__/reach',
    '/api/charts/..%2f..%2fetc/reach',
    '/api/charts/saw/versions/x',
    '/api/charts/saw/versions/0',
    '/api/charts/saw/versions/99999999999999999999',
    '/api/people/undefined/link',
  ])('%s is not found', async (path) => {
    const answer = await raw(path, { headers: { cookie: [...owner.cookies].map(([name, value]) => `${name}=${value}`).join('; ') } })
    expect([answer.status === 404 || answer.status === 405, answer.headers['content-type']]).toEqual([true, 'application/problem+json; charset=utf-8'])
  })

  test.each([
    '?page=1&page=2',
    '?page[]=1',
    '?page[x]=1',
    '?page=-1',
    '?page=1e9',
    '?page=0x',
    '?state=OPEN',
    '?scope=all',
    '?x=1',
    '?__proto__=1',
    '?constructor=1',
    '?page=%00',
  ])('%s is no question', async (query) => {
    const answer = await owner.get(`/api/walks${query}`)
    isProblem(answer, 422, 'invalid-input')
    expect((answer.body['errors'] as { pointer: string }[])[0]?.pointer).toMatch(/^#\/query\//)
  })
})

describe('headers', () => {
  const everywhere = () => [
    ...endpoints.filter(({ method }) => method === 'get').map(({ path }) => path.replace(/:\w+/, 'x')),
    '/',
    '/sign-in',
    '/link/abc',
    '/assets/entry-8f2c1a.js',
    '/nothing.js',
    '/api/nothing',
  ]

  test('every answer carries the policy, no hint of what serves it, and no door for other sites', async () => {
    for (const path of everywhere()) {
      const { headers } = await owner.get(path)
      const policy = new Map((headers.get('content-security-policy') ?? '').split(';').map((part) => [part.split(' ')[0], part.split(' ').slice(1)]))
      expect([
        path,
        policy.get('default-src'),
        policy.get('script-src'),
        policy.get('object-src'),
        policy.get('base-uri'),
        policy.get('frame-ancestors'),
      ]).toEqual([path, ["'self'"], ["'self'"], ["'none'"], ["'none'"], ["'none'"]])
      expect([
        path,
        headers.get('x-content-type-options'),
        headers.get('referrer-policy'),
        headers.get('x-powered-by'),
        headers.get('access-control-allow-origin'),
        headers.get('strict-transport-security'),
        headers.get('server'),
      ]).toEqual([path, 'nosniff', 'no-referrer', null, null, null, null])
      expect([path, headers.get('content-type')]).toEqual([path, expect.stringMatching(/charset=utf-8|image\/svg/)])
      if (path.startsWith('/api')) expect([path, headers.get('cache-control')]).toEqual([path, 'no-store'])
    }
  })

  test('on https the cookie is secure and bound to the host, and the browser is told to stay there', async () => {
    const secure = await openTestShop({ config: { publicUrl: 'https://bench.example' } })
    const { email, password } = secure.person('owner')
    const answer = await secure.newClient().post('/api/session', { email, password }, { origin: 'https://bench.example' })
    for (const line of answer.headers.getSetCookie()) expect(line).toMatch(/^__Host-pullcord-\w+=.*; Path=\/; .*; HttpOnly; Secure; SameSite=Strict$/)
    expect(answer.headers.getSetCookie()).toHaveLength(2)
    expect(Number(/max-age=(\d+)/.exec(answer.headers.get('strict-transport-security') ?? '')?.[1])).toBeGreaterThanOrEqual(365 * 86_400)
    await secure.close()
  }, 90_000)
})

describe('pages', () => {
  test('every address of a screen gets the one document, never kept; hashed files are kept for ever', async () => {
    for (const path of ['/', '/sign-in', '/walks/0190', '/link/abc']) {
      const { status, text, headers } = await owner.get(path)
      expect([path, status, text, headers.get('cache-control')]).toEqual([path, 200, '<!doctype html><title>Pullcord</title>', 'no-cache'])
    }
    expect((await owner.get('/assets/entry-8f2c1a.js')).headers.get('cache-control')).toBe('public, max-age=31536000, immutable')
    expect((await owner.get('/favicon.svg')).headers.get('cache-control')).toBe('no-cache')
  })

  test.each([
    '/.env',
    '/.git/config',
    '/.git/HEAD',
    '/assets/entry-8f2c1a.js.map',
    '/package.json',
    '/server/main.ts',
    '/../package.json',
    '/%2e%2e/package.json',
    '/assets/',
    '/wp-login.php',
    '/data/base.tar',
    '/index.html.bak',
    '/node_modules/express/package.json',
  ])('%s is not there', async (path) => {
    const answer = await raw(path)
    expect([path, answer.status === 404 || (answer.status === 200 && answer.text.includes('<title>Pullcord')), answer.text.includes('SECRET')]).toEqual([
      path,
      true,
      false,
    ])
    expect(/\.(env|git|json|ts|map|tar|bak|php)/.test(path) ? answer.status : 404).toBe(404)
  })

  test('a HEAD is answered like a GET without its body; a POST to a page is not', async () => {
    expect((await owner.ask('HEAD', '/')).status).toBe(200)
    expect((await owner.ask('POST', '/', { body: {} })).status).toBe(404)
  })
})

describe('when something breaks', () => {
  const broken = async (change: Partial<TestShop['deps']>) => {
    const { createServer } = await import('node:http')
    const server = createServer(createApp({ ...shop.deps, ...change }, { timeLimitMs: 300 }))
    await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve))
    const { port } = server.address() as { port: number }
    const answer = await fetch(`http://127.0.0.1:${port}/api/health`)
    const body = (await answer.json()) as Record<string, unknown>
    await new Promise<void>((resolve) => {
      server.close(() => resolve())
      server.closeAllConnections()
    })
    return { status: answer.status, body }
  }

  test('the answer says no more than that, with the number under which the log has the rest', async () => {
    const lines: object[] = []
    const log = {
      ...shop.deps.log,
      info: () => undefined,
      debug: () => undefined,
      error: (fields: object) => lines.push(fields),
    } as unknown as TestShop['deps']['log']
    const { status, body } = await broken({ log, database: { engine: 'pglite', isAnswering: () => Promise.reject(new Error('secret of the engine room')) } })
    expect([status, body['code'], JSON.stringify(body).includes('secret')]).toEqual([500, 'broken', false])
    expect(lines).toMatchObject([{ requestId: String(body['instance']).slice('urn:uuid:'.length) }])
  })

  test('no request hangs: past the limit it is told to come again', async () => {
    const { status, body } = await broken({ database: { engine: 'pglite', isAnswering: () => new Promise(() => undefined) } })
    expect([status, body['code']]).toEqual([503, 'busy'])
  })

  test('a database that does not answer is a 503 of the health page', async () => {
    expect(await broken({ database: { engine: 'pglite', isAnswering: () => Promise.resolve(false) } })).toMatchObject({ status: 503, body: { code: 'busy' } })
  })
})

describe('the log', () => {
  test('has one JSON line for every request, with its number, route, person and status, and no secret', async () => {
    const before = shop.logLines.length
    await owner.get('/api/links/secret-token-of-a-link')
    await owner.get('/link/secret-token-of-a-link')
    await owner.post('/api/session', { email: 'a\r\nforged: line@fernhill.example', password: 'very secret words' })
    const lines = shop.logLines
      .slice(before)
      .map((line) => JSON.parse(line) as Record<string, unknown>)
      .filter(({ event }) => event === 'request')
    expect(lines).toHaveLength(3)
    expect(lines[0]).toMatchObject({
      method: 'GET',
      route: '/api/links/:token',
      status: 410,
      problem: 'link-used-up',
      personId: shop.person('owner').id,
      requestId: expect.any(String),
      ms: expect.any(Number),
    })
    expect(shop.logLines.slice(before).join('')).not.toMatch(/secret-token|very secret|forged/)
  })
})
