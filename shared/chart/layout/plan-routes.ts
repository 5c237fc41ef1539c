import type { NodeId } from '#shared/lib/ids.ts'
import type { ChartFlow, FlowLink } from './flow.ts'
import type { Cell } from './grid.ts'

/**
 * The sheet between the cells: upright channel `k` runs left of column `k`, level channel `k` above row `k`. A leg is the part of a
 * route that runs along one channel; legs of one `net` may share a track, so that ways to one node join and ways out of one side fan out.
 */
export interface Leg {
  readonly way: 'upright' | 'level'
  readonly channel: number
  readonly net: string
}

/** Where a route leaves or enters a node. */
export type Side = 'top' | 'bottom' | 'left' | 'right'

/** A route before it has measures: it leaves by a side, runs along its legs, turning at each, and enters by a side. */
export interface PlannedRoute {
  readonly link: FlowLink
  readonly leave: Side
  /** Counts the routes that leave by the same side apart from each other, from 0; 0 is the middle of the side. */
  readonly leaveSlot: number
  readonly enter: Side
  readonly legs: readonly Leg[]
  /** Where its balloons sit: by the side it leaves, on its first leg, or before the node it enters. */
  readonly balloons: 'leaving' | 'first-leg' | 'entering' | 'beside'
}

/** Return ways past so many rows run outside on the left, where they cross nothing that leaves to the right. */
const longReturn = 4

/** Plans every link on the grid: straight where nothing stands between, else along the channels, never through a cell that is taken. */
export function planRoutes(flow: ChartFlow, cells: ReadonlyMap<NodeId, Cell>): readonly PlannedRoute[] {
  const taken = new Set([...cells.values()].map(({ row, column }) => `${row}/${column}`))
  const plans = flow.links.flatMap((link) => {
    const from = cells.get(link.from)
    const to = cells.get(link.to)
    return from === undefined || to === undefined ? [] : [{ link, ...planRoute({ flow, link, from, to, taken }) }]
  })
  return withSlots(flow, plans)
}

/**
 * Parts the routes that leave one side of one node. All that leave to the right leave as one and fan out; so do several that leave to the left, each
 * with its balloon on its own track then.
 */
function withSlots(flow: ChartFlow, plans: readonly (Plan & { readonly link: FlowLink })[]): readonly PlannedRoute[] {
  const sideOf = (plan: Plan & { readonly link: FlowLink }): string => `${plan.link.from} ${plan.leave}`
  const straight = new Set(plans.filter(({ legs }) => legs.length === 0).map(sideOf))
  const leaving = new Map<string, number>()
  for (const plan of plans) leaving.set(sideOf(plan), (leaving.get(sideOf(plan)) ?? 0) + 1)
  const next = new Map<string, number>()
  return plans.map((plan) => {
    const side = sideOf(plan)
    if (plan.leave === 'left') return { ...plan, leaveSlot: 1, balloons: (leaving.get(side) ?? 1) > 1 ? 'first-leg' : plan.balloons }
    const isMiddle = plan.leave === 'right' || plan.legs.length === 0 || (isMain(flow, plan.link) && !straight.has(side))
    const slot = isMiddle ? 0 : (next.get(side) ?? 1)
    if (!isMiddle) next.set(side, slot + 1)
    return { ...plan, leaveSlot: slot }
  })
}

interface Situation {
  readonly flow: ChartFlow
  readonly link: FlowLink
  readonly from: Cell
  readonly to: Cell
  readonly taken: ReadonlySet<string>
}
type Plan = Omit<PlannedRoute, 'link' | 'leaveSlot'>

function isMain(flow: ChartFlow, link: FlowLink): boolean {
  return flow.mainOf.get(link.from) === link.to && !link.isLoop
}

function planRoute(situation: Situation): Plan {
  const { from, to, link } = situation
  if (link.isLoop || to.row < from.row || (to.row === from.row && to.column <= from.column)) return upwards(situation)
  if (to.column > from.column) return toTheRight(situation)
  return to.column === from.column ? straightDown(situation) : toTheLeft(situation)
}

function isRowFree({ from, to, taken }: Situation, row: number): boolean {
  for (let column = from.column + 1; column < to.column; column += 1) if (taken.has(`${row}/${column}`)) return false
  return true
}

function isColumnFree({ from, to, taken }: Situation): boolean {
  for (let row = from.row + 1; row < to.row; row += 1) if (taken.has(`${row}/${from.column}`)) return false
  return true
}

const upright = (channel: number, net: string): Leg => ({ way: 'upright', channel, net })
const level = (channel: number, net: string): Leg => ({ way: 'level', channel, net })

/** Back up, on the left of the column it returns to. */
function upwards({ link, from, to }: Situation): Plan {
  const net = `back to ${link.to}`
  const lane = upright(to.column, net)
  if (from.column === 0 && to.column === 0 && to.row < from.row) return { leave: 'left', enter: 'left', legs: [lane], balloons: 'leaving' }
  return { leave: 'bottom', enter: 'left', legs: [level(from.row + 1, `out of ${link.from} ${link.to}`), lane], balloons: 'leaving' }
}

function toTheRight(situation: Situation): Plan {
  const { flow, link, from, to } = situation
  const hangs = (flow.forwardInto.get(link.to)?.length ?? 0) === 1
  if (from.row === to.row && isRowFree(situation, from.row)) return { leave: 'right', enter: 'left', legs: [], balloons: 'beside' }
  const own = `${link.from} to ${link.to}`
  if (from.row === to.row) return { leave: 'right', enter: 'top', legs: [upright(from.column + 1, own), level(to.row, `top of ${link.to}`)], balloons: 'first-leg' }
  if (hangs && isRowFree(situation, to.row)) {
    return { leave: 'right', enter: 'left', legs: [upright(from.column + 1, `right of ${link.from}`)], balloons: 'entering' }
  }
  return { leave: 'right', enter: 'top', legs: [upright(from.column + 1, own), level(to.row, `top of ${link.to}`)], balloons: 'first-leg' }
}

function straightDown(situation: Situation): Plan {
  const { link, from, to } = situation
  if (isColumnFree(situation)) return { leave: 'bottom', enter: 'top', legs: [], balloons: 'leaving' }
  const net = `left of ${link.to}`
  if (from.column === 0) return { leave: 'left', enter: 'left', legs: [upright(0, net)], balloons: 'leaving' }
  return {
    leave: 'bottom',
    enter: 'top',
    legs: [level(from.row + 1, `out of ${link.from} ${link.to}`), upright(from.column, `top of ${link.to}`), level(to.row, `top of ${link.to}`)],
    balloons: 'leaving',
  }
}

function toTheLeft(situation: Situation): Plan {
  const { link, from, to } = situation
  const join = level(to.row, `top of ${link.to}`)
  if (isColumnFree(situation)) return { leave: 'bottom', enter: 'top', legs: [join], balloons: 'leaving' }
  const out = level(from.row + 1, `out of ${link.from} ${link.to}`)
  if (to.column === 0 && to.row - from.row > longReturn) {
    return { leave: 'bottom', enter: 'left', legs: [out, upright(0, `left of ${link.to}`)], balloons: 'leaving' }
  }
  return { leave: 'bottom', enter: 'top', legs: [out, upright(from.column, `top of ${link.to}`), join], balloons: 'leaving' }
}
