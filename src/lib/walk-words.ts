import { assertNever } from '#shared/lib/assert-never.ts'
import { engineKindWords, equipmentClassWords } from '#shared/trade/equipment.ts'
import { formatValue } from '#shared/units/format-value.ts'
import type { NumberFormat } from '#shared/units/number-format.ts'
import type { EventOf, WalkEvent } from '#shared/walk/events.ts'
import type { NodeName } from '#shared/walk/page.ts'
import type { PinnedCharts } from '#shared/walk/pinned-charts.ts'
import { locate } from '#shared/walk/pinned-charts.ts'
import type { Answer, TrailEntry, WalkRecord, WalkResult } from '#shared/walk/state.ts'
import { causeWords, nameAt, outcomeTitle } from '#shared/walk/words.ts'
import type { Place } from '#shared/lib/ids.ts'

export type SkipWhy = EventOf<'check-skipped'>['payload']['why']

/** What is said of a check that got no answer. */
export const skipWords: Readonly<Record<SkipWhy, string>> = {
  'not-sure': 'Not sure',
  cannot: 'Can’t do this',
  'not-reproduced': 'Could not reproduce',
}

/** How a walk ends. */
export const resultWords: Readonly<Record<WalkResult, string>> = {
  repaired: 'Repaired',
  'no-cause-found': 'No cause found',
  'not-reproduced': 'Could not reproduce',
  held: 'Held: not to be used',
  'not-repaired': 'Not repaired',
  referred: 'Referred to someone else',
}

/** What names and numbers are taken from when a walk is put into words. */
export type WalkWording = { readonly charts: PinnedCharts; readonly walk: WalkRecord; readonly format: NumberFormat }

/** An answer in words: "9 850 rpm · Low", "Dusty, light shows". */
export function toAnswerWords({ charts, walk, format }: WalkWording, place: Place, { outcome, value, unit }: Answer): string {
  const title = outcomeTitle(locate(charts, walk.pins, place)?.node, outcome)
  return value === null || unit === null ? title : `${formatValue(value, unit, format)} · ${title}`
}

/** A line of the trail in words: its node, and what was found there. */
export function toLineWords(wording: WalkWording, line: TrailEntry): { readonly node: NodeName; readonly found: string } {
  const { charts, walk } = wording
  const node = nameAt(charts, walk, line.position.node)
  switch (line.kind) {
    case 'step':
      return { node, found: 'Done' }
    case 'skip':
      return { node, found: skipWords[line.why] }
    case 'pick':
      return { node, found: nameAt(charts, walk, line.to).title }
    case 'finding':
      return { node, found: toAnswerWords(wording, line.position.node, line.answer) }
    default:
      return assertNever(line)
  }
}

function nodeWords({ charts, walk }: WalkWording, place: Place): string {
  const { number, title } = nameAt(charts, walk, place)
  return number === '' ? title : `${number} ${title}`
}

/** An event in words, for logs and for what was set aside beside them. */
export function toEventWords(wording: WalkWording, event: WalkEvent): string {
  const { charts, walk, format } = wording
  const titleOf = (place: Place): string => nodeWords(wording, place)
  const withNote = (words: string, note: string | undefined): string => (note === undefined || note.trim() === '' ? words : `${words}: ${note}`)
  switch (event.type) {
    case 'started':
      return `Started: ${titleOf(`${event.payload.chartId}/${event.payload.startId}` as Place)}`
    case 'machine-identified':
      return `Machine: ${equipmentClassWords[event.payload.machine.class]}, ${engineKindWords[event.payload.machine.engine].toLowerCase()}`
    case 'caution-acknowledged':
      return `Read the cautions before ${titleOf(event.payload.node)}`
    case 'step-done':
      return `${titleOf(event.payload.node)}: done`
    case 'finding-recorded': {
      const { node, outcome, value, unit, note } = event.payload
      return withNote(`${titleOf(node)}: ${toAnswerWords(wording, node, { outcome, value: value ?? null, unit: unit ?? null })}`, note)
    }
    case 'check-skipped':
      return withNote(`${titleOf(event.payload.node)}: ${skipWords[event.payload.why].toLowerCase()}`, event.payload.note)
    case 'noticed': {
      const { node, outcome, value, unit, note } = event.payload
      const found =
        outcome === undefined
          ? value === undefined || unit === undefined
            ? ''
            : formatValue(value, unit, format)
          : toAnswerWords(wording, node, { outcome, value: value ?? null, unit: unit ?? null })
      return withNote(`Noticed on the way: ${titleOf(node)}: ${found}`, note)
    }
    case 'access-changed':
      return [
        event.payload.opened.length > 0 ? `Off: ${event.payload.opened.join(', ')}` : null,
        event.payload.closed.length > 0 ? `Back on: ${event.payload.closed.join(', ')}` : null,
      ]
        .filter(Boolean)
        .join('; ')
    case 'stepped-back': {
      const line = walk.trail.find(({ eventId }) => eventId === event.payload.toEventId)
      return line === undefined ? 'Stepped back' : `Stepped back to ${titleOf(line.position.node)}`
    }
    case 'jumped':
      return `Picked: ${titleOf(`${event.payload.chartId}/${event.payload.startId}` as Place)}`
    case 'suspect-named':
      return `Named a suspect: ${causeWords(charts, walk, event.payload.causeId).title}`
    case 'cause-proven':
      return withNote(`Proven: ${causeWords(charts, walk, event.payload.causeId).title}`, event.payload.sight?.note)
    case 'cause-not-proven':
      return withNote(`Not proven: ${causeWords(charts, walk, event.payload.causeId).title}`, event.payload.sight?.note)
    case 'contributing-set': {
      const titles = event.payload.causeIds.map((id) => causeWords(charts, walk, id).title)
      return titles.length === 0 ? 'What led to it: nothing named' : `What led to it: ${titles.join(', ')}`
    }
    case 'service-changed':
      return [
        event.payload.added.length > 0 ? `Service added: ${event.payload.added.join(', ')}` : null,
        event.payload.dropped.length > 0 ? `Service left out: ${event.payload.dropped.join(', ')}` : null,
      ]
        .filter(Boolean)
        .join('; ')
    case 'asked':
      return `Asked the lead: ${event.payload.text}`
    case 'answered':
      return withNote('Answered', event.payload.goTo === undefined ? event.payload.text : `${event.payload.text} (go on at ${titleOf(event.payload.goTo)})`)
    case 'escalated':
      return 'Asked the lead and waited'
    case 'held':
      return `Held, tag ${event.payload.tagNo}: ${event.payload.why}`
    case 'paused':
      return withNote('Paused', event.payload.why)
    case 'resumed':
      return withNote('Went on', event.payload.why)
    case 'handed-over':
      return withNote('Handed over', event.payload.why)
    case 'taken-over':
      return withNote('Taken over', event.payload.why)
    case 'repair-done':
      return 'Fix done'
    case 'ticked':
      return event.payload.on ? 'Ticked off' : 'Tick taken back'
    case 'run-passed':
      return 'Hand-back run passed'
    case 'run-failed':
      return withNote('Hand-back run failed', event.payload.note)
    case 'note-added':
      return `Note: ${event.payload.text}`
    case 'flagged':
      return `Flagged ${titleOf(event.payload.node)}: ${event.payload.text}`
    case 'check-noted':
      return `${event.payload.title}: ${event.payload.found}`
    case 'cause-noted':
      return withNote(
        `Cause noted: ${event.payload.title ?? (event.payload.causeId === undefined ? '' : causeWords(charts, walk, event.payload.causeId).title)}`,
        event.payload.note,
      )
    case 'closed':
      return withNote(`Closed: ${resultWords[event.payload.result].toLowerCase()}`, event.payload.why)
    case 'abandoned':
      return `Given up: ${event.payload.why}`
    default:
      return assertNever(event)
  }
}
