import type { NodeId } from '#shared/lib/ids.ts'
import type { ChartEdge, ChartNode, NodeOf, ProofNode } from '../document.ts'
import { isDecision } from '../graph.ts'
import { nameOf, type LintContext, type Rule } from './context.ts'
import { edgeAt, remark, type Remark } from './remark.ts'

/** A proof names its suspect, has one outcome that confirms it, and compares with a check or a reading. */
export const proofs: Rule = function* ({ index }) {
  for (const node of index.nodes.values()) {
    if (node.kind !== 'proof') continue
    const name = nameOf(index, node)
    if (node.suspect === undefined) yield remark('proof-without-suspect', { node: node.id }, `${name} does not say which cause it proves. Name the suspect.`)
    const confirming = node.outcomes.filter((outcome) => outcome.confirms === true).length
    if (confirming !== 1)
      yield remark(
        'proof-confirming-outcomes',
        { node: node.id },
        `${name} has ${confirming === 0 ? 'no outcome that confirms' : `${confirming} outcomes that confirm`} its suspect. Mark exactly one.`,
      )
    yield* comparison(index, node)
  }
}

function* comparison(index: LintContext['index'], node: ProofNode): Iterable<Remark> {
  const compared = node.compares === undefined ? undefined : index.nodes.get(node.compares.node)
  if (node.compares === undefined || compared === undefined) return
  if (compared.kind !== 'reading' && compared.kind !== 'check') {
    yield remark(
      'proof-compares-wrongly',
      { node: node.id },
      `${nameOf(index, node)} compares with ${nameOf(index, compared)}, which is neither a check nor a reading. Name one that is.`,
    )
    return
  }
  for (const id of node.compares.confirmsWhen ?? []) {
    if (!compared.outcomes.some((outcome) => outcome.id === id))
      yield remark(
        'unknown-outcome',
        { node: node.id },
        `${nameOf(index, node)} confirms when ${nameOf(index, compared)} gives outcome ${id}, which it does not have. Add the outcome, or name another.`,
      )
  }
}

/** Nothing is called a cause before a proof has confirmed it; looked at over the steps in between. A printed table has no proofs. */
export const causesProven: Rule = function* (context) {
  if (context.chart.basis === 'printed-table') return
  for (const node of context.index.nodes.values()) if (node.kind === 'cause' && !isProven(context, node)) yield* unproven(context, node)
}

/** The usual case at a glance: nothing but its own proofs leads to the cause. */
function isProven({ index, passedFrom }: LintContext, cause: NodeOf<'cause'>): boolean {
  if (passedFrom.has(cause.id)) return false
  return (index.edgesInto.get(cause.id) ?? []).every((edge) => {
    const from = index.nodes.get(edge.from)
    return from !== undefined && confirms(from, edge, cause)
  })
}

function* unproven({ index, isReached, passedFrom }: LintContext, cause: NodeOf<'cause'>): Iterable<Remark> {
  const seen = new Set<NodeId>([cause.id])
  for (const id of seen) {
    for (const edge of index.edgesInto.get(id) ?? []) {
      const from = index.nodes.get(edge.from)
      if (from === undefined || !isReached(edge.from)) continue
      if (from.kind === 'step') seen.add(from.id)
      else if (!confirms(from, edge, cause)) yield withoutProof(index, cause, from, edge)
    }
    for (const source of passedFrom.get(id) ?? []) {
      const from = index.nodes.get(source)
      if (from !== undefined && isReached(source)) yield withoutProof(index, cause, from, undefined)
    }
  }
}

function confirms(from: ChartNode, edge: ChartEdge, cause: NodeOf<'cause'>): boolean {
  return from.kind === 'proof' && from.suspect === cause.causeId && from.outcomes.some((outcome) => outcome.id === edge.outcome && outcome.confirms === true)
}

function withoutProof(index: LintContext['index'], cause: NodeOf<'cause'>, from: ChartNode, edge: ChartEdge | undefined): Remark {
  const at = { node: cause.id, ...(edge === undefined ? {} : { edge: edgeAt(edge) }) }
  const by = edge === undefined ? `${nameOf(index, from)} on another machine` : nameOf(index, from)
  return remark(
    'cause-without-proof',
    at,
    `A walk comes to cause ${nameOf(index, cause)} from ${by} without proof. Put a proof of it in between, by sight if it can be seen.`,
  )
}

/** Whoever proves a cause knows how to put it right. */
export const remedies: Rule = function* ({ chart }) {
  for (const cause of chart.library.causes ?? []) {
    if (cause.contributing !== true && cause.remedy === undefined)
      yield remark('cause-without-remedy', {}, `Cause "${cause.title}" has no fix. Say what puts it right, and how many minutes that takes.`)
  }
}

/** A proof right after a check behind a cover lists what must be off, else it is charged as made on a closed machine. */
export const proofAccess: Rule = function* (context) {
  for (const node of context.index.nodes.values()) {
    if (node.kind !== 'proof' || lists(node) || (node.closed ?? []).length > 0) continue
    const before = checkBefore(context, node.id)
    if (before !== undefined)
      yield remark(
        'proof-without-access',
        { node: node.id },
        `${nameOf(context.index, node)} lists nothing that must be off, though ${nameOf(context.index, before)} before it does. It counts as made on a closed machine: list what is off, if it is.`,
      )
  }
}

function lists(node: ChartNode): boolean {
  return (node.needs ?? []).length > 0 || (node.needsOneOf ?? []).length > 0
}

/** The first check that leads to a node, over steps, and lists what must be off. */
function checkBefore({ index }: LintContext, id: NodeId): ChartNode | undefined {
  const seen = new Set<NodeId>([id])
  for (const at of seen) {
    for (const edge of index.edgesInto.get(at) ?? []) {
      const from = index.nodes.get(edge.from)
      if (from?.kind === 'step') seen.add(from.id)
      else if (from !== undefined && isDecision(from) && from.kind !== 'proof' && lists(from)) return from
    }
  }
  return undefined
}
