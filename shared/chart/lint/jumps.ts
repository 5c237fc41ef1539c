import type { ChartId } from '#shared/lib/ids.ts'
import { resolveJump } from '../chart-set.ts'
import { strongComponents, toDigraph, type Digraph } from '../digraph.ts'
import type { NodeOf } from '../document.ts'
import { nameOf, type LintContext, type Rule } from './context.ts'
import { remark, type Remark } from './remark.ts'

type Jump = NodeOf<'jump'>

/** Every jump arrives somewhere; one that returns has a way on and a way back, one that does not has neither. `missing` is the code for a chart that nobody has. */
export function jumps(missing: 'jump-chart-missing' | 'jump-chart-not-beside'): Rule {
  return function* (context) {
    for (const node of context.index.nodes.values()) {
      if (node.kind !== 'jump') continue
      yield* arrival(context, node, missing)
      yield* wayOn(context, node)
    }
  }
}

function* arrival({ index, charts }: LintContext, node: Jump, missing: 'jump-chart-missing' | 'jump-chart-not-beside'): Iterable<Remark> {
  const target = resolveJump(charts, node)
  if (target.found || target.why === 'pick') return
  const name = nameOf(index, node)
  if (target.why === 'no-chart-named')
    yield remark('jump-without-target', { node: node.id }, `${name} jumps nowhere. Name a chart, or let the person pick a symptom.`)
  else if (target.why === 'node-missing')
    yield remark(
      'jump-node-missing',
      { node: node.id },
      `${name} jumps to node ${node.at ?? ''} of chart ${node.chart ?? ''}, which has no such node. Name another.`,
    )
  else if (target.why === 'no-single-start')
    yield remark(
      'jump-node-missing',
      { node: node.id },
      `${name} jumps to chart ${node.chart ?? ''} without naming a node, but that chart does not have exactly one start. Name the node.`,
    )
  else if (missing === 'jump-chart-not-beside')
    yield remark(missing, { node: node.id }, `${name} jumps to chart ${node.chart ?? ''}, and no file beside this one holds it. It was not followed.`)
  else
    yield remark(
      missing,
      { node: node.id },
      `${name} jumps to chart ${node.chart ?? ''}, which has no published version yet. At the bench ${node.returns === true ? 'the walk goes on as if it had come back' : 'the walk ends with the lead'} until it has one.`,
    )
}

function* wayOn({ index, charts }: LintContext, node: Jump): Iterable<Remark> {
  const name = nameOf(index, node)
  const edges = index.edgesFrom.get(node.id) ?? []
  if (node.returns !== true) {
    if (edges.length > 0)
      yield remark(
        'one-way-jump-with-edge',
        { node: node.id, edge: { from: node.id } },
        `${name} does not come back, yet an edge leads on from it. Take the edge out, or let the jump return.`,
      )
    return
  }
  if (edges.length === 0)
    yield remark(
      'returning-jump-without-edge',
      { node: node.id, edge: { from: node.id } },
      `${name} comes back, but nothing follows it. Lead it to the next node.`,
    )
  const callee = node.chart === undefined ? undefined : charts.get(node.chart)
  if (node.pick !== undefined || (callee !== undefined && !callee.chart.nodes.some((other) => other.kind === 'back')))
    yield remark(
      'returning-jump-without-back',
      { node: node.id },
      `${name} waits to come back, but ${node.pick === undefined ? `chart "${callee?.chart.title ?? ''}" has no "back" node` : 'a picked symptom does not come back'}. Add one there, or let the jump not return.`,
    )
}

/** Charts may lead round to each other, but calls that come back may not call each other in a ring: nobody would ever be back. */
export const returningRings: Rule = function* ({ index, charts }) {
  const ids = [...charts.keys()]
  const calls = callsBetween(charts, ids)
  const { of } = strongComponents(calls)
  const numberOf = new Map(ids.map((id, number) => [id, number]))
  const own = numberOf.get(index.id) ?? 0
  const componentOf = (id: ChartId | undefined) => (id === undefined ? undefined : of[numberOf.get(id) ?? -1])
  for (const node of index.nodes.values()) {
    if (node.kind !== 'jump' || node.returns !== true || componentOf(node.chart) === undefined || componentOf(node.chart) !== of[own]) continue
    yield remark(
      'returning-ring',
      { node: node.id },
      `${nameOf(index, node)} calls chart ${node.chart ?? ''}, which ${node.chart === index.id ? 'is this chart itself' : 'calls this one again'}, and both wait to come back. Let one of these jumps not return.`,
    )
  }
  const elsewhere = ids.filter(
    (id, number) => of[number] !== of[own] && ids.some((other, at) => of[at] === of[number] && (other !== id || callsItself(calls, number))),
  )
  if (elsewhere.length > 0)
    yield remark(
      'returning-ring',
      {},
      `Charts joined to this one call each other in a ring, and all wait to come back: ${elsewhere.join(', ')}. Let one of their jumps not return.`,
    )
}

function callsBetween(charts: LintContext['charts'], ids: readonly ChartId[]): Digraph {
  const numberOf = new Map(ids.map((id, number) => [id, number]))
  const edges = ids.flatMap((id, from) =>
    (charts.get(id)?.chart.nodes ?? []).flatMap((node) => {
      const to = node.kind === 'jump' && node.returns === true && node.chart !== undefined ? numberOf.get(node.chart) : undefined
      return to === undefined ? [] : [[from, to] as const]
    }),
  )
  return toDigraph(ids.length, edges)
}

function callsItself(calls: Digraph, number: number): boolean {
  return calls.targets.subarray(calls.rows[number], calls.rows[number + 1]).includes(number)
}
