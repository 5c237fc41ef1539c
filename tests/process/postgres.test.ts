import { afterAll, beforeAll, describe, expect, test } from 'vitest'
import pg from 'pg'

import { demoStories } from '#seeds-demo/demo-stories.ts'
import { Client } from '#tests/api/test-shop.ts'
import { startThrowawayPostgres } from '#tests/support/throwaway-postgres.ts'
import type { ThrowawayPostgres } from '#tests/support/throwaway-postgres.ts'
import { NoteWriter, signInJunior } from './note-writer.ts'
import { makeFolder, runToEnd, startServer } from './programs.ts'

let postgres: ThrowawayPostgres
beforeAll(async () => {
  postgres = await startThrowawayPostgres()
})
afterAll(() => postgres.stop())

async function createDatabase(name: string): Promise<string> {
  const client = new pg.Client({ connectionString: postgres.url })
  await client.connect()
  await client.query(`create database ${name}`)
  await client.end()
  return new URL(`/${name}`, postgres.url).href
}

describe('on a PostgreSQL server', () => {
  test('two servers that start at once on an empty database migrate it once and share the shop', async () => {
    const environment = { DATABASE_URL: await createDatabase('shared_shop'), PULLCORD_DATA: await makeFolder(), DEMO: '0' }
    const [one, other] = await Promise.all([startServer(environment), startServer(environment)])
    const said = [one, other].filter((server) => server.stdout().includes('Brought the database to schema'))
    expect(said).toHaveLength(1)
    const code = /\n {2}([0-9A-Z-]{20,})\n/.exec(one.stdout())?.[1]
    const client = new Client(other.url)
    const owner = { code, name: 'Olga Brandt', email: 'olga@shop.example', password: 'seven quiet lathes humming' }
    expect((await client.post('/api/owner', owner)).status).toBe(201)
    // The same session is good at either: both read one secret and one table.
    const elsewhere = new Client(one.url)
    for (const [name, value] of client.cookies) elsewhere.cookies.set(name, value)
    expect((await elsewhere.get('/api/people')).status).toBe(200)
    expect(await Promise.all([one.end('SIGTERM'), other.end('SIGTERM')])).toEqual([0, 0])
  })

  test('a server killed under a writing device starts again with every event that it acknowledged', async () => {
    const environment = { DATABASE_URL: await createDatabase('killed_shop'), PULLCORD_DATA: await makeFolder(), DEMO: '1' }
    const server = await startServer(environment)
    const writer = new NoteWriter(await signInJunior(server.url))
    const writing = writer.writeUntilGone(server.url)
    await expect.poll(() => writer.acknowledged.length, { timeout: 60_000 }).toBeGreaterThan(20)
    await server.end('SIGKILL')
    await writing
    const again = await startServer({ ...environment, DEMO: '' })
    await writer.expectWhole(again.url)
    // Beside a server the command line is welcome here: the database keeps them apart.
    const { status, stdout } = await runToEnd(['server/cli.ts', 'doctor'], { ...environment, DEMO: '' })
    expect(status).toBe(0)
    expect(JSON.parse(stdout)).toMatchObject({ engine: 'postgresql', isDemo: true, walks: demoStories.length + 1, walksWithHoles: [] })
    expect(await again.end('SIGTERM')).toBe(0)
  })
})
