import { isUnitOf } from '#shared/chart/judge.ts'
import type { Place } from '#shared/lib/ids.ts'
import type { SpecLimit } from '#shared/units/limits.ts'
import type { Unit } from '#shared/units/quantities.ts'
import { actOfLooking, actOfNodes, pendingOf } from './cautions.ts'
import type { EventOf } from './events.ts'
import { comparedWith, findingOf, foundBefore, locateDecision, offeredAgainst, offeredAnswer, type LocatedDecision } from './findings.ts'
import { bandedOutcomes, heldAgainst, judgeTries, judgingOf, takenOnce, type Judging } from './judging.ts'
import { pageNodes } from './page-nodes.ts'
import { chartsOnStack, locate, type PinnedCharts } from './pinned-charts.ts'
import { refuse, type Refusal } from './refusals.ts'
import { isFor } from './route.ts'
import type { Metal, OpenWalk, WalkRecord } from './state.ts'

/** An answer that is to be judged; `judgedBy` is `null` where the event does not say. */
interface Given {
  readonly outcome: string
  readonly values: readonly number[]
  readonly unit: Unit | undefined
  readonly judgedBy: 'limits' | 'hand' | null
}

/** What an event says about one answer, with its values in a list. */
function givenBy(
  payload: { outcome: string; value?: number | undefined; unit?: Unit | undefined },
  judgedBy: Given['judgedBy'] = null,
  values?: readonly number[],
): Given {
  return { outcome: payload.outcome, values: values ?? (payload.value === undefined ? [] : [payload.value]), unit: payload.unit, judgedBy }
}

/**
 * What speaks against an answer to a check, reading or proof: an outcome that it lacks, a value that is missing, not asked for, of a wrong unit or not
 * settled, an outcome other than the one whose band holds the value.
 */
function faultOfAnswer(check: LocatedDecision, judging: Judging | null, given: Given, at: string): Refusal | null {
  const { node } = check
  if (!node.outcomes.some(({ id }) => id === given.outcome)) return refuse('no-such-outcome', `${at}/outcome`)
  if (node.kind === 'check') return faultOfLook(given, at)
  const quantity = judging?.reading.quantity
  if (given.unit !== undefined && quantity !== undefined && !isUnitOf(quantity, given.unit)) return refuse('wrong-unit', `${at}/unit`)
  if (given.values.length > 0 && given.unit === undefined) return refuse('unit-missing', `${at}/unit`)
  return isMeasured(check, judging, given) ? faultOfValue(check, judging, given, at) : faultOfHand(given, at)
}

/** A check is answered by eye and ear: no value, nothing that limits could judge. */
function faultOfLook(given: Given, at: string): Refusal | null {
  if (given.values.length > 0 || given.unit !== undefined) return refuse('value-not-asked', `${at}/value`)
  return faultOfHand(given, at)
}

function faultOfHand(given: Given, at: string): Refusal | null {
  return given.judgedBy === 'limits' ? refuse('nothing-to-judge', `${at}/judgedBy`) : null
}

/** Whether an outcome rests on a value: on a reading where a band leads to it, on a proof where limits judge it. */
function isMeasured({ node }: LocatedDecision, judging: Judging | null, given: Given): boolean {
  if (node.kind === 'reading') return [...bandedOutcomes(node)].some((outcome) => outcome === given.outcome)
  const confirms = node.outcomes.some(({ id, confirms }) => id === given.outcome && confirms)
  return judging?.proof != null && (confirms || given.values.length > 0)
}

function faultOfValue({ node }: LocatedDecision, judging: Judging | null, given: Given, at: string): Refusal | null {
  if (judging === null || given.unit === undefined) return refuse('value-missing', `${at}/value`)
  const verdict = judgeTries(judging, given.values, given.unit)
  switch (verdict.kind) {
    case 'no-value':
      return refuse('value-missing', `${at}/value`)
    case 'more':
    case 'unsettled':
      return refuse('not-equal-yet', `${at}/values`)
    case 'by-hand':
      return given.judgedBy === 'limits' ? refuse('limits-unknown', `${at}/judgedBy`) : null
    case 'was-so-before':
      return given.judgedBy === 'limits' ? refuse('was-so-before', `${at}/judgedBy`) : null
    case 'not-confirmed':
      return node.outcomes.some(({ id, confirms }) => id === given.outcome && confirms) ? refuse('not-the-band', `${at}/outcome`) : null
    case 'outcome':
      return verdict.outcome === given.outcome ? null : refuse('not-the-band', `${at}/outcome`)
  }
}

/** The figures of limits, one for each unit in which they are given. */
function figuresOf(limits: SpecLimit): readonly { min?: number | undefined; max?: number | undefined; unit: Unit }[] {
  return 'as' in limits ? limits.as : [limits]
}

function sameLimits(left: SpecLimit, right: SpecLimit | null): boolean {
  const others = right === null ? [] : figuresOf(right)
  const figures = figuresOf(left)
  return (
    figures.length === others.length &&
    figures.every(({ min, max, unit }, index) => {
      const other = others[index]
      return other !== undefined && other.min === min && other.max === max && other.unit === unit
    })
  )
}

function faultOfValues({ values, value }: EventOf<'finding-recorded'>['payload'], judging: Judging | null): Refusal | null {
  if (values === undefined) return null
  if (value === undefined) return refuse('value-missing', '/payload/value')
  if (values.at(-1) !== value) return refuse('value-not-last', '/payload/value')
  return values.length > (judging?.repeat?.atMost ?? 1) ? refuse('too-many-values', '/payload/values') : null
}

/** What a proof compares with must be on the trail, or come with its finding; what comes is judged like a finding of its own. */
function faultOfBefore(charts: PinnedCharts, walk: WalkRecord, check: LocatedDecision, { before }: EventOf<'finding-recorded'>['payload']): Refusal | null {
  const compared = comparedWith(check)
  if (before === undefined) return compared && findingOf(charts, walk, compared) === null ? refuse('before-missing', '/payload/before') : null
  if (compared === null) return refuse('before-not-asked', '/payload/before')
  return faultOfAnswer(compared, takenOnce(judgingOf(walk, compared)), givenBy(before), '/payload/before')
}

/** An answer that is recorded again must be the one on offer, unchanged. */
function faultOfReuse(charts: PinnedCharts, walk: WalkRecord, check: LocatedDecision, payload: EventOf<'finding-recorded'>['payload']): Refusal | null {
  const source = offeredAnswer(charts, walk, check)?.source
  const isOffered =
    source?.eventId === payload.reuses &&
    source?.answer.outcome === payload.outcome &&
    source.answer.value === (payload.value ?? null) &&
    source.answer.unit === (payload.unit ?? null)
  return isOffered ? null : refuse('not-offered', '/payload/reuses')
}

/** What speaks against a finding at the node where the walk stands. */
export function faultOfFinding(charts: PinnedCharts, walk: OpenWalk, { payload }: EventOf<'finding-recorded'>): Refusal | null {
  if (payload.node !== walk.node) return refuse('wrong-node', '/payload/node')
  const check = locateDecision(charts, walk, walk.node)
  if (check === null) return refuse('not-a-check', '/payload/node')
  const isAgain = payload.reuses !== undefined
  const judging = isAgain
    ? heldAgainst(takenOnce(judgingOf(walk, check)), offeredAgainst(offeredAnswer(charts, walk, check)))
    : heldAgainst(judgingOf(walk, check), payload.before ?? foundBefore(charts, walk, check))
  return (
    // What a proof is held against tells how its own answer is judged, so that is looked at first.
    (isAgain ? null : faultOfBefore(charts, walk, check, payload)) ??
    faultOfAnswer(check, judging, givenBy(payload, payload.judgedBy, payload.values), '/payload') ??
    faultOfValues(payload, judging) ??
    (payload.limits && !sameLimits(payload.limits, judging?.limits ?? null) ? refuse('other-limits', '/payload/limits') : null) ??
    (isAgain ? faultOfReuse(charts, walk, check, payload) : faultOfSight(check, payload)) ??
    faultOfCautions(walk, check, payload)
  )
}

/** A proof by sight is confirmed by a second look with a note. */
function faultOfSight({ node }: LocatedDecision, { outcome, note }: EventOf<'finding-recorded'>['payload']): Refusal | null {
  if (node.kind !== 'proof' || node.by !== 'sight' || note?.trim()) return null
  return node.outcomes.some(({ id, confirms }) => id === outcome && confirms) ? refuse('note-missing', '/payload/note') : null
}

function faultOfCautions(walk: OpenWalk, check: LocatedDecision, { before }: EventOf<'finding-recorded'>['payload']): Refusal | null {
  const compared = before === undefined ? null : comparedWith(check)
  const act = actOfNodes(walk.metal, compared ? [compared, check] : [check])
  return pendingOf(walk, act, (page) => page === walk.node).length > 0 ? refuse('cautions-pending', '/payload/node') : null
}

/** What speaks against leaving the check of the page without an answer. Steps on its page fall away with it; its cautions need not be read. */
export function faultOfSkip(charts: PinnedCharts, walk: OpenWalk, { payload }: EventOf<'check-skipped'>): Refusal | null {
  const page = pageNodes(charts, walk)?.target
  if (page?.position.node !== payload.node) return refuse('wrong-node', '/payload/node')
  return locateDecision(charts, walk, payload.node) === null ? refuse('not-a-check', '/payload/node') : null
}

/** What speaks against doing a step. */
export function faultOfStep(charts: PinnedCharts, walk: OpenWalk, { payload }: EventOf<'step-done'>): Refusal | null {
  if (payload.node !== walk.node) return refuse('wrong-node', '/payload/node')
  const located = locate(charts, walk.pins, walk.node)
  if (located?.node.kind !== 'step') return refuse('not-a-step', '/payload/node')
  const page = pageNodes(charts, walk)?.target.position.node
  const pending = pendingOf(walk, actOfNodes(walk.metal, [located]), (read) => read === walk.node || read === page)
  return pending.length > 0 ? refuse('cautions-pending', '/payload/node') : null
}

/** What keeps a check from being looked at as the machine stands now: access, engine, things in the way. */
function faultOfMetal({ index, node }: LocatedDecision, metal: Metal): Refusal | null {
  const isOpen = (id: (typeof metal.open)[number]) => metal.open.includes(id)
  const alternative = node.needsOneOf === undefined ? [] : node.needsOneOf.find((ids) => ids.every(isOpen))
  if (alternative === undefined || !(node.needs ?? []).every(isOpen)) return refuse('access-not-open', '/payload/node')
  const inTheWay = [...(node.closed ?? []), ...[...(node.needs ?? []), ...alternative].flatMap((id) => index.access.get(id)?.excludes ?? [])]
  if (inTheWay.some(isOpen)) return refuse('access-in-the-way', '/payload/node')
  return node.machine !== undefined && node.machine !== metal.engine ? refuse('wrong-machine-state', '/payload/node') : null
}

/** The check that a person may look at out of turn, or why not. */
function outOfTurn(charts: PinnedCharts, walk: OpenWalk, place: Place): LocatedDecision | Refusal {
  const at = '/payload/node'
  const located = locate(charts, walk.pins, place)
  if (located === null) return refuse('no-such-node', at)
  if (!chartsOnStack(charts, walk).includes(located.index)) return refuse('not-on-stack', at)
  const check = locateDecision(charts, walk, place)
  if (check === null) return refuse('not-a-check', at)
  if (check.node.kind === 'proof' || check.node.defeats?.length || check.node.restores?.length) return refuse('only-in-turn', at)
  const page = walk.phase === 'at-node' ? pageNodes(charts, walk)?.target.position.node : undefined
  if (place === walk.node || place === page) return refuse('stands-here', at)
  if (!isFor(check.node, walk.machine)) return refuse('not-for-this-machine', at)
  return findingOf(charts, walk, check) === null ? check : refuse('already-found', at)
}

/** What speaks against something noticed out of turn. */
export function faultOfNoticed(charts: PinnedCharts, walk: OpenWalk, { payload }: EventOf<'noticed'>): Refusal | null {
  const check = outOfTurn(charts, walk, payload.node)
  if ('code' in check) return check
  return (
    faultOfMetal(check, walk.metal) ??
    (pendingOf(walk, actOfLooking(walk.metal, check), (page) => page === payload.node).length > 0 ? refuse('cautions-pending', '/payload/node') : null) ??
    faultOfNoticedAnswer(walk, check, payload)
  )
}

function faultOfNoticedAnswer(walk: OpenWalk, check: LocatedDecision, payload: EventOf<'noticed'>['payload']): Refusal | null {
  const judging = judgingOf(walk, check)
  const { outcome, value, unit } = payload
  if (judging?.repeat && value !== undefined) return refuse('only-in-turn', '/payload/value')
  if (outcome !== undefined) return faultOfAnswer(check, judging, givenBy({ outcome, value, unit }), '/payload')
  if (check.node.kind !== 'reading') return refuse('no-such-outcome', '/payload/outcome')
  if (value === undefined) return refuse('value-missing', '/payload/value')
  if (unit === undefined) return refuse('unit-missing', '/payload/unit')
  if (!isUnitOf(check.node.quantity, unit)) return refuse('wrong-unit', '/payload/unit')
  const verdict = judging && judgeTries(judging, [value], unit)
  return verdict?.kind === 'outcome' ? null : refuse('limits-unknown', '/payload/outcome')
}
