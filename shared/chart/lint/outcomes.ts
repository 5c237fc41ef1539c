import type { NodeId } from '#shared/lib/ids.ts'
import type { DecisionNode } from '../document.ts'
import { isDecision, physicalCheck, type ChartIndex } from '../graph.ts'
import { nameOf, outcomeName, repeated, type Rule } from './context.ts'
import { remark } from './remark.ts'

/** Fewest and most outcomes of a check, and the number over which they are hard to take in. */
const fewest = 2
const most = 9
const comfortable = 5

/** Two to nine outcomes, each with words of its own. */
export const outcomes: Rule = function* ({ index }) {
  for (const node of index.nodes.values()) {
    if (!isDecision(node)) continue
    const count = node.outcomes.length
    const name = nameOf(index, node)
    if (count < fewest)
      yield remark('outcome-count', { node: node.id }, `${name} has ${count === 0 ? 'no outcome' : 'one outcome'}. Give it at least two, or make it a step.`)
    else if (count > most) yield remark('outcome-count', { node: node.id }, `${name} has ${count} outcomes; balloons go from 1 to 9. Split it into two checks.`)
    else if (count > comfortable)
      yield remark('many-outcomes', { node: node.id }, `${name} has ${count} outcomes. Two to five are easy to tell apart; two checks may serve better.`)
    for (const outcome of repeated(node.outcomes, ({ title }) => title.trim().toLowerCase()))
      yield remark(
        'outcome-titles-alike',
        { node: node.id, edge: { from: node.id, outcome: outcome.id } },
        `Two outcomes of ${name} read ${outcomeName(outcome)}. Word one of them so that they can be told apart.`,
      )
  }
}

/** Nodes that ask one physical check, in this chart or a joined one, offer the same outcomes. */
export const sameCheck: Rule = function* ({ index, charts }) {
  const firstOf = new Map<string, { readonly owner: ChartIndex; readonly node: DecisionNode; readonly key: string }>()
  for (const owner of [index, ...[...charts.values()].filter((other) => other !== index)]) {
    for (const { node, check } of sharedChecks(owner)) {
      const key = [...new Set(node.outcomes.map((outcome) => outcome.id))].sort().join(' ')
      const first = firstOf.get(check)
      if (first === undefined) firstOf.set(check, { owner, node, key })
      else if (first.key !== key && first.owner === index) {
        const [here, there, place] = owner === index ? [node, first.node, ''] : [first.node, node, ` of chart "${owner.chart.title}"`]
        yield remark(
          'same-check-other-outcomes',
          { node: here.id },
          `${nameOf(index, here)} is the same check as ${nameOf(owner, there)}${place}, but its outcomes have other ids. Give both the same outcome ids, or make them two checks.`,
        )
      }
    }
  }
}

/** The nodes of a chart whose check another node may ask too: those with a `checkId`, a `sameAs`, or one that a `sameAs` names. */
function sharedChecks(owner: ChartIndex): { readonly node: DecisionNode; readonly check: string }[] {
  const named = new Set<NodeId>()
  for (const node of owner.nodes.values()) if (isDecision(node) && node.sameAs !== undefined) named.add(node.id).add(node.sameAs)
  const known = new Map<NodeId, string>()
  const shared: { node: DecisionNode; check: string }[] = []
  for (const node of owner.nodes.values()) {
    if (isDecision(node) && (node.checkId !== undefined || named.has(node.id))) shared.push({ node, check: physicalCheck(owner, node, known) })
  }
  return shared
}
