import type { NodeId, OutcomeId } from '#shared/lib/ids.ts'
import { ok } from '#shared/lib/result.ts'
import type { EdgeStart, Point } from './commands.ts'
import { chartDocumentSchema, edgeSchema, nodeSchema, type ChartDocument, type ChartEdge, type ChartNode, type DecisionNode } from './document.ts'
import { chain, checked, idTaken, noEdge, noNode, noOutcome, patched, refuse, without, type Edited } from './edit-checks.ts'
import { isDecision, isTerminator } from './graph.ts'

// Nodes and edges

/** Adds nodes, then edges, then places; all of it or nothing. */
export function addNodes(chart: ChartDocument, nodes: readonly ChartNode[], edges: readonly ChartEdge[], positions: Readonly<Record<string, Point>>): Edited {
  const added = chain(nodes, chart, (at, node) => {
    const good = checked(nodeSchema, node)
    if (!good.ok) return good
    return at.nodes.some((other) => other.id === good.value.id) ? idTaken(good.value.id) : ok({ ...at, nodes: [...at.nodes, good.value] })
  })
  const joined = added.ok ? chain(edges, added.value, (at, edge) => connect(at, edge, edge.to)) : added
  return joined.ok ? place(joined.value, positions) : joined
}

/** Puts a node into an edge; all its ways on lead to where the edge led. An end has none. */
export function insertNode(chart: ChartDocument, node: ChartNode, into: EdgeStart, position: Point | undefined): Edited {
  const edge = chart.edges.find((other) => begins(other, into))
  if (edge === undefined) return noEdge(into)
  const good = checked(nodeSchema, node)
  if (!good.ok) return good
  const ways = isDecision(good.value) ? good.value.outcomes.map((outcome) => ({ outcome: outcome.id })) : isTerminator(good.value) ? [] : [{}]
  const onward = ways.map((way) => ({ from: node.id, ...way, to: edge.to }))
  return addNodes(chart, [good.value], [{ ...edge, to: node.id }, ...onward], position === undefined ? {} : { [node.id]: position })
}

/** Takes a node out with its edges and its place; with `closeGap` what led to it leads on across it. */
export function removeNode(chart: ChartDocument, id: NodeId, closeGap: boolean): Edited {
  const node = chart.nodes.find((other) => other.id === id)
  if (node === undefined) return noNode(id)
  const target = closeGap ? wayAcross(chart, node) : undefined
  const kept = chart.edges.filter((edge) => edge.from !== id && (edge.to !== id || target !== undefined))
  const { [id]: _, ...positions } = chart.positions ?? {}
  return ok({
    ...chart,
    nodes: chart.nodes.filter((other) => other.id !== id).map((other) => (target === undefined ? other : handedOver(other, id, target))),
    edges: kept.map((edge) => (edge.to === id && target !== undefined ? { ...edge, to: target } : edge)),
    ...(chart.positions === undefined ? {} : { positions: id in chart.positions ? positions : chart.positions }),
  })
}

/** Where a walk goes on if a node is taken out: along its first normal outcome, else its first edge. */
function wayAcross(chart: ChartDocument, node: ChartNode): NodeId | undefined {
  const edges = chart.edges.filter((edge) => edge.from === node.id && edge.to !== node.id)
  const normal = isDecision(node) ? node.outcomes.find((outcome) => outcome.normal === true)?.id : undefined
  return (edges.find((edge) => normal !== undefined && edge.outcome === normal) ?? edges[0])?.to
}

function handedOver(node: ChartNode, from: NodeId, to: NodeId): ChartNode {
  return node.onlyFor?.otherwise === from ? { ...node, onlyFor: { ...node.onlyFor, otherwise: to } } : node
}

/** Puts a node in the place of the one with its id, and drops edges out of outcomes that it lacks. */
export function replaceNode(chart: ChartDocument, node: ChartNode): Edited {
  const good = checked(nodeSchema, node)
  if (!good.ok) return good
  const outcomes = new Set<OutcomeId | undefined>(isDecision(good.value) ? good.value.outcomes.map((outcome) => outcome.id) : [undefined])
  const replaced = editNode(chart, good.value.id, () => good)
  return replaced.ok ? ok({ ...replaced.value, edges: chart.edges.filter((edge) => edge.from !== node.id || outcomes.has(edge.outcome)) }) : replaced
}

/** Takes an edge out. */
export function disconnect(chart: ChartDocument, start: EdgeStart): Edited {
  const edges = chart.edges.filter((edge) => !begins(edge, start))
  return edges.length === chart.edges.length ? noEdge(start) : ok({ ...chart, edges })
}

/** Leads an outcome, or a node without outcomes, to a node; an edge that was there gives way. */
export function connect(chart: ChartDocument, start: EdgeStart, to: NodeId): Edited {
  const edge = checked(edgeSchema, { from: start.from, ...(start.outcome === undefined ? {} : { outcome: start.outcome }), to })
  if (!edge.ok) return edge
  const from = chart.nodes.find((node) => node.id === start.from)
  if (from === undefined) return noNode(start.from)
  if (!chart.nodes.some((node) => node.id === to)) return noNode(to)
  const fits = isDecision(from) ? from.outcomes.some((outcome) => outcome.id === start.outcome) : start.outcome === undefined
  if (!fits) return noOutcome(start.from, start.outcome)
  const at = chart.edges.findIndex((other) => begins(other, start))
  if (at === -1) return ok({ ...chart, edges: [...chart.edges, edge.value] })
  return ok(chart.edges[at]?.to === to ? chart : { ...chart, edges: chart.edges.with(at, edge.value) })
}

function begins(edge: ChartEdge, start: EdgeStart): boolean {
  return edge.from === start.from && edge.outcome === start.outcome
}

/** Changes one node; the others stay the same objects. */
export function editNode(chart: ChartDocument, id: NodeId, change: (node: ChartNode) => Edited<object>): Edited {
  const at = chart.nodes.findIndex((node) => node.id === id)
  const node = chart.nodes[at]
  if (node === undefined) return noNode(id)
  const changed = change(node)
  if (!changed.ok) return changed
  return ok(changed.value === node ? chart : { ...chart, nodes: chart.nodes.with(at, changed.value as ChartNode) })
}

// Outcomes

/** The outcomes of a node, in the order of their balloons. */
export type Outcomes = DecisionNode['outcomes']

/** Changes the outcomes of a node. */
export function editOutcomes(chart: ChartDocument, id: NodeId, change: (outcomes: Outcomes) => Edited<Outcomes>): Edited {
  return editNode(chart, id, (node) => {
    if (!isDecision(node)) return refuse('has-no-outcomes', `Node ${id} has no outcomes. Make it a check, a reading or a proof first.`)
    const changed = change(node.outcomes)
    if (!changed.ok) return changed
    return patched(node, { outcomes: changed.value }, nodeSchema)
  })
}

/** Changes the outcomes of a node where one of them stands. */
export function editOutcome(chart: ChartDocument, id: NodeId, outcomeId: OutcomeId, change: (outcomes: Outcomes, place: number) => Edited<Outcomes>): Edited {
  return editOutcomes(chart, id, (outcomes) => {
    const at = outcomes.findIndex((outcome) => outcome.id === outcomeId)
    return at === -1 ? noOutcome(id, outcomeId) : change(outcomes, at)
  })
}

/** Takes an outcome out, with its edge, its bands and its grades. */
export function removeOutcome(chart: ChartDocument, id: NodeId, outcomeId: OutcomeId): Edited {
  const removed = editOutcome(chart, id, outcomeId, (outcomes, at) => ok(outcomes.toSpliced(at, 1)))
  const tidied = removed.ok ? editNode(removed.value, id, (node) => ok(isDecision(node) ? forgetting(node, outcomeId) : node)) : removed
  return tidied.ok ? ok({ ...tidied.value, edges: tidied.value.edges.filter((edge) => !begins(edge, { from: id, outcome: outcomeId })) }) : tidied
}

/** A node without what it says of an outcome that is gone: its bands, its grades, where an unanswered check goes. */
function forgetting(node: DecisionNode, outcomeId: OutcomeId): DecisionNode {
  const { ifSkipped, rows, ...kept } = node
  const graded = Object.entries(rows ?? {}).map(([cause, row]) => [cause, without(row, [outcomeId])] as const)
  return {
    ...kept,
    ...(ifSkipped === undefined || ifSkipped === outcomeId ? {} : { ifSkipped }),
    ...(rows === undefined ? {} : { rows: Object.fromEntries(graded) }),
    ...(kept.kind === 'reading' && kept.bands !== undefined ? { bands: kept.bands.filter((band) => band.outcome !== outcomeId) } : {}),
  }
}

/** A list with one entry moved to another place, or the list itself if that changes nothing. */
export function moved<T>(list: readonly T[], from: number, to: number): T[] {
  const entry = list[from]
  return entry === undefined || from === to ? (list as T[]) : list.toSpliced(from, 1).toSpliced(Math.max(0, to), 0, entry)
}

// Drawing

/** Gives nodes places on the drawing. */
export function place(chart: ChartDocument, positions: Readonly<Record<string, Point>>): Edited {
  const known = new Set<string>(chart.nodes.map((node) => node.id))
  const stray = Object.keys(positions).find((id) => !known.has(id))
  if (stray !== undefined) return noNode(stray)
  const good = checked(chartDocumentSchema.shape.positions, positions)
  if (!good.ok) return good
  const before: Readonly<Record<string, Point>> = chart.positions ?? {}
  const isChanged = Object.entries(positions).some(([id, { x, y }]) => before[id]?.x !== x || before[id].y !== y)
  return ok(isChanged ? { ...chart, positions: { ...chart.positions, ...good.value } } : chart)
}

/** Moves nodes on the drawing; one without a place starts from 0, 0. */
export function move(chart: ChartDocument, ids: readonly NodeId[], by: Point): Edited {
  return place(chart, Object.fromEntries(ids.map((id) => [id, shifted(chart.positions?.[id], by)])))
}

function shifted(from: Point | undefined, by: Point): Point {
  return { x: (from?.x ?? 0) + by.x, y: (from?.y ?? 0) + by.y }
}
