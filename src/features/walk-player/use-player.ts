import { useQuery } from '@tanstack/react-query'
import { useCallback, useEffect, useMemo, useRef, useState } from 'react'
import { useLocation, useNavigate, useSearchParams } from 'react-router-dom'

import type { EventId } from '#shared/lib/ids.ts'
import type { SignedIn } from '#shared/api/session.ts'
import type { NumberFormat } from '#shared/units/number-format.ts'
import type { WalkPage } from '#shared/walk/page.ts'
import { toPage } from '#shared/walk/select.ts'
import type { StartedWalk } from '#shared/walk/state.ts'
import { peopleQueries } from '#src/api/people.ts'
import type { OpenLog, WalkDetail } from '#src/api/walk-logs.ts'
import { toRules, useWalkLog } from '#src/api/walk-logs.ts'
import type { PanelName, Player } from '#src/features/walk-player/player-context.ts'
import { panelNames } from '#src/features/walk-player/player-context.ts'
import { forgetScratch } from '#src/features/walk-player/scratch.ts'
import { useTapGuard } from '#src/features/walk-player/tap-guard.ts'
import { announce } from '#src/lib/announce.ts'
import type { EventDraft, RecordRefusal } from '#src/lib/walk-log.ts'

type PlayerInput = { readonly detail: WalkDetail; readonly person: SignedIn; readonly format: NumberFormat }

export type PlayerState = {
  readonly log: OpenLog
  readonly snapshot: ReturnType<OpenLog['getSnapshot']>
  readonly panel: PanelName | null
  /** What the guard refused on this page; `null` when nothing. */
  readonly refusal: RecordRefusal | null
  readonly player: Player | null
}

/** Names the page: another name, another page, whose h1 takes the focus. What is ticked or noted on it does not change it. */
function toPageKey(page: WalkPage, walk: StartedWalk): string {
  if (page.kind === 'caution') return `caution ${page.guards.place} ${page.cautionIds.join(' ')}`
  const place = 'node' in page ? page.node.place : ''
  return `${page.kind} ${place} ${walk.arrival.seq} ${walk.phase}`
}

/** What stands beside the walk's own page, kept in the address so that the browser's own way back closes it. */
function usePanel(): { panel: PanelName | null; openPanel: (name: PanelName) => void; closePanel: () => void } {
  const [params, setParams] = useSearchParams()
  const location = useLocation()
  const navigate = useNavigate()
  const shown = params.get('show')
  const panel = panelNames.find((name) => name === shown) ?? null
  const cameFromPage = typeof location.state === 'object' && location.state !== null && 'panel' in location.state
  const openPanel = useCallback((name: PanelName) => setParams({ show: name }, { state: { panel: true }, replace: panel !== null }), [setParams, panel])
  const closePanel = useCallback(() => {
    if (cameFromPage) void navigate(-1)
    else setParams({}, { replace: true })
  }, [cameFromPage, navigate, setParams])
  return { panel, openPanel, closePanel }
}

/** Seconds since the page with this key appeared. */
function usePageSeconds(pageKey: string): () => number {
  const shownAt = useRef(0)
  useEffect(() => {
    shownAt.current = performance.now()
  }, [pageKey])
  return useCallback(() => Math.round((performance.now() - shownAt.current) / 100) / 10, [])
}

/** The walk as the pages see it, and what they may do to it. */
export function usePlayerState({ detail, person, format }: PlayerInput): PlayerState {
  const { log, snapshot } = useWalkLog(detail, person)
  const { state, rules } = snapshot
  const page = useMemo(() => toPage(rules.charts, state), [rules, state])
  const pageKey = state.phase === 'new' ? '' : toPageKey(page, state)
  const [refused, setRefused] = useState<{ readonly pageKey: string; readonly refusal: RecordRefusal } | null>(null)
  const [noAnswerKey, setNoAnswerKey] = useState<string | null>(null)
  const tap = useTapGuard(pageKey)
  const seconds = usePageSeconds(pageKey)
  const { panel, openPanel, closePanel } = usePanel()
  // Read where the walk is handed over: the log names people who were not in it when it was loaded.
  const colleagues = useQuery({ ...peopleQueries.active(), enabled: false })

  const record = (drafts: readonly EventDraft[], said?: string): boolean => {
    const made = log.record(drafts)
    if (!made.ok) {
      setRefused({ pageKey, refusal: made.error })
      return false
    }
    setRefused(null)
    settleCause(log, made.value.at(-1)?.id)
    if (said !== undefined) announce(said)
    return true
  }

  const isOver = state.phase === 'closed' || state.phase === 'abandoned'
  const { walkId } = log
  useEffect(() => {
    if (isOver) forgetScratch(walkId)
  }, [isOver, walkId])

  const player: Player | null =
    state.phase === 'new'
      ? null
      : {
          walk: state,
          charts: rules.charts,
          versions: rules.versions,
          page,
          arrivedBy: snapshot.events[state.arrival.seq - 1] ?? null,
          pageKey,
          machineTitle: detail.walk.machineTitle,
          person,
          nameOf: (personId) => (personId === person.id ? person.name : (detail.people[personId] ?? colleagues.data?.people.find(({ id }) => id === personId)?.name ?? 'somebody else')),
          format,
          seconds,
          record,
          learn: (versions) => log.learn(toRules([...rules.versions, ...versions], person)),
          stepBack: (toEventId: EventId, said: string) => void record([{ type: 'stepped-back', payload: { toEventId } }], said),
          tap,
          noAnswer: { isOpen: noAnswerKey === pageKey, toggle: () => setNoAnswerKey((key) => (key === pageKey ? null : pageKey)) },
          openPanel,
          closePanel,
        }

  return { log, snapshot, panel, refusal: refused?.pageKey === pageKey ? refused.refusal : null, player }
}

/** A confirmed proof names its cause: asking once more whether it is that would be asking twice. */
function settleCause(log: OpenLog, recorded: EventId | undefined): void {
  const { state, rules } = log.getSnapshot()
  if (state.phase !== 'at-cause' || recorded === undefined) return
  const page = toPage(rules.charts, state)
  if (page.kind === 'cause' && page.proofEventId === recorded)
    log.record([{ type: 'cause-proven', payload: { causeId: state.causeId, proofEventId: recorded } }])
}
