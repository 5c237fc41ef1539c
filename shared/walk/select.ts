import { isDecision } from '#shared/chart/graph.ts'
import { splitPlace, type AccessId, type EventId } from '#shared/lib/ids.ts'
import { handBackRun } from '#shared/trade/hand-back-run.ts'
import { highestWord } from '#shared/trade/signal-words.ts'
import { actOfNodes, pendingOf } from './cautions.ts'
import { causeOf, fixItems, isLeftUnsafe, possibleResults, reasonWords } from './endings.ts'
import { comparedWith, findingOf, foundBefore, listSkipped, offeredAgainst, offeredAnswer, type LocatedDecision } from './findings.ts'
import { heldAgainst, judgingOf, takenOnce } from './judging.ts'
import { enterAll, openingMinutes } from './metal.ts'
import type {
  BeforePage,
  BeforeWords,
  CausePage,
  CautionPage,
  CheckPage,
  ContributingChoice,
  EscalatedPage,
  Fix,
  HeldPage,
  NoAnswer,
  NodeName,
  OfferedAnswer,
  ProofPage,
  ProvenPage,
  QuestionWords,
  ReadingPage,
  RunPage,
  RunPassedPage,
  ServiceWords,
  SkippedCheck,
  StartChoice,
  WalkPage,
} from './page.ts'
import { inOrder, pageNodes, pageNodesAt, type PageNodes } from './page-nodes.ts'
import { accessOnStack, chartsOf, locate, type Located, type PinnedCharts } from './pinned-charts.ts'
import { outcomeIfSkipped } from './route.ts'
import { isOpen, liveTrail, type OpenWalk, type ProvenCause, type StartedWalk, type WalkRecord, type WalkState } from './state.ts'
import { causeWords, enteringWords, nameAt, nameOf, outcomeChoices, outcomeTitle, provenWords, serviceItemOf, wordsOf } from './words.ts'

/** A walk in one of its phases. */
type In<Phase extends StartedWalk['phase']> = Extract<StartedWalk, { phase: Phase }>

/** The page that the player shows. */
export function toPage(charts: PinnedCharts, state: WalkState): WalkPage {
  if (state.phase === 'new') return { kind: 'not-started' }
  const page = pageOf(charts, state)
  return state.isPaused && isOpen(state) ? { kind: 'paused', under: page, isHandedOver: state.handedTo !== null } : page
}

function pageOf(charts: PinnedCharts, walk: StartedWalk): WalkPage {
  switch (walk.phase) {
    case 'at-node':
      return pageOfNode(charts, walk)
    case 'at-cause':
      return causePage(charts, walk)
    case 'proven':
      return provenPage(charts, walk)
    case 'repaired':
      return runPage(charts, walk)
    case 'run-passed':
      return runPassedPage(charts, walk)
    case 'escalated':
      return escalatedPage(charts, walk)
    case 'held':
      return heldPage(charts, walk)
    case 'closed':
      return { kind: 'closed', result: walk.result, why: walk.why, cause: walk.causeId && causeWords(charts, walk, walk.causeId) }
    case 'abandoned':
      return { kind: 'abandoned', why: walk.why }
  }
}

function pageOfNode(charts: PinnedCharts, walk: In<'at-node'>): WalkPage {
  const nodes = pageNodes(charts, walk)
  if (nodes === null) return { kind: 'lost', place: walk.node }
  const { node } = nodes.target
  if (walk.kind === 'free') return { kind: 'free', node: wordsOf(charts, walk, nodes.target), checks: walk.notedChecks }
  if (isDecision(node) || node.kind === 'step') return cautionPage(charts, walk, nodes) ?? workPage(charts, walk, nodes)
  const words = wordsOf(charts, walk, nodes.target)
  switch (node.kind) {
    case 'jump':
      return { kind: 'pick', node: words, starts: startChoices(charts, walk) }
    case 'escalate':
    case 'back': {
      const reason = (node.kind === 'escalate' ? node.reason : undefined) ?? 'no-cause-found'
      return { kind: 'ask', node: words, reason, reasonWords: reasonWords(reason), skipped: skippedChecks(charts, walk) }
    }
    case 'hold':
      return { kind: 'hold', node: words, cause: node.causeId === undefined ? null : causeWords(charts, walk, node.causeId) }
    default:
      return { kind: 'lost', place: walk.node }
  }
}

function cautionPage(charts: PinnedCharts, walk: WalkRecord, nodes: PageNodes): CautionPage | null {
  const page = nodes.target.position.node
  const pending = pendingOf(walk, actOfNodes(walk.metal, inOrder(nodes)), (read) => read === page)
  const word = highestWord(pending.map(({ caution }) => caution.word))
  if (word === null) return null
  return {
    kind: 'caution',
    guards: nameOf(charts, walk, nodes.target),
    cautionIds: pending.map(({ caution }) => caution.id),
    word,
    cautions: pending.map(({ caution, again }) => ({
      cautionId: caution.id,
      word: caution.word,
      harm: caution.harm,
      hazard: caution.hazard,
      consequence: caution.consequence ?? null,
      avoid: caution.avoid,
      again,
    })),
    canSkip: isDecision(nodes.target.node),
  }
}

function workPage(charts: PinnedCharts, walk: WalkRecord, nodes: PageNodes): WalkPage {
  const { index, node } = nodes.target
  if (!isDecision(node)) {
    const entering = enteringWords(charts, walk, [nodes.target], enterAll(walk.metal, [nodes.target]))
    return { kind: 'step', node: wordsOf(charts, walk, nodes.target), entering }
  }
  const check: LocatedDecision = { index, node }
  if (node.kind === 'proof') return nodes.before ? beforePage(charts, walk, nodes, check, nodes.before) : proofPage(charts, walk, nodes, check)
  const judging = judgingOf(walk, check)
  const asking = askingOf(charts, walk, nodes, check)
  return node.kind === 'reading' && judging
    ? ({ ...asking, kind: 'reading', judging } satisfies ReadingPage)
    : ({ ...asking, kind: 'check' } satisfies CheckPage)
}

/** What every page to be answered shows. A `before` is shown, and entered, on a page of its own. */
function askingOf(charts: PinnedCharts, walk: WalkRecord, nodes: PageNodes, check: LocatedDecision): Omit<CheckPage, 'kind'> {
  const ahead = nodes.before ? enterAll(walk.metal, [...nodes.lines, nodes.before]).metal : walk.metal
  const entered = nodes.before ? [nodes.target] : [...nodes.lines, nodes.target]
  return {
    node: wordsOf(charts, walk, nodes.target),
    lines: nodes.lines.map((line) => wordsOf(charts, walk, line)),
    entering: enteringWords(charts, walk, entered, enterAll(ahead, entered)),
    outcomes: outcomeChoices(check),
    offered: offeredWords(charts, walk, check),
    noAnswer: noAnswerOf(check),
  }
}

function noAnswerOf({ node }: LocatedDecision): NoAnswer {
  const outcome = outcomeIfSkipped(node)
  return {
    ifSkipped: outcome === null ? null : { outcome, title: outcomeTitle(node, outcome) },
    endsWalk: 'reproduces' in node && node.reproduces === true,
  }
}

function offeredWords(charts: PinnedCharts, walk: WalkRecord, check: LocatedDecision): OfferedAnswer | null {
  const offered = offeredAnswer(charts, walk, check)
  if (offered === null) return null
  const { eventId, answer, at, note } = offered.source
  return { eventId, answer, title: outcomeTitle(check.node, answer.outcome), from: offered.from, at, note, heldAgainst: offeredAgainst(offered) }
}

function beforePage(charts: PinnedCharts, walk: WalkRecord, nodes: PageNodes, proof: LocatedDecision, before: LocatedDecision): BeforePage {
  const entered = [...nodes.lines, before]
  return {
    kind: 'before',
    node: wordsOf(charts, walk, before),
    entering: enteringWords(charts, walk, entered, enterAll(walk.metal, entered)),
    outcomes: outcomeChoices(before),
    judging: takenOnce(judgingOf(walk, before)),
    noAnswer: noAnswerOf(proof),
    proof: proofPage(charts, walk, nodes, proof),
  }
}

function proofPage(charts: PinnedCharts, walk: WalkRecord, nodes: PageNodes, check: LocatedDecision): ProofPage {
  const { node } = check
  const proof = node.kind === 'proof' ? node : undefined
  const compared = comparedWith(check)
  return {
    ...askingOf(charts, walk, nodes, check),
    kind: 'proof',
    suspect: proof?.suspect === undefined ? null : causeWords(charts, walk, proof.suspect),
    by: proof?.by ?? 'isolation',
    change: proof?.change ?? null,
    afterwards: proof?.afterwards ?? null,
    compares: compared && nameOf(charts, walk, compared),
    before: compared && beforeWords(charts, walk, compared),
    judging: heldAgainst(judgingOf(walk, check), foundBefore(charts, walk, check)),
    needsNote: proof?.by === 'sight',
  }
}

function beforeWords(charts: PinnedCharts, walk: WalkRecord, compared: LocatedDecision): BeforeWords | null {
  const found = findingOf(charts, walk, compared)
  return found && { node: nameOf(charts, walk, compared), answer: found.answer, title: outcomeTitle(compared.node, found.answer.outcome) }
}

function startChoices(charts: PinnedCharts, walk: WalkRecord): readonly StartChoice[] {
  return chartsOf(charts, walk.pins).flatMap((index) =>
    index.starts.map((start) => ({
      chartId: index.id,
      version: walk.pins[index.id] ?? 0,
      startId: start.id,
      title: start.title ?? index.chart.title,
      chartTitle: index.chart.title,
    })),
  )
}

/** The checks that got no answer, each with the event that a step back to it names. */
export function skippedChecks(charts: PinnedCharts, walk: WalkRecord): readonly SkippedCheck[] {
  return listSkipped(walk).map(({ position, why, note, eventId }) => ({ node: nameAt(charts, walk, position.node), why, note, eventId }))
}

function causePage(charts: PinnedCharts, walk: In<'at-cause'>): WalkPage {
  const located = locate(charts, walk.pins, walk.node)
  if (located === null) return { kind: 'lost', place: walk.node }
  const proof = liveTrail(walk).findLast((line) => {
    const node = locate(charts, walk.pins, line.position.node)?.node
    return (
      line.kind === 'finding' &&
      node?.kind === 'proof' &&
      node.suspect === walk.causeId &&
      node.outcomes.some(({ id, confirms }) => confirms && id === line.answer.outcome)
    )
  })
  return {
    kind: 'cause',
    node: wordsOf(charts, walk, located),
    cause: causeWords(charts, walk, walk.causeId),
    proofEventId: proof?.eventId ?? null,
    proof: proof ? nameAt(charts, walk, proof.position.node) : null,
  } satisfies CausePage
}

/** The charts that a walk has been in, the first one first. */
function visitedCharts(charts: PinnedCharts, walk: WalkRecord) {
  const ids = new Set([walk.start, ...walk.trail.map(({ position }) => position.node), walk.node].map((place) => splitPlace(place).chartId))
  return chartsOf(charts, walk.pins)
    .filter(({ id }) => ids.has(id))
    .toSorted((left, right) => [...ids].indexOf(left.id) - [...ids].indexOf(right.id))
}

function contributingChoices(charts: PinnedCharts, walk: WalkRecord): readonly ContributingChoice[] {
  const offered = visitedCharts(charts, walk).flatMap(
    ({ chart, causes }) => chart.contributing ?? [...causes.values()].filter(({ contributing }) => contributing).map(({ id }) => id),
  )
  return [...new Set([...offered, ...walk.contributing])].map((causeId) => {
    const cause = causeOf(charts, walk, causeId)
    return { causeId, title: cause?.title ?? causeId, advice: cause?.advice ?? null, isSet: walk.contributing.includes(causeId) }
  })
}

/** The service list in words, in the order in which its items came up. */
export function serviceWords(charts: PinnedCharts, walk: WalkRecord): readonly ServiceWords[] {
  return walk.serviceList.map((serviceItemId) => {
    const item = serviceItemOf(charts, walk, serviceItemId)
    return {
      serviceItemId,
      title: item?.title ?? serviceItemId,
      minutes: item?.minutes ?? null,
      isTicked: walk.ticks.service.includes(serviceItemId),
      byHand: walk.serviceByHand.added.includes(serviceItemId),
    }
  })
}

function fixOf(charts: PinnedCharts, walk: WalkRecord, proven: ProvenCause): Fix | null {
  const [remedy, ...parts] = fixItems(charts, walk, proven)
  if (remedy === undefined) return null
  const items = [remedy, ...parts].map((item) => ({ ...item, isTicked: walk.ticks.fix.includes(item.id) }))
  const minutes = proven.causeId === null ? undefined : causeOf(charts, walk, proven.causeId)?.remedy?.minutes
  return { text: remedy.title, minutes: minutes ?? null, items }
}

function provenPage(charts: PinnedCharts, walk: In<'proven'>): ProvenPage {
  const { proof } = walk.cause
  const line = proof.by === 'finding' ? walk.trail.find(({ eventId }) => eventId === proof.eventId) : undefined
  const choices = visitedCharts(charts, walk).flatMap((index) => [...index.serviceItems.values()])
  return {
    kind: 'proven',
    cause: provenWords(charts, walk, walk.cause),
    proof: line ? nameAt(charts, walk, line.position.node) : null,
    fix: fixOf(charts, walk, walk.cause),
    contributing: contributingChoices(charts, walk),
    service: serviceWords(charts, walk),
    serviceChoices: [...new Map(choices.map(({ id, title }) => [id, { serviceItemId: id, title }])).values()].filter(
      ({ serviceItemId }) => !walk.serviceList.includes(serviceItemId),
    ),
    canCloseUnrepaired: !isLeftUnsafe(charts, walk),
  }
}

function runPage(charts: PinnedCharts, walk: In<'repaired'>): RunPage {
  const items = handBackRun(walk.machine.class).map((item) => {
    const key = item.reading?.specKey
    const limits = key !== undefined && Object.hasOwn(walk.limits, key) ? walk.limits[key] : undefined
    return { ...item, isTicked: walk.ticks.run.includes(item.id), limits: limits ?? null }
  })
  return {
    kind: 'run',
    cause: provenWords(charts, walk, walk.cause),
    items,
    isComplete: items.every(({ isTicked }) => isTicked),
    defeated: walk.metal.defeated,
    service: serviceWords(charts, walk),
  }
}

function runPassedPage(charts: PinnedCharts, walk: In<'run-passed'>): RunPassedPage {
  return {
    kind: 'run-passed',
    cause: provenWords(charts, walk, walk.cause),
    repair: walk.repair,
    run: walk.run,
    contributing: contributingChoices(charts, walk),
    results: possibleResults(charts, walk),
  }
}

/** The questions of a walk in words, the first asked first. */
export function questionWords(charts: PinnedCharts, walk: WalkRecord): readonly QuestionWords[] {
  return walk.questions.map(({ questionId, text, photoIds, answer }) => ({
    questionId,
    text,
    photoIds,
    answer: answer?.text ?? null,
    goTo: answer?.goTo ? nameAt(charts, walk, answer.goTo) : null,
  }))
}

function escalatedPage(charts: PinnedCharts, walk: In<'escalated'>): EscalatedPage {
  return {
    kind: 'escalated',
    reason: walk.reason,
    reasonWords: reasonWords(walk.reason),
    at: nameAt(charts, walk, walk.node),
    skipped: skippedChecks(charts, walk),
    ruledOut: walk.ruledOut.map(({ causeId, how }) => ({ cause: causeWords(charts, walk, causeId), how })),
    questions: questionWords(charts, walk),
    results: possibleResults(charts, walk),
  }
}

function heldPage(charts: PinnedCharts, walk: In<'held'>): HeldPage {
  const { tagNo, why, causeId } = walk
  return {
    kind: 'held',
    tagNo,
    why,
    cause: causeId && causeWords(charts, walk, causeId),
    defeated: walk.metal.defeated,
    results: possibleResults(charts, walk),
  }
}

/** What is off or out now, in the order in which it was opened; minutes are those of opening and closing it. */
export interface OpenAccess {
  readonly accessId: AccessId
  readonly title: string
  readonly minutes: number
}

/** The access states open now ("what's off"). */
export function openAccess(charts: PinnedCharts, walk: WalkRecord): readonly OpenAccess[] {
  return walk.metal.open.map((accessId) => {
    const access = accessOnStack(charts, walk, accessId)
    return { accessId, title: access?.title ?? accessId, minutes: openingMinutes(access) }
  })
}

/** Returning jumps that were passed over on the way to this page, since their chart is not there yet; the page says so. */
export function passedOver(charts: PinnedCharts, walk: WalkRecord): readonly NodeName[] {
  return walk.arrival.missing.map(({ jump }) => nameAt(charts, walk, jump))
}

/**
 * The line of the trail that "Back" goes to: the latest one that had a page of its own. Steps that stood on the page of a check go with that
 * page. `null` at the beginning, and where a step back is not taken.
 */
export function backTo(charts: PinnedCharts, walk: OpenWalk): EventId | null {
  if (walk.phase === 'repaired' || walk.phase === 'run-passed' || walk.phase === 'held') return null
  const hadPage = (line: ReturnType<typeof liveTrail>[number]) => line.kind !== 'step' || pageNodesAt(charts, walk, line.position)?.lines.length === 0
  return liveTrail(walk).findLast(hadPage)?.eventId ?? null
}

/** One knot of the cord: a node that the walk came by, or where it stands. */
export interface Knot extends NodeName {
  /** The event that tied it; `null` for the start and for where the walk stands. */
  readonly eventId: EventId | null
  readonly isHere: boolean
}

/** The knots of a walk: its start, every line of the trail that counts, and where it stands. */
export function knots(charts: PinnedCharts, walk: StartedWalk): readonly Knot[] {
  const tied = liveTrail(walk).map((line): Knot => ({ ...nameAt(charts, walk, line.position.node), eventId: line.eventId, isHere: false }))
  const start: Knot = { ...nameAt(charts, walk, walk.start), eventId: null, isHere: false }
  const target: Located | null = isOpen(walk) ? (pageNodes(charts, walk)?.target ?? null) : locate(charts, walk.pins, walk.node)
  const here: Knot[] = target ? [{ ...nameOf(charts, walk, target), eventId: null, isHere: true }] : []
  return [start, ...tied, ...(walk.phase === 'escalated' ? [] : here)]
}
