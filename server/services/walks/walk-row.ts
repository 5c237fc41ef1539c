import { equipmentClassWords, engineKindWords } from '#shared/trade/equipment.ts'
import type { NodeKind } from '#shared/trade/node-kinds.ts'
import { assertNever } from '#shared/lib/assert-never.ts'
import type { CauseId } from '#shared/lib/ids.ts'
import { reasonWords } from '#shared/walk/endings.ts'
import type { Machine } from '#shared/walk/events.ts'
import { pageNodes } from '#shared/walk/page-nodes.ts'
import type { PinnedCharts } from '#shared/walk/pinned-charts.ts'
import { isOpen, type StartedWalk, type WalkResult } from '#shared/walk/state.ts'
import { causeWords, nameAt, nameOf, provenWords } from '#shared/walk/words.ts'
import type { walks } from '#server/db/schema/walks.ts'

/** What a walk's row says of where it stands: all of it derived from the log. */
export type Standing = Pick<
  typeof walks.$inferInsert,
  'phase' | 'isPaused' | 'isOpen' | 'standsAt' | 'minutesUsed' | 'causeId' | 'causeTitle' | 'hasQuestion' | 'holderPersonId' | 'holderDeviceId' | 'lastSeq'
>

/** Derives the row of a walk from what its log comes to. */
export function toStanding(charts: PinnedCharts, walk: StartedWalk): Standing {
  const cause = provenCause(charts, walk)
  return {
    phase: walk.phase,
    isPaused: walk.isPaused,
    isOpen: isOpen(walk),
    standsAt: standsAt(charts, walk),
    minutesUsed: walk.minutesUsed,
    causeId: cause?.causeId ?? null,
    causeTitle: cause?.title ?? null,
    hasQuestion: walk.questions.some(({ answer }) => answer === null),
    holderPersonId: walk.holder.personId,
    holderDeviceId: walk.holder.deviceId,
    lastSeq: walk.lastSeq,
  }
}

/** The proven cause, also of a walk that has ended. */
function provenCause(charts: PinnedCharts, walk: StartedWalk): { causeId: CauseId | null; title: string } | null {
  if (walk.phase === 'held') return walk.causeId === null ? null : { causeId: walk.causeId, title: causeWords(charts, walk, walk.causeId).title }
  const proven = 'cause' in walk ? walk.cause : 'last' in walk && 'cause' in walk.last ? walk.last.cause : null
  return proven === null ? null : { causeId: proven.causeId, title: provenWords(charts, walk, proven).title }
}

const kindWords: Readonly<Record<NodeKind, string>> = {
  start: 'start',
  step: 'step',
  check: 'check',
  reading: 'reading',
  proof: 'proof',
  cause: 'cause',
  jump: 'what does it do',
  escalate: 'ask the lead',
  hold: 'hold',
  back: 'back',
}

const resultWords: Readonly<Record<WalkResult, string>> = {
  repaired: 'repaired, run passed',
  'no-cause-found': 'no cause found',
  'not-reproduced': 'could not reproduce',
  held: 'held',
  'not-repaired': 'not repaired',
  referred: 'referred elsewhere',
}

/** Where a walk stands, in the words of a list. */
function standsAt(charts: PinnedCharts, walk: StartedWalk): string {
  switch (walk.phase) {
    case 'at-node':
      return nodeWords(charts, walk)
    case 'at-cause':
      return `to prove · ${causeWords(charts, walk, walk.causeId).title}`
    case 'proven':
      return 'proven · the fix'
    case 'repaired':
      return 'repaired · run it'
    case 'run-passed':
      return 'run passed'
    case 'escalated':
      return `ask the lead · ${reasonWords(walk.reason)}`
    case 'held':
      return `held · tag ${walk.tagNo}`
    case 'closed':
      return resultWords[walk.result]
    case 'abandoned':
      return 'given up'
    default:
      return assertNever(walk)
  }
}

function nodeWords(charts: PinnedCharts, walk: StartedWalk): string {
  const target = pageNodes(charts, walk)?.target
  const { kind, number, title } = target ? nameOf(charts, walk, target) : nameAt(charts, walk, walk.node)
  if (kind === 'escalate') return kindWords.escalate
  return `${[kindWords[kind], number].filter((word) => word !== '').join(' ')} · ${title}`
}

/** A machine whose spec sheet the shop does not keep, in the words of a list. */
export function machineWords({ class: equipmentClass, engine }: Machine): string {
  return `${equipmentClassWords[equipmentClass]}, ${engineKindWords[engine].toLowerCase()}`
}
