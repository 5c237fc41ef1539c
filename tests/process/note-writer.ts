import { expect } from 'vitest'

import { Client } from '#tests/api/test-shop.ts'
import { demoSignIns } from '#server/services/demo-sign-ins.ts'
import { createIdSource } from '#server/lib/ids.ts'

const newId = createIdSource(Date.now)
type Sent = { readonly id: string; readonly seq: number; readonly at: string }

/** An event keeps its id and its moment however often it is sent. */
const toNext = (seq: number): Sent => ({ id: newId(), seq, at: new Date().toISOString() })

/** Who writes: a session of the junior's; it outlives the server. */
export type Session = { readonly personId: string; readonly cookies: ReadonlyMap<string, string> }

export async function signInJunior(url: string): Promise<Session> {
  const junior = demoSignIns.find(({ role }) => role === 'junior')
  const client = new Client(url)
  const answer = await client.post('/api/session', { email: junior?.email, password: junior?.password })
  expect(answer.status, answer.text).toBe(200)
  const { person } = answer.body as unknown as { person: { id: string } }
  return { personId: person.id, cookies: new Map(client.cookies) }
}

/** A device that writes notes into a walk of its own, one request after the other, and remembers what was acknowledged. */
export class NoteWriter {
  readonly walkId = newId()
  readonly acknowledged: string[] = []
  readonly #deviceId = newId()
  readonly #session: Session
  #next = toNext(1)

  constructor(session: Session) {
    this.#session = session
  }

  /** Writes until the server is gone. An event whose answer was lost is sent again under the same id when it is back. */
  async writeUntilGone(url: string, pauseMs = 0): Promise<void> {
    const client = this.#newClient(url)
    for (;;) {
      const answer = await this.#send(client, this.#next).catch(() => null)
      if (answer === null) return
      expect(answer.status, answer.text).toBe(200)
      const { results } = answer.body as unknown as { results: { id: string; status: string }[] }
      expect(['appended', 'duplicate']).toContain(results[0]?.status)
      this.acknowledged.push(this.#next.id)
      this.#next = toNext(this.#next.seq + 1)
      if (pauseMs > 0) await new Promise((resolve) => setTimeout(resolve, pauseMs))
    }
  }

  /** The log as the server has it: it must hold every acknowledged event once, in order, without a hole. */
  async expectWhole(url: string): Promise<void> {
    if (this.acknowledged.length === 0) return
    const { body } = await this.#newClient(url).get(`/api/walks/${this.walkId}`)
    const { events } = body as unknown as { events: { id: string; seq: number }[] }
    expect(events.map(({ seq }) => seq)).toEqual(events.map((_, index) => index + 1))
    expect(events.slice(0, this.acknowledged.length).map(({ id }) => id)).toEqual(this.acknowledged)
    // One more may have been stored whose answer was lost.
    expect(events.length - this.acknowledged.length).toBeLessThanOrEqual(1)
  }

  #newClient(url: string): Client {
    const client = new Client(url)
    for (const [name, value] of this.#session.cookies) client.cookies.set(name, value)
    return client
  }

  #send(client: Client, { id, seq, at }: Sent) {
    const envelope = { id, walkId: this.walkId, seq, at, deviceId: this.#deviceId, personId: this.#session.personId }
    if (seq > 1) return client.post(`/api/walks/${this.walkId}/events`, { events: [{ ...envelope, type: 'note-added', payload: { text: `Note ${seq}`, photoIds: [] } }] })
    const chartId = 'hard-to-start-printed'
    const payload = { kind: 'bench', chartId, startId: 's', pins: { [chartId]: 1 }, machine: { class: 'chain-saw', engine: 'two-stroke' }, limits: {} }
    return client.post('/api/walks', { id: this.walkId, event: { ...envelope, type: 'started', payload } })
  }
}
