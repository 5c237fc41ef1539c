import { isDecision, physicalCheck } from '#shared/chart/graph.ts'
import type { DecisionNode, ProofNode } from '#shared/chart/document.ts'
import type { EventId, Place } from '#shared/lib/ids.ts'
import { locate, placeOf, type Located, type PinnedCharts } from './pinned-charts.ts'
import { liveTrail, type Answer, type FindingLine, type Noticed, type SkipLine, type WalkRecord } from './state.ts'

/** A node with outcomes, with the chart that holds it. */
export interface LocatedDecision extends Located {
  readonly node: DecisionNode
}

/** The node at a place, if it has outcomes. */
export function locateDecision(charts: PinnedCharts, walk: WalkRecord, place: Place): LocatedDecision | null {
  const located = locate(charts, walk.pins, place)
  return located && isDecision(located.node) ? { index: located.index, node: located.node } : null
}

/** Whether two places ask the same physical check. */
function asksSameCheck(charts: PinnedCharts, walk: WalkRecord, place: Place, check: LocatedDecision): boolean {
  const other = locateDecision(charts, walk, place)
  return other !== null && physicalCheck(other.index, other.node) === physicalCheck(check.index, check.node)
}

/** What a proof compares with: a check or reading of its own chart; `null` when it compares with nothing. */
export function comparedWith({ index, node }: LocatedDecision): LocatedDecision | null {
  if (node.kind !== 'proof' || node.compares === undefined) return null
  const compared = index.nodes.get(node.compares.node)
  return compared && isDecision(compared) && compared.kind !== 'proof' ? { index, node: compared } : null
}

/** A finding that counts: who recorded what, and where. */
export interface Found {
  readonly eventId: EventId
  readonly place: Place
  readonly answer: Answer
}

/** All that counts as found so far, oldest first: findings of the trail, and what proofs took on their own page ahead of the change. */
export function listFound(charts: PinnedCharts, walk: WalkRecord): readonly Found[] {
  return liveTrail(walk).flatMap((line) => {
    if (line.kind !== 'finding') return []
    const own: Found = { eventId: line.eventId, place: line.position.node, answer: line.answer }
    if (line.before === null) return [own]
    const proof = locateDecision(charts, walk, line.position.node)
    const compared = proof && comparedWith(proof)
    if (!compared) return [own]
    return [{ eventId: line.eventId, place: placeOf(compared.index, compared.node.id), answer: line.before }, own]
  })
}

/** The latest finding of a physical check on the trail, by whichever of its nodes it was recorded; `null` when there is none. */
export function findingOf(charts: PinnedCharts, walk: WalkRecord, check: LocatedDecision): Found | null {
  return listFound(charts, walk).findLast((found) => asksSameCheck(charts, walk, found.place, check)) ?? null
}

/** What a proof still has to take before its change: the check or reading that it compares with, when that has no finding. */
export function beforeToTake(charts: PinnedCharts, walk: WalkRecord, proof: LocatedDecision): LocatedDecision | null {
  const compared = comparedWith(proof)
  return compared && findingOf(charts, walk, compared) === null ? compared : null
}

/** What was found before the change of a proof, by the trail; `null` when it compares with nothing, or that has no finding. */
export function foundBefore(charts: PinnedCharts, walk: WalkRecord, proof: LocatedDecision): Answer | null {
  const compared = comparedWith(proof)
  return compared && (findingOf(charts, walk, compared)?.answer ?? null)
}

/** An answer that is already there: noticed out of turn, or recorded before a step back. */
export type Offered = { readonly from: 'noticed'; readonly source: Noticed } | { readonly from: 'stepped-back'; readonly source: FindingLine }

/**
 * The answer that a check offers again when the walk arrives at it: the latest one noticed or spent by a step back. One that was recorded
 * since, and still counts, closes the matter: coming round again asks anew.
 */
export function offeredAnswer(charts: PinnedCharts, walk: WalkRecord, check: LocatedDecision): Offered | null {
  const isSame = (place: Place) => asksSameCheck(charts, walk, place, check)
  const findings = walk.trail.filter((line): line is FindingLine => line.kind === 'finding' && isSame(line.position.node))
  const sources = [
    ...findings.map((source) => ({ from: source.spent ?? ('live' as const), source })),
    ...walk.noticed.filter(({ node }) => isSame(node)).map((source) => ({ from: 'noticed' as const, source })),
  ]
  const latest = sources.reduce<(typeof sources)[number] | null>((best, next) => (best === null || next.source.seq > best.source.seq ? next : best), null)
  return latest?.from === 'noticed' || latest?.from === 'stepped-back' ? (latest as Offered) : null
}

/** What the answer on offer was held against when it was first recorded; `null` where it was no proof's. */
export function offeredAgainst(offered: Offered | null): Answer | null {
  return offered?.from === 'stepped-back' ? offered.source.heldAgainst : null
}

/** The checks that got no answer and still have none, in the order in which they were skipped. */
export function listSkipped(walk: WalkRecord): readonly SkipLine[] {
  return liveTrail(walk).filter((line): line is SkipLine => line.kind === 'skip')
}

/** Whether a node is a proof. */
export function isProof(node: DecisionNode): node is ProofNode {
  return node.kind === 'proof'
}
