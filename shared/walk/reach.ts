import { isDecision, isTerminator } from '#shared/chart/graph.ts'
import type { CauseId } from '#shared/lib/ids.ts'
import { locate, type PinnedCharts } from './pinned-charts.ts'
import { positionOf } from './record.ts'
import { lookAhead, waysOn, type Arrived } from './route.ts'
import { liveTrail, type TrailEntry, type WalkRecord } from './state.ts'

/** Whether a way ends elsewhere than at a ruled-out cause: at another cause, at any other terminator, or at a chart that is not there yet. */
function isOtherEnd(charts: PinnedCharts, walk: WalkRecord, ruledOut: ReadonlySet<CauseId>, { position, deadEnd }: Arrived): boolean {
  if (deadEnd !== null) return deadEnd === 'not-here-yet'
  const node = locate(charts, walk.pins, position.node)?.node
  if (node === undefined) return false
  return node.kind === 'cause' ? !ruledOut.has(node.causeId) : isTerminator(node)
}

/**
 * Where a walk stands after its cause turned out not to be it: the latest line of the trail whose node has an outcome that leads, not
 * through what is ruled out, to another cause or a terminator. `null` when there is none: then only the lead can help.
 */
export function otherWay(charts: PinnedCharts, walk: WalkRecord, ruledOut: ReadonlySet<CauseId>): TrailEntry | null {
  const leadsOn = (line: TrailEntry): boolean => {
    const node = locate(charts, walk.pins, line.position.node)?.node
    if (node === undefined || !isDecision(node)) return false
    for (const arrived of lookAhead(charts, walk, waysOn(charts, walk, line.position))) {
      if (isOtherEnd(charts, walk, ruledOut, arrived)) return true
    }
    return false
  }
  return liveTrail(walk).findLast(leadsOn) ?? null
}

/** The nearest proof of a suspect in reach of where the walk stands, by the fewest answers; `null` when no way leads to one. */
export function proofInReach(charts: PinnedCharts, walk: WalkRecord, suspect: CauseId): Arrived | null {
  const here: Arrived = { position: positionOf(walk), deadEnd: null, missing: [], passed: [], wentOneWay: false }
  for (const arrived of lookAhead(charts, walk, [here])) {
    const node = arrived.deadEnd === null ? locate(charts, walk.pins, arrived.position.node)?.node : undefined
    if (node?.kind === 'proof' && node.suspect === suspect) return arrived
  }
  return null
}
