import type { NodeId } from '#shared/lib/ids.ts'
import type { ChartNode, DecisionNode, NodeOf, Outcome } from '../document.ts'
import { follow, isDecision, isTerminator, successors, type ChartIndex } from '../graph.ts'
import { nameOf, nameOfId, outcomeName, type LintContext, type Rule } from './context.ts'
import { remark } from './remark.ts'

/**
 * From every start a walk first comes to exactly one check that reproduces the symptom. A chart that is called and comes
 * back is spared, since its caller has reproduced it, and so is a printed table.
 */
export const reproducing: Rule = function* (context) {
  const { index, chart } = context
  if (chart.basis === 'printed-table') return
  for (const node of index.nodes.values()) {
    if (reproduces(node) && !node.outcomes.some((outcome) => outcome.reproduced === true))
      yield remark(
        'nothing-reproduced',
        { node: node.id },
        `${nameOf(index, node)} is to reproduce the symptom, but none of its outcomes says that it did. Mark those that do.`,
      )
  }
  if (chart.nodes.some((node) => node.kind === 'back')) return
  const firsts = firstReproducing(context)
  for (const start of index.starts) {
    const found = firsts.get(start.id) ?? []
    if (found.length === 0)
      yield remark(
        'start-without-reproducing-check',
        { node: start.id },
        `No check after ${nameOf(index, start)} reproduces the symptom before something is proved. Add one, and mark it as the check that reproduces.`,
      )
    else if (found.length > 1)
      yield remark(
        'start-with-several-reproducing-checks',
        { node: start.id },
        `After ${nameOf(index, start)} more than one check can reproduce the symptom, ${found.map((id) => nameOfId(index, id)).join(' and ')} among them. Keep the mark on one.`,
      )
  }
}

function reproduces(node: ChartNode): node is Exclude<DecisionNode, NodeOf<'proof'>> {
  return (node.kind === 'check' || node.kind === 'reading') && node.reproduces === true
}

/**
 * For every node the reproducing checks that a walk can meet from there before a proof or a cause, two at most. Behind a
 * reproducing check only what was reproduced counts: what it does instead may be another start's symptom. Carried
 * backwards from the checks, so that many starts cost no more than one.
 */
function firstReproducing(context: LintContext): ReadonlyMap<NodeId, readonly NodeId[]> {
  const found = new Map<NodeId, NodeId[]>()
  const stack = [...context.index.nodes.values()].filter(reproduces).map((node) => ({ at: node.id, check: node.id }))
  for (let next = stack.pop(); next !== undefined; next = stack.pop()) {
    const { at, check } = next
    const known = found.get(at) ?? []
    if (known.length === 2 || known.includes(check)) continue
    found.set(at, [...known, check])
    for (const id of leadingInto(context, at)) stack.push({ at: id, check })
  }
  return found
}

/** The nodes from which a walk that is still reproducing comes to a node. */
function leadingInto({ index, passedFrom, jumpsInto }: LintContext, to: NodeId): NodeId[] {
  const byEdge = (index.edgesInto.get(to) ?? []).filter(({ from, outcome }) => {
    const node = index.nodes.get(from)
    if (node === undefined || node.kind === 'proof' || node.kind === 'cause') return false
    return !reproduces(node) || node.outcomes.some((other) => other.id === outcome && other.reproduced === true)
  })
  return [...byEdge.map(({ from }) => from), ...(passedFrom.get(to) ?? []), ...(jumpsInto.get(to) ?? [])]
}

/** Where every answer is as it should be, the chart has found nothing: that route ends with the lead, on hold or back at the caller, never in a cause. */
export const allGood: Rule = function* ({ index, graph }) {
  const seen = new Uint8Array(graph.ids.length)
  const stack: ChartNode[] = []
  const enter = (id: NodeId): ChartNode | undefined => {
    const node = index.nodes.get(id)
    const number = graph.numberOf.get(id) ?? 0
    if (node !== undefined && seen[number] === 0 && !isTerminator(node)) stack.push(node)
    seen[number] = 1
    return node
  }
  for (const start of index.starts) enter(start.id)
  for (let node = stack.pop(); node !== undefined; node = stack.pop()) {
    for (const { outcome, to } of goodWays(index, node)) {
      const target = enter(to)
      if (target?.kind !== 'cause') continue
      const found = outcome === undefined ? '' : `, ${outcomeName(outcome)} included`
      yield remark(
        'all-good-route',
        { node: to, edge: { from: node.id, ...(outcome === undefined ? {} : { outcome: outcome.id }) } },
        `Everything is as it should be${found}, and yet the walk ends in cause ${nameOf(index, target)}. Lead it to the lead, on hold or back instead.`,
      )
    }
  }
}

/** The ways on while nothing is wrong but the symptom: reproduced, normal or serviceable, not confirmed; past nodes for other machines. */
function goodWays(index: ChartIndex, node: ChartNode): readonly { readonly outcome?: Outcome; readonly to: NodeId }[] {
  if (!isDecision(node)) return successors(index, node).map((to) => ({ to }))
  const good = node.outcomes.filter((outcome) => {
    if (node.kind === 'proof') return outcome.confirms !== true
    return reproduces(node) ? outcome.reproduced === true : outcome.normal === true || outcome.serviceable === true
  })
  const passed = node.onlyFor?.otherwise
  return [
    ...good.flatMap((outcome) => {
      const to = follow(index, node.id, outcome.id)
      return to === undefined ? [] : [{ outcome, to }]
    }),
    ...(passed === undefined ? [] : [{ to: passed }]),
  ]
}
