import { afterAll, beforeAll, describe, expect, test } from 'vitest'
import { roles } from '#shared/trade/roles.ts'
import { openTestShop, type TestShop } from './test-shop.ts'

let shop: TestShop
beforeAll(async () => {
  shop = await openTestShop()
})
afterAll(() => shop.close())

const inShort = ({ id, name, role }: { readonly id: string; readonly name: string; readonly role: string }) => ({ id, name, role })

describe('who is in the shop, for everybody in it', () => {
  test.each(roles)('a %s reads id, name and role of all who can sign in, by name, and nothing else of them', async (role) => {
    const answer = await (await shop.as(role)).get('/api/people/active')
    expect(answer.status).toBe(200)
    expect(answer.body).toEqual({ people: [shop.person('junior'), shop.person('lead'), shop.person('owner')].map(inShort) })
  })

  test('a person who was deactivated or has not set a password yet is not in it, and is once they can sign in', async () => {
    const owner = await shop.as('owner')
    const junior = await shop.as('junior')
    const names = async () => ((await junior.get('/api/people/active')).body['people'] as { name: string }[]).map(({ name }) => name)
    const usual = await names()

    const gone = await shop.addPerson('lead', 'Gil Gone')
    expect(await names()).toContain('Gil Gone')
    await owner.patch(`/api/people/${gone.id}`, { isActive: false })
    await owner.post('/api/people', { name: 'Ina Invited', email: 'ina@fernhill.example', role: 'junior' })
    expect(await names()).toEqual(usual)
    await owner.patch(`/api/people/${gone.id}`, { isActive: true })
    expect(await names()).toContain('Gil Gone')
    await owner.patch(`/api/people/${gone.id}`, { isActive: false })
  })

  test('nobody reads it who is not signed in', async () => {
    const answer = await shop.newClient().get('/api/people/active')
    expect([answer.status, answer.body['code'], answer.body['people']]).toEqual([401, 'signed-out', undefined])
  })

  test('it opens no other way to the people of the shop', async () => {
    const junior = await shop.as('junior')
    const answer = await junior.ask('PATCH', '/api/people/active', { body: { role: 'owner' } })
    expect([answer.status, answer.body['code'], answer.headers.get('allow')]).toEqual([405, 'method-not-allowed', 'GET'])
    expect((await junior.get('/api/people')).status).toBe(403)
  })
})
