import { queryOptions } from '@tanstack/react-query'

import type { BatchResult } from '#shared/api/walks.ts'
import { getWalk, listSideEvents, listWalks, postEvents, startWalk } from '#shared/api/walks.ts'
import type { SignedIn } from '#shared/api/session.ts'
import type { EventId, WalkId } from '#shared/lib/ids.ts'
import type { EventOf, WalkEvent } from '#shared/walk/events.ts'
import type { RefusalCode } from '#shared/walk/refusals.ts'
import { refusalWords } from '#shared/walk/refusals.ts'
import { ProblemError, request } from '#src/lib/api-client.ts'
import { getDeviceId, newId } from '#src/lib/device.ts'
import { paths } from '#src/lib/paths.ts'

type WalkListQuery = { readonly scope?: 'mine' | 'shop'; readonly state?: 'open' | 'ended' | 'all'; readonly page?: number }

export const walkQueries = {
  lists: () => ['walks', 'list'] as const,
  details: () => ['walks', 'detail'] as const,
  list: (query: WalkListQuery = {}) =>
    queryOptions({
      queryKey: [...walkQueries.lists(), query],
      queryFn: ({ signal }) => request(paths.api.walks(query), listWalks.response, { signal }),
    }),
  /** The log with everything that replay needs. While a player is open its own log is ahead of this; see walk-logs.ts. */
  detail: (walkId: WalkId) =>
    queryOptions({
      queryKey: [...walkQueries.details(), walkId],
      queryFn: ({ signal }) => fetchWalk(walkId, signal),
    }),
  sideEvents: (walkId: WalkId) =>
    queryOptions({
      queryKey: [...walkQueries.details(), walkId, 'side-events'],
      queryFn: ({ signal }) => request(paths.api.walkSideEvents(walkId), listSideEvents.response, { signal }),
    }),
}

export function fetchWalk(walkId: WalkId, signal?: AbortSignal) {
  return request(paths.api.walk(walkId), getWalk.response, signal === undefined ? {} : { signal })
}

/** A batch, in order; idempotent by event id, so that sending it again is safe. */
export function postWalkEvents(walkId: WalkId, events: readonly WalkEvent[]): Promise<BatchResult> {
  return request(paths.api.walkEvents(walkId), postEvents.response, { method: 'POST', body: { events } })
}

export function postWalk(event: EventOf<'started'>): Promise<BatchResult> {
  return request(paths.api.walks(), startWalk.response, { method: 'POST', body: { id: event.walkId, event } })
}

/** How often a lead's answer tries again for the place at the end of the log, while the bench goes on writing. */
const answerTries = 3

/** The lead's answer, appended to a walk that somebody else has in hand. */
export async function answerQuestion(walkId: WalkId, person: SignedIn, payload: EventOf<'answered'>['payload']): Promise<void> {
  for (let tries = 1; ; tries += 1) {
    const { lastSeq } = await fetchWalk(walkId)
    // Made by newId, a UUID.
    const id = newId() as EventId
    const event: WalkEvent = {
      id,
      walkId,
      seq: lastSeq + 1,
      at: new Date().toISOString(),
      deviceId: getDeviceId(),
      personId: person.id,
      type: 'answered',
      payload,
    }
    const [result] = (await postWalkEvents(walkId, [event])).results
    if (result?.status === 'appended' || result?.status === 'duplicate') return
    if (result?.code !== 'wrong-seq' || tries === answerTries) {
      const code = result?.code ?? 'refused'
      throw new ProblemError(
        409,
        code,
        Object.hasOwn(refusalWords, code) ? refusalWords[code as RefusalCode] : 'The walk has moved on. Load it again and answer once more.',
      )
    }
  }
}
