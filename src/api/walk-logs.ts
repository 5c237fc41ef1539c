import type { QueryClient } from '@tanstack/react-query'
import { useQueryClient } from '@tanstack/react-query'
import { useEffect, useMemo, useSyncExternalStore } from 'react'

import type { ChartVersion } from '#shared/api/charts.ts'
import type { SignedIn } from '#shared/api/session.ts'
import type { getWalk } from '#shared/api/walks.ts'
import { ok } from '#shared/lib/result.ts'
import type { PinnedCharts } from '#shared/walk/pinned-charts.ts'
import { toPinnedCharts } from '#shared/walk/pinned-charts.ts'
import { appendEvent, replay } from '#shared/walk/replay.ts'
import type { WalkState } from '#shared/walk/state.ts'
import type { z } from 'zod'
import { sessionQueries } from '#src/api/session.ts'
import { fetchWalk, postWalkEvents, walkQueries } from '#src/api/walks.ts'
import { ProblemError } from '#src/lib/api-client.ts'
import { getDeviceId } from '#src/lib/device.ts'
import type { WalkRules } from '#src/lib/walk-log.ts'
import { WalkLog } from '#src/lib/walk-log.ts'

export type WalkDetail = z.infer<typeof getWalk.response>

/** The rules of a walk over its charts, with the charts themselves for the pages. */
export type PlayerRules = WalkRules<WalkState> & { readonly charts: PinnedCharts; readonly versions: readonly ChartVersion[] }

export function toRules(versions: readonly ChartVersion[], person: SignedIn): PlayerRules {
  const charts = toPinnedCharts(versions)
  return {
    charts,
    versions,
    replay: (events) => replay(charts, events),
    append: (state, event) => {
      const next = appendEvent(charts, state, event, person)
      return next.ok ? ok(next.value) : { ok: false, error: { code: next.error.code, words: next.error.detail } }
    },
  }
}

export type OpenLog = WalkLog<WalkState, PlayerRules>

/** The logs that were opened since the page was loaded: one that still has something to send goes on sending after its screen was left. */
const logs = new Map<string, OpenLog>()

const countListeners = new Set<() => void>()

/** Leaving or closing the page asks first, but only while something would be lost. */
function warnOfLoss(event: BeforeUnloadEvent): void {
  if (countUnsent() > 0) event.preventDefault()
}

/** Nobody sends what somebody else has tapped: it waits for that person to sign in again. */
function requireSamePerson(client: QueryClient, person: SignedIn): void {
  if (client.getQueryData(sessionQueries.current().queryKey)?.person?.id !== person.id) {
    throw new ProblemError(401, 'signed-out', `${person.name} has to sign in again before this is sent.`)
  }
}

function openLog(client: QueryClient, detail: WalkDetail, person: SignedIn): OpenLog {
  const key = `${person.id} ${detail.walk.id}`
  const known = logs.get(key)
  if (known !== undefined) return known
  const walkId = detail.walk.id
  const log: OpenLog = new WalkLog({
    walkId,
    personId: person.id,
    deviceId: getDeviceId(),
    events: detail.events,
    rules: toRules(detail.charts, person),
    post: async (events) => {
      requireSamePerson(client, person)
      return postWalkEvents(walkId, events)
    },
    fetchLog: async () => {
      const { events, charts } = await fetchWalk(walkId)
      return { events, rules: toRules(charts, person) }
    },
  })
  logs.set(key, log)
  log.subscribe(() => countListeners.forEach((listener) => listener()))
  window.addEventListener('beforeunload', warnOfLoss)
  return log
}

/** How many taps of anybody on this device are not on the server yet. */
function countUnsent(): number {
  return [...logs.values()].reduce((sum, log) => sum + log.unsentCount, 0)
}

/** The log of a walk on this device and what it comes to, sending what is recorded for as long as the page is open. */
export function useWalkLog(detail: WalkDetail, person: SignedIn) {
  const client = useQueryClient()
  const log = useMemo(() => openLog(client, detail, person), [client, detail, person])
  useEffect(() => log.adopt(detail.events, () => toRules(detail.charts, person)), [log, detail, person])
  useEffect(() => {
    // After a sign-in, or when the network or the page comes back, what waits is sent at once.
    const retry = (): void => {
      if (log.unsentCount > 0 && document.visibilityState === 'visible') log.retry()
    }
    retry()
    window.addEventListener('online', retry)
    document.addEventListener('visibilitychange', retry)
    return () => {
      window.removeEventListener('online', retry)
      document.removeEventListener('visibilitychange', retry)
      void client.invalidateQueries({ queryKey: walkQueries.lists() })
      void client.invalidateQueries({ queryKey: walkQueries.detail(log.walkId).queryKey, refetchType: 'none' })
    }
  }, [log, client])
  return { log, snapshot: useSyncExternalStore(log.subscribe, log.getSnapshot) }
}

/** How many taps wait on this device, kept up to date; the bench says so too. */
export function useUnsentCount(): number {
  return useSyncExternalStore((listener) => {
    countListeners.add(listener)
    return () => countListeners.delete(listener)
  }, countUnsent)
}
