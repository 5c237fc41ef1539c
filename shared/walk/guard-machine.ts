import type { AccessId, CautionId } from '#shared/lib/ids.ts'
import { actOfNodes, actOfOpening, pendingOf, type Pending } from './cautions.ts'
import type { EventOf } from './events.ts'
import { locateDecision } from './findings.ts'
import { changeAccess } from './metal.ts'
import { inOrder, pageNodes } from './page-nodes.ts'
import { accessOnStack, chartsOnStack, type PinnedCharts } from './pinned-charts.ts'
import { refuse, type Refusal } from './refusals.ts'
import type { OpenWalk } from './state.ts'

function areExactly(pending: readonly Pending[], ids: readonly CautionId[]): boolean {
  return pending.length > 0 && pending.length === ids.length && pending.every(({ caution }) => ids.includes(caution.id))
}

/**
 * The sets of cautions that may be acknowledged for a node: those of its page when the walk stands there, those of each access that could be opened
 * from there out of turn, and those of a check that is taken out of turn.
 */
function* acknowledgeable(charts: PinnedCharts, walk: OpenWalk, { node }: EventOf<'caution-acknowledged'>['payload']): Generator<readonly Pending[]> {
  const page = pageNodes(charts, walk)
  const isHere = node === walk.node || node === page?.target.position.node
  if (page && node === page.target.position.node && walk.phase === 'at-node')
    yield pendingOf(walk, actOfNodes(walk.metal, inOrder(page)), (read) => read === node)
  const check = locateDecision(charts, walk, node)
  if (!isHere && check && chartsOnStack(charts, walk).includes(check.index)) yield pendingOf(walk, actOfNodes(walk.metal, [check]), (read) => read === node)
  if (!isHere) return
  for (const index of chartsOnStack(charts, walk)) {
    for (const id of index.access.keys()) {
      if (!walk.metal.open.includes(id)) yield pendingOf(walk, actOfOpening(walk.metal, index, id), (read) => read !== null)
    }
  }
}

/** What speaks against cautions having been read: they are exactly those that wait. */
export function faultOfAcknowledgement(charts: PinnedCharts, walk: OpenWalk, { payload }: EventOf<'caution-acknowledged'>): Refusal | null {
  for (const pending of acknowledgeable(charts, walk, payload)) {
    if (areExactly(pending, payload.cautionIds)) return null
  }
  return refuse('not-the-pending-cautions', '/payload/cautionIds')
}

/** What speaks against one opening, with what is open at that moment. */
function faultOfOpening(charts: PinnedCharts, walk: OpenWalk, id: AccessId, open: readonly AccessId[], at: string): Refusal | null {
  const access = accessOnStack(charts, walk, id)
  if (access === undefined) return refuse('no-such-access', at)
  if (open.includes(id)) return refuse('already-open', at)
  if (!(access.needs ?? []).every((needed) => open.includes(needed))) return refuse('needs-not-open', at)
  return (access.excludes ?? []).some((excluded) => open.includes(excluded)) ? refuse('excluded-open', at) : null
}

/** What speaks against a change of access out of turn: what is closed is open, each opening has its needs open and its excludes closed, its cautions are read. */
export function faultOfAccess(charts: PinnedCharts, walk: OpenWalk, { payload }: EventOf<'access-changed'>): Refusal | null {
  const { opened, closed } = payload
  if (opened.length + closed.length === 0) return refuse('nothing-to-change', '/payload/opened')
  let open = walk.metal.open
  for (const [index, id] of closed.entries()) {
    if (!open.includes(id)) return refuse('not-open', `/payload/closed/${index}`)
    open = open.filter((other) => other !== id)
  }
  for (const [index, id] of opened.entries()) {
    const fault = faultOfOpening(charts, walk, id, open, `/payload/opened/${index}`)
    if (fault) return fault
    open = [...open, id]
  }
  const { changed } = changeAccess(walk.metal, () => undefined, opened, closed)
  const cautions = opened.flatMap((id) => cautionsOf(charts, walk, id))
  return pendingOf(walk, { cautions, changes: changed }, (read) => read !== null).length > 0 ? refuse('cautions-pending', '/payload/opened') : null
}

function cautionsOf(charts: PinnedCharts, walk: OpenWalk, id: AccessId) {
  const ids = accessOnStack(charts, walk, id)?.cautions ?? []
  return ids.flatMap((cautionId) =>
    chartsOnStack(charts, walk)
      .flatMap((index) => index.cautions.get(cautionId) ?? [])
      .slice(0, 1),
  )
}
