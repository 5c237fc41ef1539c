import type { OutcomeId } from '#shared/lib/ids.ts'
import type { SpecLimit } from '#shared/units/limits.ts'
import type { Unit } from '#shared/units/quantities.ts'
import type { EventOf, WalkEventType } from '#shared/walk/events.ts'
import { bandedOutcomes, heldAgainst, judgeTries, takenOnce, type Judging } from '#shared/walk/judging.ts'
import type { BeforePage, CheckPage, NodeName, OutcomeChoice, ProofPage, ReadingPage, RunPage, WalkPage } from '#shared/walk/page.ts'

/** An event before it has an envelope. */
export type Draft = { [Type in WalkEventType]: { readonly type: Type; readonly payload: EventOf<Type>['payload'] } }[WalkEventType]

/**
 * What a story says that was found, by node: an outcome. Where it says nothing, all was as it should be, proofs confirm, and what a proof takes before
 * its change shows the trouble.
 */
export type Answers = Readonly<Record<string, string>>

type Finding = EventOf<'finding-recorded'>['payload']
type Measured = Pick<Finding, 'value' | 'values' | 'unit' | 'judgedBy' | 'limits'>

/** What a person at the bench does on a page; nothing where a walk ends, or waits for somebody. */
export function actOn(page: WalkPage, answers: Answers): readonly Draft[] {
  switch (page.kind) {
    case 'caution':
      return [{ type: 'caution-acknowledged', payload: { node: page.guards.place, cautionIds: [...page.cautionIds] } }]
    case 'step':
      return [{ type: 'step-done', payload: { node: page.node.place, seconds: 40 } }]
    case 'check':
    case 'reading':
    case 'proof':
      return answer(page, answers)
    case 'before':
      return answer(page.proof, answers, takeBefore(page, answers))
    case 'cause': {
      const { causeId } = page.cause
      if (causeId === null) return []
      const proof =
        page.proofEventId === null ? { sight: { note: 'Looked at it once more in good light: no doubt.', photoIds: [] } } : { proofEventId: page.proofEventId }
      return [{ type: 'cause-proven', payload: { causeId, ...proof } }]
    }
    case 'proven': {
      const parts = (page.fix?.items ?? []).slice(1).map(({ title, quantity }) => ({ title: title.slice(0, 200), quantity: quantity ?? 1 }))
      return [
        {
          type: 'repair-done',
          payload: { serviceDone: page.service.map(({ serviceItemId }) => serviceItemId), partsUsed: parts, minutes: page.fix?.minutes ?? 10 },
        },
      ]
    }
    case 'run':
      return runIt(page)
    case 'run-passed':
      return [{ type: 'closed', payload: { result: 'repaired' } }]
    default:
      return []
  }
}

function isAnsweredBy(node: NodeName, answers: Answers): string | undefined {
  const { place } = node
  return answers[place] ?? answers[place.slice(place.indexOf('/') + 1)]
}

function pick(page: { readonly node: NodeName; readonly outcomes: readonly OutcomeChoice[] }, answers: Answers): OutcomeChoice {
  const wanted = isAnsweredBy(page.node, answers)
  const found =
    page.outcomes.find(({ outcome }) => outcome === wanted) ?? page.outcomes.find(({ confirms, isNormal }) => confirms || isNormal) ?? page.outcomes[0]
  if (found === undefined) throw new Error(`${page.node.place} has no outcome.`)
  return found
}

function answer(page: CheckPage | ReadingPage | ProofPage, answers: Answers, before?: Finding['before']): readonly Draft[] {
  const choice = pick(page, answers)
  const judging = page.kind === 'check' ? null : page.judging
  const measured = measure(before === undefined ? judging : heldAgainst(judging, before), choice.outcome)
  const note = page.kind === 'proof' && page.needsNote && choice.confirms ? { note: 'The second look shows it plainly.' } : {}
  const finding: Finding = {
    node: page.node.place,
    outcome: choice.outcome,
    judgedBy: 'hand',
    ...measured,
    ...(before === undefined ? {} : { before }),
    ...note,
    photoIds: [],
    seconds: 30 + 60 * page.node.minutes,
  }
  return [
    ...page.lines.map((line): Draft => ({ type: 'step-done', payload: { node: line.place, seconds: 0 } })),
    { type: 'finding-recorded', payload: finding },
  ]
}

function takeBefore(page: BeforePage, answers: Answers): Finding['before'] {
  const trouble = page.outcomes.find(({ isNormal }) => !isNormal)
  const { outcome } = isAnsweredBy(page.node, answers) === undefined && trouble !== undefined ? trouble : pick(page, answers)
  const { value, unit } = measure(takenOnce(page.judging), outcome) ?? {}
  return { outcome, ...(value === undefined ? {} : { value }), ...(unit === undefined ? {} : { unit }) }
}

/** A value that the limits judge to be this outcome, or that stands beside it by hand, read as often as the page asks; none where no value leads to it. */
function measure(judging: Judging | null, outcome: OutcomeId): Measured | null {
  if (judging === null) return null
  const { reading, limits, repeat } = judging
  if (judging.proof === null && !bandedOutcomes(reading).has(outcome)) return null
  const unit = unitOf(limits) ?? reading.unit
  for (const value of likelyValues(limits, unit)) {
    const values = Array.from({ length: repeat?.equal ?? 1 }, () => value)
    const verdict = judgeTries(judging, values, unit)
    if (verdict.kind === 'was-so-before') return { value, unit, judgedBy: 'hand' }
    if (verdict.kind !== 'outcome' || verdict.outcome !== outcome) continue
    return { value, ...(values.length > 1 ? { values } : {}), unit, judgedBy: 'limits', ...(limits === null ? {} : { limits }) }
  }
  return null
}

function unitOf(limits: SpecLimit | null): Unit | undefined {
  if (limits === null) return undefined
  return 'as' in limits ? limits.as[0]?.unit : limits.unit
}

/** Values about some limits: within, below, above. */
function likelyValues(limits: SpecLimit | null, unit: Unit): readonly number[] {
  const range = limits === null ? undefined : 'as' in limits ? limits.as.find((printed) => printed.unit === unit) : limits
  const low = range?.min ?? (range?.max === undefined ? 10 : range.max * 0.5)
  const high = range?.max ?? low * 1.3
  return [(low + high) / 2, low * 0.83, high * 1.08].map((value) => (value > 1000 ? Math.round(value / 50) * 50 : Math.round(value * 100) / 100))
}

/** Every item of the run, ticked and in order. */
function runIt({ items }: RunPage): readonly Draft[] {
  const ticks = items.filter(({ isTicked }) => !isTicked).map(({ id }): Draft => ({ type: 'ticked', payload: { list: 'run', id, on: true } }))
  return [...ticks, { type: 'run-passed', payload: { items: items.map(({ id }) => ({ id, result: 'ok' })) } }]
}
