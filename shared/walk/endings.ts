import type { Cause } from '#shared/chart/document.ts'
import type { CauseId } from '#shared/lib/ids.ts'
import { chartsOf, chartsOnStack, type PinnedCharts } from './pinned-charts.ts'
import type { OpenWalk, ProvenCause, WalkRecord, WalkResult } from './state.ts'

/** A cause as the walk's charts define it: the chart where it stands first, then those that called it, then the others. */
export function causeOf(charts: PinnedCharts, walk: WalkRecord, causeId: CauseId): Cause | undefined {
  for (const index of [...chartsOnStack(charts, walk), ...chartsOf(charts, walk.pins)]) {
    const cause = index.causes.get(causeId)
    if (cause !== undefined) return cause
  }
  return undefined
}

/** Whether any chart of the walk calls a cause unsafe; then a machine that has it leaves only repaired, or tagged. */
export function isUnsafe(charts: PinnedCharts, walk: WalkRecord, causeId: CauseId | null): boolean {
  return causeId !== null && chartsOf(charts, walk.pins).some((index) => index.causes.get(causeId)?.unsafe)
}

/** Whether the walk knows the machine to be unsafe and not yet put right. */
export function isLeftUnsafe(charts: PinnedCharts, walk: OpenWalk): boolean {
  return (walk.phase === 'proven' || walk.phase === 'repaired') && isUnsafe(charts, walk, walk.cause.causeId)
}

/** The results with which a walk can be closed from where it stands; none where it can't be closed. */
export function possibleResults(charts: PinnedCharts, walk: OpenWalk): readonly WalkResult[] {
  switch (walk.phase) {
    case 'run-passed':
      return ['repaired']
    case 'escalated':
      return walk.reason === 'could-not-reproduce' ? ['not-reproduced', 'no-cause-found', 'referred'] : ['no-cause-found', 'not-reproduced', 'referred']
    case 'held':
      return ['held']
    case 'proven':
      return isLeftUnsafe(charts, walk) ? [] : ['not-repaired', 'referred']
    default:
      return []
  }
}

/** One item of the list of what puts a cause right. */
export interface FixItem {
  /** `remedy` for the act itself, then `part-1`, `part-2` …; stored in ticks and never renamed. */
  readonly id: string
  readonly title: string
  readonly quantity: number | null
}

/** What puts a proven cause right, as a list to tick off; empty for a cause that the charts know no remedy for. */
export function fixItems(charts: PinnedCharts, walk: WalkRecord, proven: ProvenCause): readonly FixItem[] {
  const remedy = proven.causeId === null ? undefined : causeOf(charts, walk, proven.causeId)?.remedy
  if (remedy === undefined) return []
  const parts = (remedy.parts ?? []).map(({ title, quantity }, index) => ({ id: `part-${index + 1}`, title, quantity }))
  return [{ id: 'remedy', title: remedy.text, quantity: null }, ...parts]
}

/** Why the lead is asked, in words: what happened, and what to do. */
const knownReasons: Readonly<Record<string, string>> = {
  'no-cause-found': 'The chart ends here without a cause. Ask the lead.',
  'could-not-reproduce': 'The symptom does not show. Ask the customer once more when it happens, or ask the lead.',
  'not-here-yet': 'The next chart is not there yet. Ask the lead how to go on.',
  ring: 'The chart goes round in a ring here. Ask the lead how to go on, and flag the chart.',
  'no-way-on': 'The chart does not say how to go on from here. Ask the lead, and flag the chart.',
}

/** The reason of an escalation in words; one that a chart or a person wrote stands as it is. */
export function reasonWords(reason: string): string {
  return Object.hasOwn(knownReasons, reason) ? (knownReasons[reason] ?? reason) : reason
}
