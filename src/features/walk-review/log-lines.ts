import { assertNever } from '#shared/lib/assert-never.ts'
import { formatNumber, formatValue, unitWords } from '#shared/units/format-value.ts'
import type { NumberFormat } from '#shared/units/number-format.ts'
import type { WalkEventType } from '#shared/walk/events.ts'
import type { ReviewLine } from '#shared/walk/review.ts'
import type { KnotKind, KnotLook } from '#src/components/knots/knot.tsx'
import type { MarkState } from '#src/components/ui/state-mark.tsx'
import { resultWords, skipWords } from '#src/lib/walk-words.ts'

/** Lines that are kept out of the short log: read by who wants every tap. */
const minorTypes: ReadonlySet<WalkEventType> = new Set<WalkEventType>([
  'caution-acknowledged',
  'ticked',
  'paused',
  'resumed',
  'access-changed',
  'service-changed',
])

export function isMinor({ type }: ReviewLine): boolean {
  return minorTypes.has(type)
}

/** What was found, in the words of the log: the value with its unit, a proof's before and after, the outcome with its balloon. */
export function toFound({ reading, outcome, noAnswer, type, cause, result }: ReviewLine, format: NumberFormat): string | null {
  if (result !== null) return resultWords[result]
  if (noAnswer !== null) return `0 · ${skipWords[noAnswer]}`
  const value = reading?.values.at(-1)
  if (reading !== null && value !== undefined) {
    const after = formatValue(value, reading.unit, format)
    return reading.before === null ? after : `${formatNumber(reading.before, format)} to ${after}`
  }
  if (outcome !== null) return outcome.balloon === null ? outcome.title : `${outcome.balloon} · ${outcome.title}`
  if (cause !== null && (type === 'cause-proven' || type === 'cause-not-proven')) return cause.title
  return null
}

/** Earlier tries of a reading that repeats; `null` where it was taken once. */
export function toTries({ reading }: ReviewLine, format: NumberFormat): string | null {
  if (reading === null || reading.values.length < 2) return null
  const words = unitWords[reading.unit]
  return `tries: ${reading.values.map((value) => formatNumber(value, format)).join(', ')}${words === '' ? '' : ` ${words}`}`
}

/** The state of a line: shape and word. A reading says its outcome, since a value alone does not. */
export function toMark({ judgement, outcome, reading, noAnswer }: ReviewLine): { readonly state: MarkState; readonly words: string } | null {
  switch (judgement) {
    case null:
      return reading !== null && outcome !== null ? { state: 'open', words: outcome.title } : null
    case 'good':
      return { state: 'good', words: reading === null ? 'good' : 'in limits' }
    case 'serviceable':
      return { state: 'care', words: 'serviceable' }
    case 'off':
      return { state: 'bad', words: reading !== null && outcome !== null ? outcome.title.toLowerCase() : 'points here' }
    case 'reproduced':
      return { state: 'info', words: 'reproduced' }
    case 'proven':
      return { state: 'good', words: 'proven' }
    case 'not-proven':
      return { state: 'open', words: 'not proven' }
    case 'no-answer':
      return { state: 'open', words: noAnswer === null ? 'no answer' : skipWords[noAnswer].toLowerCase() }
    default:
      return assertNever(judgement)
  }
}

/** Why a line no longer counts. */
export const spentWords: Readonly<Record<NonNullable<ReviewLine['spent']>, string>> = {
  'stepped-back': 'stepped back, no longer counts',
  'run-failed': 'the run failed, no longer counts',
  'cause-not-proven': 'cause not proven, no longer counts',
}

/** Acts that are told in a line of their own, without a check that they answer. */
const actWords: Readonly<Partial<Record<WalkEventType, string>>> = {
  'machine-identified': 'Machine identified',
  'caution-acknowledged': 'Cautions read',
  'access-changed': 'What’s off changed',
  jumped: 'Symptom picked',
  'suspect-named': 'Suspect named',
  'cause-proven': 'Proven',
  'cause-not-proven': 'Not proven, ruled out',
  'contributing-set': 'What led to it',
  'service-changed': 'Service list changed',
  asked: 'Asked the lead',
  answered: 'The lead answers',
  escalated: 'Waits for the lead',
  held: 'Held: not safe to hand back',
  paused: 'Paused',
  resumed: 'Went on',
  'handed-over': 'Handed over',
  'taken-over': 'Taken over',
  'repair-done': 'Fix done',
  ticked: 'Ticked off',
  'run-passed': 'Hand-back run passed',
  'run-failed': 'Hand-back run failed',
  'note-added': 'Note',
  flagged: 'Flagged for the chart desk',
  closed: 'Closed',
  abandoned: 'Given up',
}

/** The first line of an entry: the question that was answered, or the act. */
export function toTitle({ type, node }: ReviewLine): string {
  if (type === 'started') return `Started: ${node.title}`
  if (type === 'stepped-back') return `Stepped back to: ${node.title}`
  if (type === 'noticed') return `Noticed on the way: ${node.title}`
  return actWords[type] ?? node.title
}

/** Whether the number of the node belongs beside the line: it is about that check. */
export function isAboutNode({ type }: ReviewLine): boolean {
  return type === 'finding-recorded' || type === 'check-skipped' || type === 'noticed' || type === 'step-done' || type === 'flagged' || type === 'stepped-back'
}

/** The knot that a line ties. */
export function toKnot({ type, node, spent }: ReviewLine): { readonly kind: KnotKind; readonly look: KnotLook } | null {
  if (spent !== null) return { kind: 'spent', look: 'faint' }
  switch (type) {
    case 'started':
      return { kind: 'start', look: 'outline' }
    case 'finding-recorded':
    case 'check-skipped':
    case 'step-done':
    case 'noticed':
      return { kind: node.kind, look: 'outline' }
    case 'cause-proven':
    case 'cause-noted':
      return { kind: 'cause', look: 'current' }
    case 'asked':
    case 'answered':
    case 'escalated':
      return { kind: 'escalate', look: 'outline' }
    case 'held':
      return { kind: 'hold', look: 'outline' }
    case 'stepped-back':
      return { kind: 'back', look: 'outline' }
    case 'jumped':
      return { kind: 'jump', look: 'outline' }
    default:
      return null
  }
}

const head = ['no', 'time', 'person', 'check', 'title', 'kind', 'found', 'values', 'unit', 'before', 'judged', 'note', 'minutes', 'seconds', 'spent']

/** The whole log as rows of a CSV, nothing left out. */
export function toLogCsv(
  lines: readonly ReviewLine[],
  nameOf: (personId: ReviewLine['personId']) => string,
): { readonly head: readonly string[]; readonly rows: readonly (readonly (string | number | null)[])[] } {
  return {
    head,
    rows: lines.map((line) => [
      line.seq,
      line.at,
      nameOf(line.personId),
      line.node.number,
      line.node.title,
      line.type,
      line.noAnswer === null ? (line.outcome?.title ?? line.cause?.title ?? null) : skipWords[line.noAnswer],
      line.reading === null ? null : line.reading.values.join(' '),
      line.reading?.unit ?? null,
      line.reading?.before ?? null,
      line.judgement,
      line.text,
      line.minutes,
      line.seconds,
      line.spent,
    ]),
  }
}
