import { isDecision } from '#shared/chart/graph.ts'
import type { AccessId } from '#shared/lib/ids.ts'
import { beforeToTake, isProof, type LocatedDecision } from './findings.ts'
import { enter } from './metal.ts'
import { locate, type Located, type PinnedCharts } from './pinned-charts.ts'
import { goOn } from './route.ts'
import type { Metal, Position, WalkRecord } from './state.ts'

/** A node on a page, and the position at which it stands. */
export interface PageNode extends Located {
  readonly position: Position
}

/** The nodes of one page: harmless steps to be done first, what a proof still has to take, and the node whose page it is. */
export interface PageNodes {
  readonly lines: readonly PageNode[]
  readonly before: LocatedDecision | null
  readonly target: PageNode
}

/** Most steps that stand on the page of the check that they prepare. */
const mostLines = 3

/**
 * Whether a step can stand on another page: no caution of its own or of what it opens, no timer, nothing that it puts out of action or back into it.
 * Who leaves the check of a page unanswered passes over the steps on it, and a safety part must not stay off that way.
 */
function isHarmless({ index, node }: Located, opened: readonly AccessId[]): boolean {
  const opensWithCaution = opened.some((id) => (index.access.get(id)?.cautions?.length ?? 0) > 0)
  const changesSafety = (node.defeats?.length ?? 0) > 0 || (node.restores?.length ?? 0) > 0
  return node.kind === 'step' && !node.cautions?.length && node.timer === undefined && !changesSafety && !opensWithCaution
}

/** The check that up to three steps lead to, with these steps; `null` where one of them has to stand on a page of its own. */
function checkAhead(charts: PinnedCharts, walk: WalkRecord, from: PageNode, isLine: typeof isHarmless): { lines: PageNode[]; target: PageNode } | null {
  const lines: PageNode[] = []
  let metal: Metal = walk.metal
  let here = from
  while (!isDecision(here.node)) {
    const done = enter(metal, here)
    if (lines.length === mostLines || !isLine(here, done.opened)) return null
    lines.push(here)
    metal = done.metal
    const next = goOn(charts, walk, here.position)
    const located = next.deadEnd === null ? locate(charts, walk.pins, next.position.node) : null
    if (located === null) return null
    here = { ...located, position: next.position }
  }
  return { lines, target: here }
}

/** The nodes of the page at a position; `null` when the walk's charts do not hold it. */
export function pageNodesAt(charts: PinnedCharts, walk: WalkRecord, position: Position): PageNodes | null {
  const located = locate(charts, walk.pins, position.node)
  if (located === null) return null
  const here: PageNode = { ...located, position }
  const { lines, target } = checkAhead(charts, walk, here, isHarmless) ?? { lines: [], target: here }
  const { index, node } = target
  const before = isDecision(node) && isProof(node) ? beforeToTake(charts, walk, { index, node }) : null
  return { lines, before, target }
}

/**
 * The check that is left unanswered where the walk stands, past whatever steps lead to it. Which steps can be passed is for the guard to say: a skip that
 * it took once, when other steps stood on the page, stays a fact.
 */
export function checkToSkip(charts: PinnedCharts, walk: WalkRecord): PageNode | null {
  const located = locate(charts, walk.pins, walk.node)
  const here = located && { ...located, position: { node: walk.node, calls: walk.calls } }
  return here && (checkAhead(charts, walk, here, ({ node }) => node.kind === 'step')?.target ?? null)
}

/** The nodes of the page on which the walk stands. */
export function pageNodes(charts: PinnedCharts, walk: WalkRecord): PageNodes | null {
  return pageNodesAt(charts, walk, { node: walk.node, calls: walk.calls })
}

/** The nodes of a page in the order in which they are done. */
export function inOrder({ lines, before, target }: PageNodes): readonly Located[] {
  return [...lines, ...(before ? [before] : []), target]
}
