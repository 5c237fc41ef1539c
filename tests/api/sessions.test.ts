import { createHmac } from 'node:crypto'
import { SignJWT, UnsecuredJWT } from 'jose'
import { afterAll, beforeAll, describe, expect, test } from 'vitest'
import { sessions, oneTimeLinks } from '#server/db/schema/people.ts'
import { makeOwnerCode } from '#server/services/first-owner.ts'
import { openTestShop, type Client, type TestShop } from './test-shop.ts'

const hour = 3600
const day = 24 * hour
let shop: TestShop
beforeAll(async () => {
  shop = await openTestShop()
})
afterAll(() => shop.close())

const who = async (client: Client) => (await client.get('/api/session')).body['person'] as { email: string; role: string } | null
const isIn = async (client: Client) => (await client.get('/api/sessions')).status === 200
const copyOf = (client: Client) => {
  const copy = shop.newClient()
  for (const [name, value] of client.cookies) copy.cookies.set(name, value)
  return copy
}

describe('a session', () => {
  test('begins with sign-in and tells who is signed in, in which shop', async () => {
    const client = await shop.as('junior')
    const { body } = await client.get('/api/session')
    expect(body).toEqual({
      person: { id: shop.person('junior').id, name: 'Jun Okoro', email: 'jun.okoro@fernhill.example', role: 'junior' },
      shop: { name: 'Our shop', numberFormat: { decimal: '.', group: 'space' } },
      needsOwner: false,
      demoSignIns: [],
    })
  })

  test('is in a cookie that no script reads and no other site sends, and nowhere in a body', async () => {
    const client = shop.newClient()
    const { email, password } = shop.person('lead')
    const answer = await client.post('/api/session', { email, password })
    const line = answer.headers.getSetCookie().find((text) => text.startsWith('pullcord-session=')) ?? ''
    expect(line).toMatch(/; HttpOnly; SameSite=Strict$/)
    expect(line).toMatch(/; Path=\/;/)
    expect(line).not.toMatch(/Secure|Domain/)
    expect(answer.text).not.toContain(client.cookies.get('pullcord-session'))
    const claims = JSON.parse(Buffer.from(client.cookies.get('pullcord-session')?.split('.')[1] ?? '', 'base64url').toString()) as object
    expect(JSON.stringify(claims)).not.toMatch(/lead|junior|owner|fernhill/)
  })

  test('ends on the server at sign-out, also for a copied cookie', async () => {
    const client = await shop.as('junior')
    const copy = copyOf(client)
    expect((await client.delete('/api/session')).body['person']).toBeNull()
    expect(client.cookies.has('pullcord-session')).toBe(false)
    expect((await copy.get('/api/walks')).body['code']).toBe('signed-out')
  })

  test('gives way to the new one when somebody signs in over it', async () => {
    const client = await shop.as('junior')
    const copy = copyOf(client)
    const { email, password } = shop.person('lead')
    await client.post('/api/session', { email, password })
    expect(await who(client)).toMatchObject({ role: 'lead' })
    expect((await copy.get('/api/walks')).body['code']).toBe('signed-out')
  })

  test('is kept as a hash: a copy of the table opens nothing', async () => {
    const client = await shop.as('junior')
    const rows = JSON.stringify(await shop.deps.db.select().from(sessions))
    const claims = JSON.parse(Buffer.from(client.cookies.get('pullcord-session')?.split('.')[1] ?? '', 'base64url').toString()) as { data: { secret: string } }
    expect(Buffer.from(claims.data.secret, 'base64url').length * 8).toBeGreaterThanOrEqual(128)
    expect(rows).not.toContain(claims.data.secret)
  })

  test('ends after twelve idle hours; before that every request keeps it alive', async () => {
    const client = await shop.as('junior')
    shop.wait(11 * hour)
    expect(await isIn(client)).toBe(true)
    shop.wait(11 * hour)
    expect(await isIn(client)).toBe(true)
    shop.wait(12 * hour + 60)
    expect(await isIn(client)).toBe(false)
  })

  test('ends after thirty days, however busy it was', async () => {
    const client = await shop.as('junior')
    for (let hours = 0; hours < 30 * 24 - 1; hours += 11) {
      expect(await isIn(client)).toBe(true)
      shop.wait(11 * hour)
    }
    expect(await isIn(client)).toBe(false)
  })

  test('writes its last-seen every five minutes at most', async () => {
    const client = await shop.as('owner')
    const lastSeen = async () =>
      ((await client.get('/api/sessions')).body['sessions'] as { isThisOne: boolean; lastSeenAt: string }[]).find(({ isThisOne }) => isThisOne)?.lastSeenAt
    const first = await lastSeen()
    shop.wait(4 * 60)
    expect(await lastSeen()).toBe(first)
    shop.wait(2 * 60)
    expect(await lastSeen()).not.toBe(first)
  })

  test('is listed with its browser, and can be ended from another one', async () => {
    const { email, password } = shop.person('lead')
    const [desk, phone] = [shop.newClient(), shop.newClient()]
    await desk.post(
      '/api/session',
      { email, password },
      { 'user-agent': 'Mozilla/5.0 (X11; Linux x86_64) AppleWebKit/537.36 (KHTML, like Gecko) Chrome/150.0 Safari/537.36' },
    )
    await phone.post(
      '/api/session',
      { email, password },
      { 'user-agent': 'Mozilla/5.0 (iPhone; CPU iPhone OS 18_0 like Mac OS X) AppleWebKit/605 Version/18.0 Mobile/15E148 Safari/604.1' },
    )
    const list = (await desk.get('/api/sessions')).body['sessions'] as { id: string; browser: string; isThisOne: boolean }[]
    expect(list.filter(({ isThisOne }) => isThisOne)).toHaveLength(1)
    const other = list.find(({ browser }) => browser === 'Safari on iPhone')
    expect((await desk.delete(`/api/sessions/${other?.id}`)).body).toEqual({ done: true })
    expect(await isIn(phone)).toBe(false)
    expect(await isIn(desk)).toBe(true)
  })

  test('of somebody else is not found', async () => {
    const junior = await shop.as('junior')
    const own = (await junior.get('/api/sessions')).body['sessions'] as { id: string }[]
    expect((await (await shop.as('owner')).delete(`/api/sessions/${own[0]?.id}`)).status).toBe(404)
    expect(await isIn(junior)).toBe(true)
  })
})

describe('a change by the owner acts on the next request', () => {
  test('a role that rises and falls', async () => {
    const owner = await shop.as('owner')
    const person = await shop.addPerson('junior', 'Rae Swift')
    const client = await shop.signIn(person)
    expect((await client.get('/api/people')).status).toBe(403)
    await owner.patch(`/api/people/${person.id}`, { role: 'owner' })
    expect((await client.get('/api/people')).status).toBe(200)
    await owner.patch(`/api/people/${person.id}`, { role: 'junior' })
    expect((await client.get('/api/people')).status).toBe(403)
  })

  test('a deactivation, also for a copied cookie; activating again does not bring the session back', async () => {
    const owner = await shop.as('owner')
    const person = await shop.addPerson('junior', 'Tam Ford')
    const client = await shop.signIn(person)
    const copy = copyOf(client)
    await owner.patch(`/api/people/${person.id}`, { isActive: false })
    expect(await isIn(client)).toBe(false)
    expect((await shop.newClient().post('/api/session', { email: person.email, password: person.password })).body['code']).toBe('wrong-sign-in')
    await owner.patch(`/api/people/${person.id}`, { isActive: true })
    expect(await isIn(copy)).toBe(false)
    expect(await isIn(await shop.signIn(person))).toBe(true)
  })

  test('the last owner who can sign in stays an owner, and active; two owners can not demote each other at once', async () => {
    const owner = await shop.as('owner')
    const me = shop.person('owner')
    for (const change of [{ role: 'lead' }, { isActive: false }]) {
      expect((await owner.patch(`/api/people/${me.id}`, change)).body['code']).toBe('last-owner')
    }
    const second = await shop.addPerson('owner', 'Sol Reed')
    const secondClient = await shop.signIn(second)
    const answers = await Promise.all([owner.patch(`/api/people/${second.id}`, { role: 'lead' }), secondClient.patch(`/api/people/${me.id}`, { role: 'lead' })])
    expect(answers.filter(({ status }) => status === 200)).toHaveLength(1)
    const left = answers[0]?.status === 200 ? owner : secondClient
    for (const { id } of [me, second]) await left.patch(`/api/people/${id}`, { role: 'owner' })
    await owner.patch(`/api/people/${second.id}`, { role: 'lead' })
  })
})

describe('a forged cookie', () => {
  test.each(['none', 'another key', 'jwk in the head', 'another purpose', 'no purpose', 'another algorithm', 'changed payload', 'ended'])(
    '%s opens nothing',
    async (kind) => {
      const client = await shop.as('owner')
      const token = client.cookies.get('pullcord-session') ?? ''
      const [head = '', payload = '', signature = ''] = token.split('.')
      const claims = JSON.parse(Buffer.from(payload, 'base64url').toString()) as Record<string, unknown>
      const keyOf = (purpose: string) => createHmac('sha256', shop.deps.config.sessionSecret).update(`pullcord ${purpose}`).digest()
      const forge = (alg: string, key: Uint8Array, body: Record<string, unknown> = claims, more: Record<string, unknown> = {}) =>
        new SignJWT(body).setProtectedHeader({ alg, typ: 'JWT', ...more }).sign(key)
      const forged = {
        none: () => new UnsecuredJWT(claims).encode(),
        'another key': () => forge('HS256', Buffer.from('x'.repeat(32))),
        'jwk in the head': () =>
          forge('HS256', Buffer.from('y'.repeat(32)), claims, { jwk: { kty: 'oct', k: Buffer.from('y'.repeat(32)).toString('base64url') } }),
        'another purpose': () => client.cookies.get('pullcord-browser') ?? '',
        'no purpose': () => forge('HS256', keyOf('session'), { ...claims, purpose: undefined }),
        'another algorithm': () => forge('HS512', keyOf('session')),
        'changed payload': () =>
          [
            head,
            Buffer.from(JSON.stringify({ ...claims, data: { ...(claims['data'] as object), id: '01900000-0000-7000-8000-000000000001' } })).toString(
              'base64url',
            ),
            signature,
          ].join('.'),
        ended: () => forge('HS256', keyOf('session'), { ...claims, exp: Math.floor(shop.deps.clock().getTime() / 1000) - 1 }),
      }[kind]
      const thief = shop.newClient()
      thief.cookies.set('pullcord-session', (await forged?.()) ?? '')
      expect((await thief.get('/api/people')).body['code']).toBe('signed-out')
      expect(await isIn(client)).toBe(true)
    },
  )

  test.each(['', 'a', 'a.b.c', '%00', '{}', 'x'.repeat(5000)])('nonsense (%#) opens nothing and breaks nothing', async (value) => {
    const thief = shop.newClient()
    thief.cookies.set('pullcord-session', value)
    expect((await thief.get('/api/people')).status).toBe(401)
  })
})

describe('one-time links', () => {
  const tokenOf = (url: string) => url.slice(url.lastIndexOf('/') + 1)
  const invite = async (name: string) => {
    const { body } = await (await shop.as('owner')).post('/api/people', { name, email: `${name.toLowerCase()}@fernhill.example`, role: 'junior' })
    return body as { person: { id: string; email: string; status: string }; link: { url: string; expiresAt: string } }
  }
  const password = 'vellum tractor paris'

  test('an invitation sets the password once, and does not sign in', async () => {
    const { person, link } = await invite('Ada')
    expect(person.status).toBe('invited')
    const client = shop.newClient()
    const path = `/api/links/${tokenOf(link.url)}`
    for (let times = 0; times < 2; times++)
      expect((await client.get(path)).body).toMatchObject({ purpose: 'invite', name: 'Ada', email: 'ada@fernhill.example' })
    expect((await client.post('/api/session', { email: person.email, password })).body['code']).toBe('wrong-sign-in')
    expect((await client.post(path, { password })).body).toEqual({ done: true })
    expect(await who(client)).toBeNull()
    expect([(await client.post(path, { password })).status, (await client.get(path)).status]).toEqual([410, 410])
    expect((await client.post('/api/session', { email: person.email, password })).status).toBe(200)
  })

  test('twenty uses at once set one password', async () => {
    const { link } = await invite('Bea')
    const answers = await Promise.all(
      Array.from({ length: 20 }, (_, count) => shop.newClient().post(`/api/links/${tokenOf(link.url)}`, { password: `${password} ${count}` })),
    )
    expect(answers.filter(({ status }) => status === 200)).toHaveLength(1)
    expect(answers.filter(({ status }) => status === 410)).toHaveLength(19)
  })

  test('is refused a weak password, and is still good afterwards', async () => {
    const { link } = await invite('Cal')
    const path = `/api/links/${tokenOf(link.url)}`
    const weak = await shop.newClient().post(path, { password: 'short' })
    expect(weak.body).toMatchObject({ code: 'weak-password', errors: [{ pointer: '#/password' }] })
    expect((await shop.newClient().post(path, { password })).status).toBe(200)
  })

  test('expires: an invitation in a week, a reset in half an hour', async () => {
    const { person, link } = await invite('Dov')
    shop.wait(6 * day)
    expect((await shop.newClient().get(`/api/links/${tokenOf(link.url)}`)).status).toBe(200)
    shop.wait(day + 1)
    expect((await shop.newClient().get(`/api/links/${tokenOf(link.url)}`)).status).toBe(410)
    const owner = await shop.as('owner')
    const again = (await owner.post(`/api/people/${person.id}/link`, {})).body as { link: { url: string } }
    await shop.newClient().post(`/api/links/${tokenOf(again.link.url)}`, { password })
    const reset = (await owner.post(`/api/people/${person.id}/link`, {})).body as { link: { url: string } }
    expect((await shop.newClient().get(`/api/links/${tokenOf(reset.link.url)}`)).body['purpose']).toBe('reset')
    shop.wait(31 * 60)
    expect((await shop.newClient().post(`/api/links/${tokenOf(reset.link.url)}`, { password })).status).toBe(410)
  })

  test('a new link kills the one before, and a used one ends the sessions of its person', async () => {
    const person = await shop.addPerson('junior', 'Eli Stone')
    const client = await shop.signIn(person)
    const owner = await shop.as('owner')
    const first = (await owner.post(`/api/people/${person.id}/link`, {})).body as { link: { url: string } }
    const second = (await owner.post(`/api/people/${person.id}/link`, {})).body as { link: { url: string } }
    expect((await shop.newClient().get(`/api/links/${tokenOf(first.link.url)}`)).status).toBe(410)
    expect(await isIn(client)).toBe(true)
    await shop.newClient().post(`/api/links/${tokenOf(second.link.url)}`, { password })
    expect(await isIn(client)).toBe(false)
  })

  test("is worth nothing from a copy of the table, as a session, or as the owner's code", async () => {
    const { link } = await invite('Fay')
    const token = tokenOf(link.url)
    const rows = JSON.stringify(await shop.deps.db.select().from(oneTimeLinks))
    expect(rows).not.toContain(token)
    for (const hash of rows.match(/"tokenHash":"([^"]+)"/g) ?? []) expect((await shop.newClient().get(`/api/links/${hash.slice(13, -1)}`)).status).toBe(410)
    const thief = shop.newClient()
    thief.cookies.set('pullcord-session', token)
    expect((await thief.get('/api/walks')).status).toBe(401)
    expect(shop.logLines.join('')).not.toContain(token)
  })
})

describe('the first owner', () => {
  test('is made once, with the code that the server printed, and is signed in', async () => {
    const fresh = await openTestShop({ withPeople: false })
    const owner = { name: 'Otis Brand', email: 'otis@fernhill.example', password: 'vellum tractor oslo' }
    const code = (await makeOwnerCode(fresh.deps))?.code ?? ''
    const client = fresh.newClient()
    expect((await client.get('/api/session')).body['needsOwner']).toBe(true)
    expect((await client.post('/api/owner', { ...owner, code: 'WRNG-WRNG' })).body['code']).toBe('wrong-code')
    expect((await client.post('/api/owner', { ...owner, code, password: 'password123456789' })).body['code']).toBe('weak-password')
    const answers = await Promise.all(
      Array.from({ length: 5 }, (_, count) =>
        fresh.newClient().post('/api/owner', { ...owner, email: `o${count}@fernhill.example`, code: code.toLowerCase().replaceAll('-', ' ') }),
      ),
    )
    expect(answers.map(({ status }) => status).toSorted()).toEqual([201, 409, 409, 409, 409])
    expect(await makeOwnerCode(fresh.deps)).toBeNull()
    expect((await client.get('/api/session')).body['needsOwner']).toBe(false)
    expect((await client.post('/api/owner', { ...owner, code })).body['code']).toBe('already-set-up')
    await fresh.close()
  })

  test('guessing the code is throttled, and a code is good for a day', async () => {
    const fresh = await openTestShop({ withPeople: false })
    const code = (await makeOwnerCode(fresh.deps))?.code ?? ''
    const body = { name: 'Otis Brand', email: 'otis@fernhill.example', password: 'vellum tractor oslo' }
    const client = fresh.newClient()
    const tries: number[] = []
    for (let count = 0; count < 12; count++) tries.push((await client.post('/api/owner', { ...body, code: `AAAA-${count}` })).status)
    expect(tries).toEqual([...Array.from({ length: 10 }, () => 422), 429, 429])
    fresh.wait(day + 60)
    expect((await client.post('/api/owner', { ...body, code })).body['code']).toBe('wrong-code')
    await fresh.close()
  })
})
