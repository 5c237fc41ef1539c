import dagre from 'dagre'
import type { NodeId } from '#shared/lib/ids.ts'
import { essentialEdges } from './essential-edges.ts'
import type { ChartFlow } from './flow.ts'

/** Where a node stands: rows from the top, columns from the main line. */
export interface Cell {
  readonly row: number
  readonly column: number
}

/** A run of nodes that stand in one column, each on the straight line down from the one before. */
interface Line {
  readonly nodes: readonly NodeId[]
  /** The node from whose side the line hangs; `null` for what hangs from nothing. */
  readonly parent: NodeId | null
}

/** A side way with at least so many nodes runs beside the main line instead of pushing it down. */
const longRegion = 12

/**
 * Gives every node a cell of its own: the main line runs down column 0; what an outcome sets aside stands to the right of its check, in the same
 * row where there is room for it; several things set aside are stacked, and the main line goes on below them. Rows are the ranks that
 * dagre finds for the strips of nodes that share a row; columns are then taken from the left, the nearest free one.
 */
export function placeOnGrid(flow: ChartFlow): ReadonlyMap<NodeId, Cell> {
  const lines = toLines(flow)
  const late = new Set(lines.flatMap(({ nodes, parent }) => (parent === null && isSharedEnd(flow, nodes) ? nodes : [])))
  const rows = toRows(flow, lines, late)
  return toCells(flow, lines, late, rows)
}

function toLines(flow: ChartFlow): readonly Line[] {
  const taken = new Set<NodeId>()
  const lines: Line[] = []
  for (const head of flow.order) {
    const nodes: NodeId[] = []
    for (let id: NodeId | undefined = head; id !== undefined && !taken.has(id); id = flow.mainOf.get(id)) {
      taken.add(id)
      nodes.push(id)
    }
    if (nodes.length > 0) lines.push({ nodes, parent: parentOf(flow, nodes) })
  }
  return lines
}

function parentOf(flow: ChartFlow, nodes: readonly NodeId[]): NodeId | null {
  const [head] = nodes
  const into = head === undefined ? [] : (flow.forwardInto.get(head) ?? [])
  if (into.length > 1 && isSharedEnd(flow, nodes)) return null
  return into[0]?.from ?? null
}

/** An end that several nodes lead to, off every straight line: it takes its place when theirs are known. */
function isSharedEnd(flow: ChartFlow, nodes: readonly NodeId[]): boolean {
  const [head, second] = nodes
  return head !== undefined && second === undefined && (flow.forwardInto.get(head)?.length ?? 0) > 1 && !flow.forwardFrom.has(head)
}

/** Nodes that are reached through `head` alone, itself included. */
function regionOf(flow: ChartFlow, head: NodeId): ReadonlySet<NodeId> {
  const region = new Set([head])
  for (const id of flow.topological.slice(flow.topological.indexOf(head) + 1)) {
    const into = flow.forwardInto.get(id) ?? []
    if (into.length > 0 && into.every(({ from }) => region.has(from))) region.add(id)
  }
  return region
}

/** Lines that hang from a node alone, in the order of its outcomes. */
function hangingFrom(flow: ChartFlow, lines: readonly Line[]): ReadonlyMap<NodeId, readonly NodeId[]> {
  const heads = new Set(lines.flatMap(({ nodes }) => nodes.slice(0, 1)))
  const hanging = new Map<NodeId, readonly NodeId[]>()
  for (const [id, links] of flow.forwardFrom) {
    const own = links.map(({ to }) => to).filter((to) => heads.has(to) && flow.forwardInto.get(to)?.length === 1)
    if (own.length > 0) hanging.set(id, own)
  }
  return hanging
}

function toRows(flow: ChartFlow, lines: readonly Line[], late: ReadonlySet<NodeId>): ReadonlyMap<NodeId, number> {
  const hanging = hangingFrom(flow, lines)
  const strip = new Map<NodeId, NodeId>()
  for (const id of flow.topological) {
    const [beside] = hanging.get(id) ?? []
    const own = strip.get(id) ?? id
    strip.set(id, own)
    if (beside !== undefined) strip.set(beside, own)
  }
  const stripOf = (id: NodeId): NodeId => strip.get(id) ?? id
  const edges: (readonly [NodeId, NodeId])[] = []
  const below = (upper: NodeId, lower: NodeId): void => {
    if (!late.has(upper) && !late.has(lower) && stripOf(upper) !== stripOf(lower)) edges.push([stripOf(upper), stripOf(lower)])
  }
  for (const { from, to, isLoop } of flow.links) if (!isLoop) below(from, to)
  for (const [id, heads] of hanging) stackBelow(flow, id, heads, below)
  const ranks = toRanks([...new Set(flow.order.filter((id) => !late.has(id)).map(stripOf))], edges)
  return new Map(flow.order.filter((id) => !late.has(id)).map((id) => [id, ranks.get(stripOf(id)) ?? 0]))
}

/** Ranks strips so that every edge goes down, as close to what they hang on as can be (dagre's tight tree; for very large charts its longest path). */
function toRanks(strips: readonly NodeId[], edges: readonly (readonly [NodeId, NodeId])[]): ReadonlyMap<NodeId, number> {
  const numberOf = new Map(strips.map((id, number) => [id, number]))
  const graph = new dagre.graphlib.Graph()
  graph.setGraph({ rankdir: 'TB', ranksep: 10, ranker: strips.length > 300 ? 'longest-path' : 'tight-tree' })
  strips.forEach((_, number) => graph.setNode(String(number), { width: 10, height: 10 }))
  const numbered = edges.map(([upper, lower]) => [numberOf.get(upper) ?? 0, numberOf.get(lower) ?? 0] as const)
  for (const [upper, lower] of essentialEdges(strips.length, numbered)) graph.setEdge(String(upper), String(lower), { minlen: 1 })
  dagre.layout(graph, { disableOptimalOrderHeuristic: true })
  const heightOf = (number: number): number => graph.node(String(number)).y ?? 0
  const heights = [...new Set(strips.map((_, number) => heightOf(number)))].toSorted((a, b) => a - b)
  const rankOf = new Map(heights.map((y, rank) => [y, rank]))
  return new Map(strips.map((id, number) => [id, rankOf.get(heightOf(number)) ?? 0]))
}

/** What hangs from one node is stacked, and its straight way on comes below all of it; a long side way runs beside it instead. */
function stackBelow(flow: ChartFlow, id: NodeId, heads: readonly NodeId[], below: (upper: NodeId, lower: NodeId) => void): void {
  const main = flow.mainOf.get(id)
  heads.forEach((head, place) => {
    const region = regionOf(flow, head)
    if (region.size >= longRegion) return
    const next = heads[place + 1]
    for (const member of region) {
      if (next !== undefined) below(member, next)
      if (main !== undefined && !region.has(main)) below(member, main)
    }
  })
}

/** The row of a node, or the next few below it, where the cell on its right is free; its own row where none is. */
function freeRowBelow({ row, column }: Cell, occupied: ReadonlySet<string>): number {
  const near = [row, row + 1, row + 2, row + 3]
  return near.find((candidate) => !occupied.has(`${candidate}/${column + 1}`)) ?? row
}

function toCells(flow: ChartFlow, lines: readonly Line[], late: ReadonlySet<NodeId>, rows: ReadonlyMap<NodeId, number>): ReadonlyMap<NodeId, Cell> {
  const cells = new Map<NodeId, Cell>()
  const occupied = new Set<string>()
  const place = (nodes: readonly NodeId[], rowOf: (id: NodeId) => number, least: number): void => {
    const first = Math.min(...nodes.map(rowOf))
    const last = Math.max(...nodes.map(rowOf))
    let column = least
    const isFree = (row: number): boolean => !occupied.has(`${row}/${column}`)
    while (!Array.from({ length: last - first + 1 }, (_, step) => first + step).every(isFree)) column += 1
    for (let row = first; row <= last; row += 1) occupied.add(`${row}/${column}`)
    for (const id of nodes) cells.set(id, { row: rowOf(id), column })
  }
  lines.forEach(({ nodes, parent }, index) => {
    if (nodes.some((id) => late.has(id))) return
    const beside = parent === null ? undefined : cells.get(parent)
    place(nodes, (id) => rows.get(id) ?? 0, beside === undefined ? Math.min(index, 1) : beside.column + 1)
  })
  for (const id of late) {
    const lowest = (flow.forwardInto.get(id) ?? []).flatMap(({ from }) => cells.get(from) ?? []).reduce((a, b) => (b.row > a.row ? b : a), { row: 0, column: 0 })
    const row = freeRowBelow(lowest, occupied)
    place([id], () => row, lowest.column + 1)
  }
  return cells
}
