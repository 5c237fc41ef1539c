import { randomUUID } from 'node:crypto'
import { afterAll, beforeAll, describe, expect, test } from 'vitest'
import type { DeviceId, EventId, PersonId, WalkId } from '#shared/lib/ids.ts'
import type { WalkEvent } from '#shared/walk/events.ts'
import { asked, questionId, revs, started, tap } from '#tests/support/walk-builder.ts'
import { after, logOf, note, openBench, send, statuses } from './saw-walks.ts'
import { openTestShop, type Client, type TestPerson, type TestShop } from './test-shop.ts'

let shop: TestShop
let clients: { junior: Client; lead: Client; owner: Client }
beforeAll(async () => {
  shop = await openTestShop()
  clients = await openBench(shop)
})
afterAll(() => shop.close())

const junior = () => shop.person('junior')
const otherDevice = '01900000-0000-7000-8000-0000000000aa' as DeviceId

/** A walk that the junior has begun on the server: start, reproduced, speed read. */
async function begun(acts = [started(), tap('yes'), revs(9000)], person: TestPerson = junior(), client = clients.junior) {
  const log = logOf(person, acts)
  const answer = await send(client, log.walkId, log.events)
  expect(new Set(statuses(answer))).toEqual(new Set(['appended']))
  return { ...log, last: log.events.at(-1) }
}

const logLength = async (walkId: WalkId) => (await clients.lead.get(`/api/walks/${walkId}`)).body['lastSeq']
const sideEvents = async (client: Client, walkId: WalkId) =>
  (await client.get(`/api/walks/${walkId}/side-events`)).body['sideEvents'] as { event: WalkEvent; status: string; code: string }[]

describe('a walk through the API', () => {
  test('a junior walks a chart to a proven cause, one batch a tap, and the row tells where it stands', async () => {
    const { walkId, events } = logOf(junior())
    const first = await clients.junior.post('/api/walks', { id: walkId, event: events[0] })
    expect(first.body).toMatchObject({ results: [{ id: events[0]?.id, status: 'appended' }], lastSeq: 1 })
    for (const event of events.slice(1)) expect(statuses(await send(clients.junior, walkId, [event]))).toEqual(['appended'])
    const { body } = await clients.junior.get(`/api/walks/${walkId}`)
    expect(body).toMatchObject({
      lastSeq: events.length,
      walk: {
        phase: 'closed',
        isOpen: false,
        standsAt: 'repaired, run passed',
        causeTitle: 'Filter packed',
        chartTitle: 'No guts',
        machineTitle: 'Chain saw, two-stroke',
        startedBy: { name: 'Jun Okoro' },
      },
      people: { [junior().id]: 'Jun Okoro' },
    })
    expect(body['events']).toEqual(events)
    expect(body['charts']).toHaveLength(1)
  })

  test('the whole log in one batch comes to the same', async () => {
    const { walkId, events } = logOf(junior())
    const answer = await send(clients.junior, walkId, events)
    expect(new Set(statuses(answer))).toEqual(new Set(['appended']))
    expect(answer.lastSeq).toBe(events.length)
  })

  test('the row says the check at which the walk stands, a question, and a pause', async () => {
    const { walkId, last } = await begun([started(), tap('yes'), revs(9000), asked])
    const row = async () => (await clients.junior.get(`/api/walks/${walkId}`)).body['walk']
    expect(await row()).toMatchObject({
      phase: 'at-node',
      standsAt: expect.stringMatching(/^check \d+ · Look at|^check \d+ · /),
      hasQuestion: true,
      isPaused: false,
    })
    await send(clients.junior, walkId, [after(last, { type: 'paused', payload: {} })])
    expect(await row()).toMatchObject({ isPaused: true, isOpen: true })
  })
})

describe('what becomes of an event', () => {
  test('appended once, then duplicate however often it is sent, alone or in its batch', async () => {
    const { walkId, events } = await begun()
    expect(new Set(statuses(await send(clients.junior, walkId, events)))).toEqual(new Set(['duplicate']))
    expect(statuses(await send(clients.junior, walkId, events.slice(1, 2)))).toEqual(['duplicate'])
    expect(statuses(await send(clients.junior, walkId, [{ ...events[1], seq: 900 } as WalkEvent]))).toEqual(['duplicate'])
    expect(await logLength(walkId)).toBe(events.length)
  })

  test('twenty devices posting one batch at once append it once', async () => {
    const { walkId, events, last } = await begun()
    const batch = [after(last, note('a')), after(after(last, note()), note('b'))]
    const answers = await Promise.all(Array.from({ length: 20 }, () => send(clients.junior, walkId, batch)))
    const all = answers.flatMap(statuses)
    expect(all.filter((status) => status === 'appended')).toHaveLength(2)
    expect(all.filter((status) => status === 'duplicate')).toHaveLength(38)
    expect(await logLength(walkId)).toBe(events.length + 2)
  })

  test('twenty starts of one walk at once start it once', async () => {
    const { walkId, events } = logOf(junior(), [started()])
    const answers = await Promise.all(Array.from({ length: 20 }, () => clients.junior.post('/api/walks', { id: walkId, event: events[0] })))
    const all = answers.flatMap(({ body }) => statuses(body as { results: { status: string }[] }))
    expect(all.toSorted()).toEqual(['appended', ...Array.from({ length: 19 }, () => 'duplicate')])
  })

  test('a gap is not stored, and can be filled afterwards', async () => {
    const { walkId, last } = await begun()
    const next = after(last, note('first'))
    const later = after(next, note('second'))
    expect(statuses(await send(clients.junior, walkId, [later]))).toEqual(['gap'])
    expect(await sideEvents(clients.junior, walkId)).toEqual([])
    expect(statuses(await send(clients.junior, walkId, [next, later]))).toEqual(['appended', 'appended'])
  })

  test('an event under an old number is a fork, and so is all that its device sends after it', async () => {
    const { walkId, events, last } = await begun()
    const old = after(events[0], note('old'))
    const follower = after(last, note('follower'))
    const answer = await send(clients.junior, walkId, [old, follower])
    expect(answer.results).toMatchObject([{ status: 'fork', code: 'wrong-seq' }, { status: 'fork' }])
    expect(answer.lastSeq).toBe(events.length)
    expect((await sideEvents(clients.junior, walkId)).map(({ event }) => event)).toEqual([old, follower])
  })

  test('an event for a check that the walk has left is refused, and kept beside the log with its reason', async () => {
    const { walkId, last } = await begun()
    const stray = after(last, {
      type: 'finding-recorded',
      payload: { node: 'saw/n1', outcome: 'yes', judgedBy: 'hand', photoIds: [], seconds: 1 },
    } as unknown as Pick<WalkEvent, 'type' | 'payload'>)
    const answer = await send(clients.junior, walkId, [stray])
    expect(answer.results).toEqual([{ id: stray.id, status: 'refused', code: 'wrong-node' }])
    expect(await sideEvents(clients.junior, walkId)).toMatchObject([{ event: stray, status: 'refused', code: 'wrong-node' }])
  })

  test('in a batch whose third event is bad the first two are appended, the third is refused, the rest are forks', async () => {
    const { walkId, events, last } = await begun()
    const one = after(last, note('one'))
    const two = after(one, note('two'))
    const bad = after(two, { type: 'run-passed', payload: { items: [] } })
    const four = after(bad, note('four'))
    const five = after(four, note('five'))
    const answer = await send(clients.junior, walkId, [one, two, bad, four, five])
    expect(answer.results.map(({ status, code }) => [status, code])).toEqual([
      ['appended', undefined],
      ['appended', undefined],
      ['refused', 'wrong-phase'],
      ['fork', 'wrong-seq'],
      ['fork', 'wrong-seq'],
    ])
    expect(answer.lastSeq).toBe(events.length + 2)
    expect((await sideEvents(clients.junior, walkId)).map(({ event }) => event.id)).toEqual([bad.id, four.id, five.id])
  })

  test('a side event sent again answers what it answered first, also under another number, and drags what follows with it', async () => {
    const { walkId, last } = await begun()
    const bad = after(last, { type: 'run-passed', payload: { items: [] } })
    const follower = after(bad, note())
    const first = await send(clients.junior, walkId, [bad, follower])
    expect((await send(clients.junior, walkId, [bad, follower])).results).toEqual(first.results)
    const newcomer = after(last, note('new'))
    expect((await send(clients.junior, walkId, [{ ...follower, seq: 77 }, newcomer])).results).toMatchObject([{ status: 'fork' }, { status: 'fork' }])
  })

  test('the same id with another body is a conflict, and the first stands', async () => {
    const { walkId, events, last } = await begun()
    const next = after(last, note('as it was'))
    await send(clients.junior, walkId, [next])
    const changed = { ...next, payload: { text: 'as it was not', photoIds: [] } } as WalkEvent
    expect(statuses(await send(clients.junior, walkId, [changed]))).toEqual(['conflict'])
    const { body } = await clients.junior.get(`/api/walks/${walkId}`)
    expect((body['events'] as WalkEvent[]).at(-1)).toEqual(next)
    expect(body['lastSeq']).toBe(events.length + 1)
    expect(await sideEvents(clients.junior, walkId)).toEqual([])
  })

  test('an id that another walk holds is a conflict', async () => {
    const one = await begun()
    const other = await begun()
    const thief = after(other.last, note(), { id: one.events[1]?.id ?? ('' as EventId) })
    expect(statuses(await send(clients.junior, other.walkId, [thief]))).toEqual(['conflict'])
  })

  test('the same event twice in one batch is appended once', async () => {
    const { walkId, last } = await begun()
    const next = after(last, note())
    expect(statuses(await send(clients.junior, walkId, [next, next]))).toEqual(['appended', 'duplicate'])
  })

  test('batches of many walks at the same moment each get what they would get alone', async () => {
    const walks = await Promise.all(Array.from({ length: 12 }, () => begun()))
    const stolen = walks[0]?.events[1]?.id ?? ('' as EventId)
    const bodies = walks.map(({ last }, order) => {
      const next = after(last, note(`of walk ${order}`), order === 3 ? { id: stolen } : {})
      return [next, after(next, order === 5 ? { type: 'run-passed', payload: { items: [] } } : note('and more'))]
    })
    const answers = await Promise.all(walks.map(({ walkId }, order) => send(clients.junior, walkId, bodies[order] ?? [])))
    expect(answers.map(statuses)).toEqual(
      walks.map((_, order) => (order === 3 ? ['conflict', 'fork'] : order === 5 ? ['appended', 'refused'] : ['appended', 'appended'])),
    )
    for (const [order, { walkId, events }] of walks.entries()) {
      const added = order === 3 ? [] : (bodies[order] ?? []).slice(0, order === 5 ? 1 : 2)
      expect((await clients.junior.get(`/api/walks/${walkId}`)).body['events']).toEqual([...events, ...added])
    }
  })

  test('after a restart, with nothing remembered, a log goes on where it ended', async () => {
    const { walkId, events, last } = await begun()
    const again = await openSecondProcess()
    expect(statuses(await again.postAs(clients.junior, walkId, [after(last, note())]))).toEqual(['appended'])
    // The first process remembers less than the log holds by now, and finds that out.
    const next = after(after(last, note()), note('of the first process'))
    expect(statuses(await send(clients.junior, walkId, [next]))).toEqual(['appended'])
    expect(await logLength(walkId)).toBe(events.length + 2)
    await again.close()
  })
})

/** Another server process on the same database: nothing of what the first one remembers. */
async function openSecondProcess() {
  const { createServer } = await import('node:http')
  const { createApp } = await import('#server/app.ts')
  const server = createServer(createApp({ ...shop.deps, db: new Proxy(shop.deps.db, {}) }))
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve))
  const { port } = server.address() as { port: number }
  return {
    postAs: async (client: Client, walkId: WalkId, events: readonly WalkEvent[]) => {
      const cookie = [...client.cookies].map(([name, value]) => `${name}=${value}`).join('; ')
      const response = await fetch(`http://127.0.0.1:${port}/api/walks/${walkId}/events`, {
        method: 'POST',
        headers: { 'content-type': 'application/json', cookie },
        body: JSON.stringify({ events }),
      })
      return (await response.json()) as { results: { status: string }[] }
    },
    close: () =>
      new Promise<void>((resolve) => {
        server.close(() => resolve())
        server.closeAllConnections()
      }),
  }
}

describe('who holds a walk', () => {
  test('events of another device are forks, until it resumes the walk; then those of the first one are', async () => {
    const { walkId, last } = await begun()
    const foreign = after(last, note('from the phone'), { deviceId: otherDevice })
    expect((await send(clients.junior, walkId, [foreign])).results).toMatchObject([{ status: 'fork', code: 'other-device' }])
    const resumed = after(last, { type: 'resumed', payload: {} }, { deviceId: otherDevice })
    expect(statuses(await send(clients.junior, walkId, [resumed]))).toEqual(['appended'])
    expect(statuses(await send(clients.junior, walkId, [after(resumed, note('from the phone again'))]))).toEqual(['appended'])
    const late = after(after(resumed, note()), note('from the tablet'), { deviceId: last?.deviceId ?? otherDevice })
    expect((await send(clients.junior, walkId, [late])).results).toMatchObject([{ status: 'fork', code: 'other-device' }])
  })

  test('a lead takes a walk over; its junior sees it go on and can no longer write to it', async () => {
    const { walkId, last } = await begun()
    const lead = shop.person('lead')
    const taken = after(
      last,
      { type: 'taken-over', payload: { from: junior().id, why: 'Needed for a saw that has to go out.' } },
      { personId: lead.id, deviceId: otherDevice },
    )
    expect(statuses(await send(clients.lead, walkId, [taken]))).toEqual(['appended'])
    expect((await clients.junior.get(`/api/walks/${walkId}`)).body['walk']).toMatchObject({ heldBy: { name: 'Lena Marsh', deviceId: otherDevice } })
    expect(statuses(await send(clients.junior, walkId, [after(taken, note(), { personId: junior().id, deviceId: last?.deviceId ?? otherDevice })]))).toEqual([
      'fork',
    ])
    const mine = (await clients.lead.get('/api/walks?scope=mine')).body['walks'] as { id: string }[]
    expect(mine.map(({ id }) => id)).toContain(walkId)
  })

  test('another junior neither sees a walk nor writes to it, until it is handed over to them', async () => {
    const mate = await shop.addPerson('junior', 'Mia Fell')
    const mateClient = await shop.signIn(mate)
    const { walkId, last } = await begun()
    const taken = after(last, { type: 'taken-over', payload: { from: junior().id, why: 'Lunch is over.' } }, { personId: mate.id, deviceId: otherDevice })
    for (const answer of [
      await mateClient.get(`/api/walks/${walkId}`),
      await send(mateClient, walkId, [taken]),
      await mateClient.get(`/api/walks/${walkId}/side-events`),
    ]) {
      expect(answer.status).toBe(404)
    }
    const handed = after(last, { type: 'handed-over', payload: { to: mate.id } })
    expect(statuses(await send(clients.junior, walkId, [handed]))).toEqual(['appended'])
    expect((await mateClient.get(`/api/walks/${walkId}`)).status).toBe(200)
    expect(((await mateClient.get('/api/walks')).body['walks'] as { id: string }[]).map(({ id }) => id)).toEqual([walkId])
    expect(statuses(await send(mateClient, walkId, [{ ...taken, seq: handed.seq + 1 }]))).toEqual(['appended'])
  })

  test('a walk is not handed over to somebody whom the shop does not know, or has deactivated', async () => {
    const gone = await shop.addPerson('junior', 'Gil Gone')
    await clients.owner.patch(`/api/people/${gone.id}`, { isActive: false })
    for (const to of [randomUUID() as PersonId, gone.id]) {
      const { walkId, last } = await begun()
      expect((await send(clients.junior, walkId, [after(last, { type: 'handed-over', payload: { to } })])).results).toMatchObject([
        { status: 'refused', code: 'no-such-person' },
      ])
    }
  })

  test('nobody writes in the name of somebody else: it is refused, and kept for nobody, so that its own person can still send it', async () => {
    const { walkId, last } = await begun()
    const next = after(last, note('of the junior'))
    expect((await send(clients.lead, walkId, [next])).results).toEqual([{ id: next.id, status: 'refused', code: 'not-you' }])
    expect(await sideEvents(clients.lead, walkId)).toEqual([])
    expect(statuses(await send(clients.junior, walkId, [next]))).toEqual(['appended'])
  })

  test('only a lead answers a question; the answer is appended whatever device holds the walk', async () => {
    const { walkId, last } = await begun([started(), tap('yes'), asked])
    const answered = (person: TestPerson, deviceId: DeviceId) =>
      after(
        last,
        { type: 'answered', payload: { questionId: JSON.parse(JSON.stringify(last?.payload)).questionId ?? questionId, text: 'Yes, go on.', photoIds: [] } },
        { personId: person.id, deviceId },
      )
    expect((await send(clients.junior, walkId, [answered(junior(), last?.deviceId ?? otherDevice)])).results).toMatchObject([
      { status: 'refused', code: 'lead-only' },
    ])
    expect(statuses(await send(clients.lead, walkId, [answered(shop.person('lead'), otherDevice)]))).toEqual(['appended'])
  })

  test('side events are shown to their own person, and to a lead those of everybody', async () => {
    const { walkId, last } = await begun()
    const lead = shop.person('lead')
    const ofJunior = after(last, { type: 'run-passed', payload: { items: [] } })
    const ofLead = after(last, note('from my desk'), { personId: lead.id, deviceId: otherDevice })
    await send(clients.junior, walkId, [ofJunior])
    await send(clients.lead, walkId, [ofLead])
    expect((await sideEvents(clients.junior, walkId)).map(({ event }) => event.id)).toEqual([ofJunior.id])
    expect((await sideEvents(clients.lead, walkId)).map(({ event }) => event.id)).toEqual([ofJunior.id, ofLead.id])
  })
})

describe('the start of a walk', () => {
  test('a walk of somebody else under the same id is not told apart from any taken id', async () => {
    const mine = await begun()
    const mate = await shop.addPerson('junior', 'Ned Vale')
    const { events } = logOf(mate, [started()])
    const client = await shop.signIn(mate)
    const answer = await client.post('/api/walks', { id: mine.walkId, event: { ...events[0], walkId: mine.walkId } })
    expect([answer.status, answer.body['code']]).toEqual([409, 'walk-exists'])
  })

  test('it pins versions that exist; a version since replaced is one of them', async () => {
    const { walkId, events } = logOf(junior(), [started()])
    const moved = { ...events[0], payload: { ...events[0]?.payload, pins: { saw: 9 } } } as unknown as WalkEvent
    expect((await send(clients.junior, walkId, [moved])).results).toMatchObject([{ status: 'refused', code: 'no-such-version' }])
    expect((await clients.junior.get(`/api/walks/${walkId}`)).status).toBe(404)
    expect(await sideEvents(clients.junior, walkId)).toMatchObject([{ status: 'refused', code: 'no-such-version' }])

    const offline = logOf(junior(), [started(), tap('yes')])
    const draft = await clients.lead.get('/api/charts/saw/draft')
    const document = { ...(draft.body['document'] as object), title: 'No guts at all' }
    const saved = await clients.lead.put('/api/charts/saw/draft', { document }, { 'if-match': draft.headers.get('etag') ?? '' })
    expect(
      (await clients.lead.post('/api/charts/saw/publish', { revision: saved.body['revision'], changeNote: 'New title', acceptsWarnings: true })).body[
        'version'
      ],
    ).toBe(2)
    expect(new Set(statuses(await send(clients.junior, offline.walkId, offline.events)))).toEqual(new Set(['appended']))
    expect((await clients.junior.get(`/api/walks/${offline.walkId}`)).body['walk']).toMatchObject({ version: 1, chartTitle: 'No guts' })
  })

  test('a batch for a walk that nobody started is not found, unless it begins with the start', async () => {
    const { walkId, events } = logOf(junior(), [started(), tap('yes')])
    expect((await send(clients.junior, walkId, events.slice(1))).status).toBe(404)
    expect(new Set(statuses(await send(clients.junior, walkId, events)))).toEqual(new Set(['appended']))
  })

  test('an event of another walk in the batch stops it all, by name, before anything is stored', async () => {
    const one = await begun()
    const other = await begun()
    const answer = await send(clients.junior, one.walkId, [after(one.last, note()), after(other.last, note())])
    expect([answer.status, answer.body['code']]).toEqual([422, 'wrong-walk'])
    expect(answer.body['errors']).toMatchObject([{ pointer: '#/events/1/walkId' }])
    expect(await logLength(one.walkId)).toBe(one.events.length)
  })
})

describe('lists of walks', () => {
  test("one's own by default, the shop's for a lead, a page at a time, newest first", async () => {
    const quiet = await shop.addPerson('junior', 'Quinn Lark')
    const client = await shop.signIn(quiet)
    const ids: string[] = []
    for (let count = 0; count < 27; count++) {
      shop.wait(1)
      ids.unshift((await begun([started()], quiet, client)).walkId)
    }
    const first = await client.get('/api/walks')
    const second = await client.get('/api/walks?page=2')
    const idsOf = ({ body }: { body: Record<string, unknown> }) => (body['walks'] as { id: string }[]).map(({ id }) => id)
    expect([...idsOf(first), ...idsOf(second)]).toEqual(ids)
    expect([first.body['hasMore'], second.body['hasMore']]).toEqual([true, false])
    expect((await client.get('/api/walks?scope=shop')).status).toBe(403)
    expect(idsOf(await clients.lead.get('/api/walks?scope=shop'))).toEqual(ids.slice(0, 25))
    expect(idsOf(await client.get('/api/walks?state=ended'))).toEqual([])
  })
})
