import { createContext, use } from 'react'

import type { ChartVersion } from '#shared/api/charts.ts'
import type { SignedIn } from '#shared/api/session.ts'
import type { EventId, PersonId } from '#shared/lib/ids.ts'
import type { NumberFormat } from '#shared/units/number-format.ts'
import type { WalkEvent } from '#shared/walk/events.ts'
import type { WalkPage } from '#shared/walk/page.ts'
import type { PinnedCharts } from '#shared/walk/pinned-charts.ts'
import type { StartedWalk } from '#shared/walk/state.ts'
import { isOpen } from '#shared/walk/state.ts'
import { getDeviceId } from '#src/lib/device.ts'
import type { EventDraft } from '#src/lib/walk-log.ts'

/** Pages beside the walk's own: each takes the place of the check until it is closed. */
export const panelNames = ['more', 'note', 'ask', 'trail', 'flag', 'hold', 'hand-over', 'machine', 'give-up', 'keys'] as const
export type PanelName = (typeof panelNames)[number]

/** What the pages of a walk see and may do. */
export type Player = {
  readonly walk: StartedWalk
  readonly charts: PinnedCharts
  /** The versions behind `charts`, as documents. */
  readonly versions: readonly ChartVersion[]
  readonly page: WalkPage
  /** The event that brought the walk to this page. */
  readonly arrivedBy: WalkEvent | null
  /** Changes when another page is shown, and with nothing else. */
  readonly pageKey: string
  readonly machineTitle: string
  readonly person: SignedIn
  readonly nameOf: (personId: PersonId) => string
  readonly format: NumberFormat
  /** Seconds since the page appeared. */
  readonly seconds: () => number
  /** Records, all or none, and says so; false when the guard refused: the page then says why. */
  readonly record: (drafts: readonly EventDraft[], said?: string) => boolean
  /** Lets the walk go by more charts: those that a picked symptom brings along. */
  readonly learn: (versions: readonly ChartVersion[]) => void
  readonly stepBack: (toEventId: EventId, said: string) => void
  /** Runs an act of a finger or key unless it comes too soon. */
  readonly tap: (act: () => void) => void
  /** "No answer" where the pad takes the place of the outcomes: its button stands in the foot of the page. */
  readonly noAnswer: { readonly isOpen: boolean; readonly toggle: () => void }
  readonly openPanel: (name: PanelName) => void
  readonly closePanel: () => void
}

export const PlayerContext = createContext<Player | null>(null)

export function usePlayer(): Player {
  const player = use(PlayerContext)
  if (player === null) throw new Error('This part stands outside the walk player.')
  return player
}

/** Whether the walk is open and in hand on this device: elsewhere it is read, and nothing is recorded by accident. */
export function useIsHere(): boolean {
  const { walk, person } = usePlayer()
  return isOpen(walk) && walk.holder.deviceId === getDeviceId() && walk.holder.personId === person.id
}
