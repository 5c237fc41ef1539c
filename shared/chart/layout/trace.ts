import type { NodeId } from '#shared/lib/ids.ts'
import type { Leg, PlannedRoute } from './plan-routes.ts'
import { balloonPitch, balloonRadius, type NodeSize, type PlacedNode, type Point, type RoutedLink } from './sheet.ts'

/** From the bottom of a box to its balloon. */
const balloonDrop = 17
/** How far below the middle of its left side ways out leave a node. */
const sideSlot = 14

/** What a route needs to get its corners: its ends, its exit, where the track of each leg lies, and where the column right of its first node begins. */
interface Tracing {
  readonly from: PlacedNode
  readonly to: PlacedNode
  readonly exit: Exit
  readonly trackAt: (leg: Leg) => number
  readonly nextColumn: number
}

/** The corners and balloons of a planned route. */
export function trace(route: PlannedRoute, { from, to, exit, trackAt, nextColumn }: Tracing): RoutedLink {
  const points: Point[] = [leavingPoint(route, exit, from)]
  route.legs.forEach((leg) => {
    const last = points.at(-1) ?? { x: 0, y: 0 }
    const at = trackAt(leg)
    points.push(leg.way === 'upright' ? { x: at, y: last.y } : { x: last.x, y: at })
  })
  const end = enteringPoint(route, to)
  const last = points.at(-1) ?? end
  const lastLeg = route.legs.at(-1)
  if (lastLeg !== undefined) points.push(lastLeg.way === 'upright' ? { x: last.x, y: end.y } : { x: end.x, y: last.y })
  points.push(end)
  return { link: route.link, points, balloons: balloonsOf(route, exit, points, nextColumn) }
}

/** Where a route leaves its side: px from the middle, and which balloon row below the side its balloons begin and end in. */
export interface Exit {
  readonly offset: number
  readonly first: number
  readonly last: number
  /** Balloons stand under one another instead of side by side. */
  readonly isStacked: boolean
}
/** The middle of a side. */
export const middleExit: Exit = { offset: 0, first: 0, last: 0, isStacked: false }

/** Slots 0, 1, 2, 3 … lie in the middle, right, left, further right. */
function stepsOf(slot: number): number {
  return Math.ceil(slot / 2) * (slot % 2 === 1 ? 1 : -1)
}

/**
 * Spreads the ways out of each bottom along it, balloons side by side; where they are too many for its width they move together, and the balloons
 * of neighbours then stand in different rows. Ways out of a left side sit a little below its middle, where nothing enters.
 */
export function placeExits(routes: readonly PlannedRoute[], sizeOf: (id: NodeId) => NodeSize): ReadonlyMap<PlannedRoute, Exit> {
  const exits = new Map<PlannedRoute, Exit>()
  const bottoms = new Map<NodeId, PlannedRoute[]>()
  for (const route of routes) {
    if (route.leave === 'left') exits.set(route, { ...middleExit, offset: sideSlot })
    if (route.leave === 'bottom') bottoms.set(route.link.from, [...(bottoms.get(route.link.from) ?? []), route])
  }
  for (const [id, group] of bottoms) {
    const most = Math.max(1, ...group.map(({ link }) => link.outcomes.length))
    const steps = Math.max(...group.map(({ leaveSlot }) => Math.abs(stepsOf(leaveSlot))))
    const half = sizeOf(id).width / 2 - 12
    const wide = most * balloonPitch + 11
    const isStacked = steps > 0 && steps * wide + ((most - 1) / 2) * balloonPitch + balloonRadius > sizeOf(id).width / 2
    for (const route of group) {
      const step = stepsOf(route.leaveSlot)
      const first = isStacked ? (Math.abs(step) % 2) * most : 0
      const last = isStacked ? first + Math.max(1, route.link.outcomes.length) - 1 : 0
      exits.set(route, { offset: step * (isStacked ? half / steps : wide), first, last, isStacked })
    }
  }
  return exits
}

function leavingPoint({ leave }: PlannedRoute, { offset }: Exit, node: PlacedNode): Point {
  const middle = { x: node.x + node.width / 2, y: node.y + node.height / 2 }
  switch (leave) {
    case 'right':
      return { x: node.x + node.width, y: middle.y }
    case 'left':
      return { x: node.x, y: middle.y + offset }
    case 'top':
      return { x: middle.x, y: node.y - node.above }
    case 'bottom':
      return { x: middle.x + offset, y: node.y + node.height }
  }
}

function enteringPoint({ enter }: PlannedRoute, node: PlacedNode): Point {
  const middle = { x: node.x + node.width / 2, y: node.y + node.height / 2 }
  switch (enter) {
    case 'right':
      return { x: node.x + node.width, y: middle.y }
    case 'left':
      return { x: node.x, y: middle.y }
    case 'top':
      return { x: middle.x, y: node.y - node.above }
    case 'bottom':
      return { x: middle.x, y: node.y + node.height }
  }
}

function balloonsOf({ link, leave, balloons }: PlannedRoute, exit: Exit, points: readonly Point[], nextColumn: number): readonly Point[] {
  const [first = { x: 0, y: 0 }, second = first, third = second] = points
  const onwards = third.y < second.y ? -1 : 1
  const end = points.at(-1) ?? first
  const count = link.outcomes.length
  const spread = (place: number): number => (place - (count - 1) / 2) * balloonPitch
  return link.outcomes.map((_, place) => {
    switch (balloons) {
      case 'beside':
        return { x: nextColumn - 28 - (count - 1 - place) * balloonPitch, y: first.y }
      case 'entering':
        return { x: end.x - 28 - (count - 1 - place) * balloonPitch, y: end.y }
      case 'first-leg':
        return { x: second.x, y: second.y + onwards * (20 + place * balloonPitch) }
      case 'leaving':
        if (leave === 'left') return { x: first.x - 18 - place * balloonPitch, y: first.y }
        return exit.isStacked ? { x: first.x, y: first.y + balloonDrop + (exit.first + place) * balloonPitch } : { x: first.x + spread(place), y: first.y + balloonDrop }
    }
  })
}
