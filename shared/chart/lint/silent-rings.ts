import type { NodeId } from '#shared/lib/ids.ts'
import { engineKinds, equipmentClasses, type EngineKind, type EquipmentClass } from '#shared/trade/equipment.ts'
import { resolveJump, type ChartSet, type JoinedNode } from '../chart-set.ts'
import { onCycle, strongComponents, toDigraph, type Digraph } from '../digraph.ts'
import type { ChartNode } from '../document.ts'
import { follow, isDecision, isForMachine, type ChartIndex } from '../graph.ts'
import { nameOf, type Rule } from './context.ts'
import { remark } from './remark.ts'

type Kind = { readonly class: EquipmentClass; readonly engine: EngineKind }
const kinds: readonly Kind[] = equipmentClasses.flatMap((name) => engineKinds.map((engine) => ({ class: name, engine })))

/**
 * No walk turns in a ring of nodes that take no event: starts, fixed jumps, `back`s, and nodes that are not for the
 * machine. Looked at across joined charts, and for each kind of machine that a node on such a ring tells apart.
 */
export const silentRings: Rule = function* ({ index, charts }) {
  const silent = silentNodes(charts)
  const ways = silentWays(charts, silent)
  const anyKind = ring(silent, ways, undefined)
  if (!onCycle(anyKind).includes(1)) return
  const { of } = strongComponents(anyKind)
  const marks = kinds.map((kind) => onCycle(ring(silent, ways, kind)))
  const told = new Set<number>()
  for (const [number, { chart, node }] of silent.entries()) {
    const component = of[number] ?? 0
    if (chart !== index || told.has(component) || !marks.some((mark) => mark[number] === 1)) continue
    told.add(component)
    yield remark(
      'silent-ring',
      { node: node.id },
      `From ${nameOf(index, node)} a walk comes back to the same place without anybody being asked anything: jumps, and nodes for other machines, lead round in a ring. Put a check or a step into the ring.`,
    )
  }
}

/** The nodes that a walk may pass without an event; a ring that matters consists of these alone. */
function silentNodes(charts: ChartSet): readonly JoinedNode[] {
  return [...charts.values()].flatMap((chart) =>
    [...chart.nodes.values()].flatMap((node) =>
      node.kind === 'start' || node.kind === 'jump' || node.kind === 'back' || node.onlyFor !== undefined ? [{ chart, node }] : [],
    ),
  )
}

/** Where a walk goes on from a node by itself: on a machine that the node is for, and on one that it is not for. */
type Ways = { readonly meant: readonly number[]; readonly other: readonly number[] }

/** The ways of every silent node; behind them, for every chart, those of its `back`s: the edges of the jumps that call it. */
function silentWays(charts: ChartSet, silent: readonly JoinedNode[]): readonly Ways[] {
  const numberOf = new Map(silent.map(({ node }, number) => [node, number]))
  const ids = [...charts.keys()]
  const hubOf = new Map(ids.map((id, place) => [id, silent.length + place]))
  const returns = ids.map((): number[] => [])
  const numbers = (chart: ChartIndex, targets: readonly NodeId[]) =>
    targets.flatMap((id) => {
      const node = chart.nodes.get(id)
      return (node === undefined ? undefined : numberOf.get(node)) ?? []
    })
  const edgesOf = (chart: ChartIndex, node: ChartNode) =>
    numbers(
      chart,
      (chart.edgesFrom.get(node.id) ?? []).map((edge) => edge.to),
    )
  const meant = (chart: ChartIndex, node: ChartNode): readonly number[] => {
    if (node.kind === 'start') return edgesOf(chart, node)
    if (node.kind === 'back') return [hubOf.get(chart.id) ?? 0]
    if (node.kind !== 'jump') return []
    const target = resolveJump(charts, node)
    if (!target.found) return node.returns === true && target.why === 'chart-missing' ? edgesOf(chart, node) : []
    if (node.returns === true) returns[(hubOf.get(target.chart.id) ?? 0) - silent.length]?.push(...edgesOf(chart, node))
    return numbers(target.chart, [target.node.id])
  }
  const ways = silent.map(({ chart, node }) => ({ meant: meant(chart, node), other: numbers(chart, passedWays(chart, node)) }))
  return [...ways, ...returns.map((targets) => ({ meant: targets, other: [] }))]
}

/** On another machine: to `otherwise`, else along the single normal edge. */
function passedWays(chart: ChartIndex, node: ChartNode): readonly NodeId[] {
  if (node.onlyFor === undefined) return []
  if (node.onlyFor.otherwise !== undefined) return [node.onlyFor.otherwise]
  const normal = isDecision(node) ? node.outcomes.filter((outcome) => outcome.normal === true) : []
  const to = normal.length === 1 ? follow(chart, node.id, normal[0]?.id) : undefined
  return to === undefined ? [] : [to]
}

/** The silent ways as a graph, for one kind of machine or (`undefined`) for all of them at once. */
function ring(silent: readonly JoinedNode[], ways: readonly Ways[], kind: Kind | undefined): Digraph {
  const edges = ways.flatMap(({ meant, other }, from) => {
    const node = silent[from]?.node
    const taken = kind === undefined ? [...meant, ...other] : node === undefined || isForMachine(node, kind) ? meant : other
    return taken.map((to) => [from, to] as const)
  })
  return toDigraph(ways.length, edges)
}
