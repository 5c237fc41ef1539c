import type { NodeId, SafetyPartId } from '#shared/lib/ids.ts'
import { fitsHarm, type Harm, type SignalWord } from '#shared/trade/signal-words.ts'
import { reachableFrom, reverse } from '../digraph.ts'
import type { Caution, ChartNode } from '../document.ts'
import { isTerminator, successors } from '../graph.ts'
import { accessBehind } from './access.ts'
import { nameOf, type LintContext, type Rule } from './context.ts'
import { remark } from './remark.ts'

/** A safety part that a node puts out of action is put back on every way on. */
export const restoring: Rule = function* (context) {
  const { index } = context
  const defeating = [...index.nodes.values()].filter((node) => (node.defeats ?? []).length > 0)
  const backward = defeating.length === 0 ? undefined : reverse(context.graph.graph)
  const openEnds = new Map<SafetyPartId, Uint8Array>()
  for (const node of defeating) {
    for (const part of new Set(node.defeats)) {
      if (backward === undefined || node.restores?.includes(part) === true) continue
      const open = openEnds.get(part) ?? endsWithout(context, backward, part)
      openEnds.set(part, open)
      if (isTerminator(node) || successors(index, node).some((id) => open[context.graph.numberOf.get(id) ?? -1] === 1))
        yield remark(
          'defeated-never-restored',
          { node: node.id },
          `${nameOf(index, node)} puts ${part} out of action, and a way on from it never puts ${part} back. Restore it in this node, or in one that every way on passes.`,
        )
    }
  }
}

/** Marks the nodes from which an end can be reached without passing a node that restores the part. */
function endsWithout({ index, graph }: LintContext, backward: LintContext['graph']['graph'], part: SafetyPartId): Uint8Array {
  const nodeAt = (number: number) => index.nodes.get(graph.ids[number] ?? ('' as NodeId))
  const restores = Uint8Array.from(graph.ids, (_, number) => (nodeAt(number)?.restores?.includes(part) === true ? 1 : 0))
  const exits = graph.ids.flatMap((_, number) => {
    const node = nodeAt(number)
    return node !== undefined && isTerminator(node) ? [number] : []
  })
  return reachableFrom(backward, exits, restores)
}

/** A signal word says how badly a hazard can end (ANSI Z535.4-2007, 4.14), so it fits the harm and the words of the caution. */
export const signalWords: Rule = function* ({ chart }) {
  for (const caution of chart.cautions ?? []) {
    const fitting = fittingWord(caution.harm)
    if (!fitsHarm(caution.word, caution.harm))
      yield remark(
        'word-contradicts-harm',
        {},
        `Caution "${caution.hazard}" says ${caution.word}, but its harm is ${harmWords[caution.harm]}: that calls for ${fitting}. Change the word or the harm (ANSI Z535.4-2007, 4.14).`,
      )
    else if ((caution.word === 'CAUTION' || caution.word === 'NOTICE') && speaksOfDeath(caution))
      yield remark(
        'word-contradicts-harm',
        {},
        `Caution "${caution.hazard}" says ${caution.word}, but speaks of death or serious injury: that calls for WARNING or DANGER. Change the word or the text (ANSI Z535.4-2007, 4.14).`,
      )
  }
}

const harmWords: Readonly<Record<Harm, string>> = { death: 'death', 'serious-injury': 'serious injury', 'minor-injury': 'minor injury', damage: 'damage alone' }

function fittingWord(harm: Harm): SignalWord | 'WARNING or DANGER' {
  return harm === 'damage' ? 'NOTICE' : harm === 'minor-injury' ? 'CAUTION' : 'WARNING or DANGER'
}

function speaksOfDeath(caution: Caution): boolean {
  return /\b(?:death|serious injur(?:y|ies))\b/i.test(`${caution.hazard}\n${caution.consequence ?? ''}`)
}

/** Nobody meets a running engine unwarned: a caution that comes again when the engine starts stands on the node, its accesses or the chart. */
export const runningEngine: Rule = function* (context) {
  const { index, chart } = context
  if ((chart.cautions ?? []).some((caution) => caution.standing === true && comesWithTheEngine(caution))) return
  for (const node of index.nodes.values()) {
    if (node.machine !== 'running' || hasRunningCaution(context, node)) continue
    yield remark(
      'running-without-caution',
      { node: node.id },
      `${nameOf(index, node)} runs the engine, and no caution is shown when it starts. Add a caution with "running" among what brings it again, here or as a standing one.`,
    )
  }
}

function hasRunningCaution({ index }: LintContext, node: ChartNode): boolean {
  const named = [...(node.cautions ?? []), ...[...accessBehind(index, node.id)].flatMap((id) => index.access.get(id)?.cautions ?? [])]
  return named.some((id) => {
    const caution = index.cautions.get(id)
    return caution !== undefined && comesWithTheEngine(caution)
  })
}

function comesWithTheEngine(caution: Caution): boolean {
  return caution.again?.includes('running') === true
}
