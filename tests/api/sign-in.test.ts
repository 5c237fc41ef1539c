import { afterAll, afterEach, beforeAll, describe, expect, test } from 'vitest'
import { createBcryptPasswords } from '#server/adapters/passwords/bcrypt-passwords.ts'
import { auditLog } from '#server/db/schema/audit-log.ts'
import { signInThrottles } from '#server/db/schema/sign-in-throttles.ts'
import { bcryptCost } from '#server/services/password-hash.ts'
import { signIn } from '#server/services/sign-in.ts'
import { openTestShop, type Client, type TestShop } from './test-shop.ts'

let shop: TestShop
beforeAll(async () => {
  shop = await openTestShop()
})
afterEach(() => {
  shop.wait(3600)
})
afterAll(() => shop.close())

const wrong = 'not the one at all'
const tryIn = (client: Client, email: string, password = wrong, headers: Readonly<Record<string, string>> = {}) =>
  client.post('/api/session', { email, password }, headers)

describe('a refused sign-in', () => {
  test('reads alike for a wrong password, an unknown address, an invited and a deactivated person', async () => {
    const owner = await shop.as('owner')
    await owner.post('/api/people', { name: 'Ina Invited', email: 'ina@fernhill.example', role: 'junior' })
    const gone = await shop.addPerson('junior', 'Gus Gone')
    await owner.patch(`/api/people/${gone.id}`, { isActive: false })
    const answers = await Promise.all([
      tryIn(shop.newClient(), shop.person('junior').email),
      tryIn(shop.newClient(), 'nobody@fernhill.example'),
      tryIn(shop.newClient(), 'ina@fernhill.example'),
      tryIn(shop.newClient(), gone.email, gone.password),
    ])
    const shape = ({ status, headers, body }: (typeof answers)[number]) => ({ status, body: { ...body, instance: '' }, headers: [...headers.keys()].sort() })
    for (const answer of answers) expect(shape(answer)).toEqual(shape(answers[0]))
    expect(answers[0].body['code']).toBe('wrong-sign-in')
  })

  test('takes as long for an unknown address as for a known one', async () => {
    // At the cost of the real server: here the three of the shop have cheap hashes.
    const deps = { ...shop.deps, passwords: createBcryptPasswords(bcryptCost) }
    const known = await shop.addPerson('junior', 'Tia Long')
    const client = await shop.as('owner')
    const { link } = (await client.post(`/api/people/${known.id}/link`, {})).body as { link: { url: string } }
    const { acceptLink } = await import('#server/services/links.ts')
    await acceptLink(deps, link.url.slice(link.url.lastIndexOf('/') + 1), 'vellum tractor paris')
    const timeOf = async (email: string) => {
      const times: number[] = []
      for (let count = 0; count < 5; count++) {
        const before = process.cpuUsage()
        await signIn(deps, { email, password: wrong, address: `192.0.2.${count}`, browser: '', knownBrowser: null, oldSessionId: null }).catch(() => null)
        const { user, system } = process.cpuUsage(before)
        times.push(user + system)
      }
      return times.toSorted((one, other) => one - other)[2] ?? 0
    }
    const [there, notThere] = [await timeOf(known.email), await timeOf('nobody-here@fernhill.example')]
    expect(Math.max(there, notThere) / Math.min(there, notThere)).toBeLessThan(1.5)
  })

  test('names no e-mail address in the log, and stands in the audit log', async () => {
    await tryIn(shop.newClient(), 'somebody-secret@fernhill.example', 'my secret phrase here')
    expect(shop.logLines.join('')).not.toMatch(/somebody-secret|my secret phrase/)
    expect((await shop.deps.db.select().from(auditLog)).filter(({ act }) => act === 'sign-in-refused').length).toBeGreaterThan(0)
  })
})

describe('the throttle', () => {
  test('two hundred tries end in 429 with the time to wait; the right password works when it is over', async () => {
    const client = shop.newClient()
    const { email, password } = shop.person('junior')
    const answers = await Promise.all(Array.from({ length: 200 }, (_, count) => tryIn(client, email, `${wrong} ${count}`)))
    expect(answers.filter(({ status }) => status === 401).length).toBeLessThanOrEqual(10)
    const refused = answers.filter(({ status }) => status === 429)
    expect(refused.length).toBeGreaterThanOrEqual(190)
    expect(refused[0]?.body).toMatchObject({ code: 'too-many-tries', detail: expect.stringContaining('minutes') })
    const seconds = Number(refused[0]?.headers.get('retry-after'))
    expect(seconds).toBeGreaterThan(0)
    expect(seconds).toBeLessThanOrEqual(15 * 60)
    expect((await tryIn(client, email, password)).status).toBe(429)
    shop.wait(seconds + 1)
    expect((await tryIn(client, email, password)).status).toBe(200)
  })

  test('an unknown address is throttled just like a known one', async () => {
    const client = shop.newClient()
    const statusesFor = async (email: string) => {
      const statuses: number[] = []
      for (let count = 0; count < 12; count++) statuses.push((await tryIn(client, email)).status)
      return statuses
    }
    expect(await statusesFor('nobody-at-all@fernhill.example')).toEqual(await statusesFor(shop.person('lead').email))
  })

  test('somebody who guesses at an account does not lock out its person, who signs in from a browser that they used before', async () => {
    const { email, password } = shop.person('owner')
    const own = await shop.as('owner')
    await own.delete('/api/session')
    for (let count = 0; count < 15; count++) await tryIn(shop.newClient(), email)
    expect((await tryIn(shop.newClient(), email, password)).status).toBe(429)
    expect((await tryIn(own, email, password)).status).toBe(200)
  })

  test('a browser that one account knows gives no more tries at another', async () => {
    const own = await shop.as('junior')
    const statuses: number[] = []
    for (let count = 0; count < 12; count++) statuses.push((await tryIn(own, shop.person('lead').email)).status)
    expect(statuses.filter((status) => status === 401)).toHaveLength(10)
  })

  test('an address that tries many accounts is throttled, whatever it writes into X-Forwarded-For', async () => {
    const people = await Promise.all(Array.from({ length: 11 }, (_, count) => shop.addPerson('junior', `Many ${count}`)))
    const client = shop.newClient()
    const statuses: number[] = []
    for (let count = 0; count < 110; count++) {
      const headers = { 'x-forwarded-for': `198.51.100.${count}`, forwarded: `for=198.51.100.${count}` }
      statuses.push((await tryIn(client, people[Math.floor(count / 10)]?.email ?? '', wrong, headers)).status)
    }
    expect(statuses.slice(0, 100).every((status) => status === 401)).toBe(true)
    expect(statuses.slice(100).every((status) => status === 429)).toBe(true)
  })

  test('keeps its count in the database, as hashes: a restart forgets nothing, and a copy names nobody', async () => {
    await tryIn(shop.newClient(), shop.person('junior').email)
    const rows = await shop.deps.db.select().from(signInThrottles)
    expect(rows.length).toBeGreaterThan(0)
    expect(JSON.stringify(rows)).not.toMatch(/fernhill|127\.0\.0\.1/)
  })
})

describe('a password', () => {
  test('is changed with the present one, which ends the other sessions and keeps this one', async () => {
    const person = await shop.addPerson('junior', 'Pia West')
    const [here, elsewhere] = [await shop.signIn(person), await shop.signIn(person)]
    const refused = await here.put('/api/session/password', { present: wrong, password: 'vellum tractor paris' })
    expect([refused.status, refused.body['code'], refused.body['errors']]).toEqual([
      422,
      'wrong-present-password',
      [{ pointer: '#/present', detail: 'This is not your present password.' }],
    ])
    expect((await here.put('/api/session/password', { present: person.password, password: 'vellum tractor paris' })).body).toEqual({ done: true })
    expect((await here.get('/api/sessions')).status).toBe(200)
    expect((await elsewhere.get('/api/sessions')).status).toBe(401)
    expect((await tryIn(shop.newClient(), person.email, person.password)).status).toBe(401)
    expect((await tryIn(shop.newClient(), person.email, 'vellum tractor paris')).status).toBe(200)
  })

  test('is checked exactly as it was typed: case, blanks and accents count, and nothing is cut', async () => {
    const person = await shop.addPerson('junior', 'Uma Reyes')
    const client = await shop.signIn(person)
    const password = ' Gable wren oxide  plinth 9 quärtz ferry dune kelp mauve lemon trout  '
    expect(Buffer.byteLength(password)).toBeLessThanOrEqual(72)
    expect((await client.put('/api/session/password', { present: person.password, password })).status).toBe(200)
    for (const other of [password.trim(), password.toLowerCase(), password.replace('ä', 'a'), password.slice(0, -1), `${password} `]) {
      expect((await tryIn(shop.newClient(), person.email, other)).status).toBe(401)
    }
    expect((await tryIn(shop.newClient(), person.email, password)).status).toBe(200)
  })

  test.each([
    ['too short', 'fourteen chars', /At least 15 characters: this has 14/],
    ['over 72 bytes', 'ü'.repeat(37), /At most 72 bytes: this has 74/],
    ['the e-mail address', 'lena.marsh@fernhill.example', /among the first/],
    ['common', 'letmeinletmein1', /among the first/],
  ])('is refused in words when it is %s', async (_why, password, words) => {
    const lead = await shop.as('lead')
    const answer = await lead.put('/api/session/password', { present: shop.person('lead').password, password })
    expect([answer.status, answer.body['code'], answer.body['detail']]).toEqual([422, 'weak-password', expect.stringMatching(words)])
    expect((await shop.as('lead')).cookies.size).toBeGreaterThan(0)
  })
})
