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
import { fetchWalk, postWalkEvents, walkQueries } from '#src/api/walks.ts'
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

function openLog(detail: WalkDetail, person: SignedIn): OpenLog {
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
    post: (events) => postWalkEvents(walkId, events),
    fetchLog: async () => {
      const { events, charts } = await fetchWalk(walkId)
      return { events, rules: toRules(charts, person) }
    },
  })
  logs.set(key, log)
  return log
}

/** How many taps of anybody on this device are not on the server yet. */
export function countUnsent(): number {
  return [...logs.values()].reduce((sum, log) => sum + log.unsentCount, 0)
}

/** The log of a walk on this device and what it comes to, sending what is recorded for as long as the page is open. */
export function useWalkLog(detail: WalkDetail, person: SignedIn) {
  const log = useMemo(() => openLog(detail, person), [detail, person])
  const client = useQueryClient()
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

/** Leaving or closing the page asks first, but only while something would be lost. */
export function useUnsentWarning(): void {
  useEffect(() => {
    const warn = (event: BeforeUnloadEvent): void => {
      if (countUnsent() > 0) event.preventDefault()
    }
    window.addEventListener('beforeunload', warn)
    return () => window.removeEventListener('beforeunload', warn)
  }, [])
}
