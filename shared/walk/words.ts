import type { Cause, ChartNode, DecisionNode, ServiceItem } from '#shared/chart/document.ts'
import { chartNumbers, isDecision, type ChartIndex } from '#shared/chart/graph.ts'
import { splitPlace, type CauseId, type ChartId, type NodeId, type OutcomeId, type Place, type ServiceItemId } from '#shared/lib/ids.ts'
import { causeOf } from './endings.ts'
import { bandedOutcomes } from './judging.ts'
import type { Worked } from './metal.ts'
import type { AccessOpening, CauseWords, Entering, NodeName, NodeWords, OutcomeChoice } from './page.ts'
import { accessOnStack, chartOf, chartsOf, locate, placeOf, type Located, type PinnedCharts } from './pinned-charts.ts'
import type { ProvenCause, WalkRecord } from './state.ts'

/** Numbers of a chart that were worked out before; an index never changes. */
const knownNumbers = new WeakMap<ChartIndex, ReadonlyMap<NodeId, string>>()

function numberOf(index: ChartIndex, nodeId: NodeId): string {
  const numbers = knownNumbers.get(index) ?? chartNumbers(index)
  knownNumbers.set(index, numbers)
  return numbers.get(nodeId) ?? ''
}

function chartTitle(charts: PinnedCharts, walk: WalkRecord, chartId: ChartId | undefined): string {
  if (chartId === undefined) return 'another chart'
  return chartOf(charts, walk.pins, chartId)?.chart.title ?? chartId
}

/** What a node without a title of its own is called. */
function titleOf(charts: PinnedCharts, walk: WalkRecord, { index, node }: Located): string {
  if (node.title !== undefined) return node.title
  switch (node.kind) {
    case 'cause':
      return causeOf(charts, walk, node.causeId)?.title ?? node.causeId
    case 'start':
      return index.chart.title
    case 'escalate':
      return 'Ask the lead'
    case 'hold':
      return 'Not safe to hand back'
    case 'back':
      return 'Back to where it was called'
    case 'jump':
      return node.pick === undefined ? `Go on in ${chartTitle(charts, walk, node.chart)}` : 'What does it do?'
    default:
      return node.id
  }
}

/** The name of a node. */
export function nameOf(charts: PinnedCharts, walk: WalkRecord, located: Located): NodeName {
  const { index, node } = located
  return {
    place: placeOf(index, node.id),
    chartId: index.id,
    chartTitle: index.chart.title,
    kind: node.kind,
    number: numberOf(index, node.id),
    title: titleOf(charts, walk, located),
  }
}

/** The name of the node at a place; one that the walk's charts lack is called by its id. */
export function nameAt(charts: PinnedCharts, walk: WalkRecord, place: Place): NodeName {
  const located = locate(charts, walk.pins, place)
  if (located) return nameOf(charts, walk, located)
  const { chartId, nodeId } = splitPlace(place)
  return { place, chartId, chartTitle: chartId, kind: 'check', number: '', title: nodeId }
}

/** All that a node tells the person who stands at it. */
export function wordsOf(charts: PinnedCharts, walk: WalkRecord, located: Located): NodeWords {
  const { node } = located
  return {
    ...nameOf(charts, walk, located),
    do: node.do ?? null,
    good: node.good ?? null,
    why: node.why ?? null,
    picture: node.picture ?? null,
    tools: node.tools ?? [],
    timer: node.timer ?? null,
    minutes: node.minutes ?? 0,
  }
}

/** An item of the service list, by the first of the walk's charts that has it. */
export function serviceItemOf(charts: PinnedCharts, walk: WalkRecord, id: ServiceItemId): ServiceItem | undefined {
  return chartsOf(charts, walk.pins).flatMap((index) => index.serviceItems.get(id) ?? [])[0]
}

/** A cause in words; one that no chart defines is called by its id. */
export function causeWords(charts: PinnedCharts, walk: WalkRecord, causeId: CauseId): CauseWords {
  const cause: Cause | undefined = causeOf(charts, walk, causeId)
  return { causeId, title: cause?.title ?? causeId, system: cause?.system ?? null, isUnsafe: cause?.unsafe ?? false }
}

/** A proven cause in words; that of a free walk may have no more than a title. */
export function provenWords(charts: PinnedCharts, walk: WalkRecord, { causeId, title }: ProvenCause): CauseWords {
  return causeId === null ? { causeId, title: title ?? '', system: null, isUnsafe: false } : causeWords(charts, walk, causeId)
}

/** The outcomes of a node with their balloons. */
export function outcomeChoices({ index, node }: { index: ChartIndex; node: DecisionNode }): readonly OutcomeChoice[] {
  const banded = bandedOutcomes(node)
  return node.outcomes.map((outcome, order) => ({
    outcome: outcome.id,
    balloon: order < 9 ? order + 1 : null,
    title: outcome.title,
    isNormal: outcome.normal ?? false,
    isServiceable: outcome.serviceable ?? false,
    isReproduced: outcome.reproduced ?? false,
    confirms: outcome.confirms ?? false,
    serviceItem: outcome.serviceable && outcome.serviceItem ? (index.serviceItems.get(outcome.serviceItem)?.title ?? null) : null,
    isBanded: banded.has(outcome.id),
  }))
}

/** The outcome of a node in words; its id where the node lacks it. */
export function outcomeTitle(node: ChartNode | undefined, outcome: OutcomeId): string {
  return (node && isDecision(node) ? node.outcomes.find(({ id }) => id === outcome)?.title : undefined) ?? outcome
}

function openingWords(charts: PinnedCharts, walk: WalkRecord, id: Worked['opened'][number]): AccessOpening {
  const access = accessOnStack(charts, walk, id)
  return {
    accessId: id,
    title: access?.title ?? id,
    minutes: (access?.minutes ?? 0) + (access?.closeMinutes ?? 0),
    waitMinutes: access?.waitMinutes ?? 0,
    trap: access?.trap ?? null,
  }
}

/** What recording some nodes does to the machine, in words. The last of them says how the engine is to be. */
export function enteringWords(charts: PinnedCharts, walk: WalkRecord, nodes: readonly Located[], done: Worked): Entering {
  return {
    opens: done.opened.map((id) => openingWords(charts, walk, id)),
    closes: done.closed.map((accessId) => ({ accessId, title: accessOnStack(charts, walk, accessId)?.title ?? accessId })),
    minutes: done.minutes,
    waitMinutes: done.waitMinutes,
    machine: nodes.at(-1)?.node.machine ?? null,
    defeats: nodes.flatMap(({ node }) => node.defeats ?? []),
    restores: nodes.flatMap(({ node }) => node.restores ?? []),
  }
}
