import { randomUUID } from 'node:crypto'
import type { ChartDocument } from '#shared/chart/document.ts'
import type { WalkId } from '#shared/lib/ids.ts'
import type { WalkEvent } from '#shared/walk/events.ts'
import { Bench, closedAs, people, proven, repaired, revs, runPassed, started, tap, walkId, type Act } from '#tests/support/walk-builder.ts'
import { sawChart } from '#tests/support/walk-charts.ts'
import type { Client, TestPerson, TestShop } from './test-shop.ts'

/** Publishes charts as a lead does. */
export async function publish(lead: Client, ...documents: readonly ChartDocument[]): Promise<void> {
  for (const document of documents) {
    const draft = await lead.post('/api/charts', { document })
    const version = await lead.post(`/api/charts/${document.id}/publish`, {
      revision: draft.body['revision'],
      changeNote: 'First version',
      acceptsWarnings: true,
    })
    if (version.status !== 201) throw new Error(`${document.id} was not published: ${version.text}`)
  }
}

/** The route of the saw chart from its start to the closed walk: the filter is packed, and proven to be the cause. */
export const wholeRoute: readonly Act[] = [started(), tap('yes'), revs(9000), tap('dark'), revs(12_000), proven, repaired, runPassed, closedAs('repaired')]

let walkCount = 0

/** The log that some acts make, as the device of a person would send it: a walk of its own, ids of its own. */
export function logOf(
  person: TestPerson,
  acts: readonly Act[] = wholeRoute,
  ...documents: readonly ChartDocument[]
): { walkId: WalkId; events: WalkEvent[]; bench: Bench } {
  const bench = new Bench([sawChart, ...documents])
  bench.do(acts, true)
  if (bench.refusal) throw new Error(`The log of this test is refused: ${JSON.stringify(bench.refusal)}`)
  walkCount += 1
  const own = `${walkCount.toString(16).padStart(4, '0')}-8000`
  // Every id of the builder begins alike; those of this log get its number in their place.
  const text = JSON.stringify(bench.log)
    .replaceAll('7000-8000', `7${own.slice(1)}`)
    .replaceAll(people.junior.id.replace('7000-8000', `7${own.slice(1)}`), person.id)
  const events = JSON.parse(text) as WalkEvent[]
  return { walkId: walkId.replace('7000-8000', `7${own.slice(1)}`) as WalkId, events, bench }
}

/** Sends events of one walk. */
export async function send(client: Client, id: WalkId, events: readonly WalkEvent[]) {
  const answer = await client.post(`/api/walks/${id}/events`, { events })
  return {
    ...answer,
    results: (answer.body['results'] ?? []) as { id: string; status: string; code?: string }[],
    lastSeq: answer.body['lastSeq'] as unknown as number,
  }
}

/** What became of each event, in order. */
export const statuses = ({ results }: { results: readonly { status: string }[] }): string[] => results.map(({ status }) => status)

/** A shop with the saw chart published, and its three people signed in. */
export async function openBench(shop: TestShop, ...documents: readonly ChartDocument[]) {
  const [junior, lead, owner] = [await shop.as('junior'), await shop.as('lead'), await shop.as('owner')]
  await publish(lead, sawChart, ...documents)
  return { junior, lead, owner }
}

/** An event that goes on from another one: the next number, the same device, an id of its own, unless the test says otherwise. */
export function after(
  previous: WalkEvent | undefined,
  draft: Pick<WalkEvent, 'type' | 'payload'>,
  more: Partial<Pick<WalkEvent, 'id' | 'seq' | 'deviceId' | 'personId' | 'walkId'>> = {},
): WalkEvent {
  if (previous === undefined) throw new Error('There is no event to go on from.')
  const { walkId: sameWalk, deviceId, personId, at, seq } = previous
  // Type and payload come from one draft; the spread hides that from the compiler.
  return { id: randomUUID(), walkId: sameWalk, seq: seq + 1, at, deviceId, personId, ...draft, ...more } as WalkEvent
}

/** A note: any open walk takes it. */
export const note = (text = 'Bar nut was loose.'): Pick<WalkEvent, 'type' | 'payload'> => ({ type: 'note-added', payload: { text, photoIds: [] } })
