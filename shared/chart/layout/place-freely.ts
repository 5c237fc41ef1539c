import type { NodeId } from '#shared/lib/ids.ts'
import type { ChartDocument } from '../document.ts'
import type { ChartFlow, FlowLink } from './flow.ts'
import { balloonPitch, type ChartLayout, type NodeSize, type PlacedNode, type Point, type RoutedLink } from './sheet.ts'
import type { Side } from './plan-routes.ts'

const margin = 24
/** Room between a box and a line that runs past it. */
const clearance = 18
/** From the bottom of a box to the first level part of a line, so that the balloon fits above it. */
const drop = 34

/** The places that a document gives, when it gives one for every node; `null` when the picture has to find them itself. */
export function givenPlaces(chart: ChartDocument, flow: ChartFlow): ReadonlyMap<NodeId, Point> | null {
  const { positions } = chart
  if (positions === undefined || flow.order.length === 0) return null
  const places = new Map<NodeId, Point>()
  for (const id of flow.order) {
    const place = Object.hasOwn(positions, id) ? positions[id] : undefined
    if (place === undefined) return null
    places.set(id, place)
  }
  return places
}

/** A way from side to side, still without the points where it begins and ends. */
interface Candidate {
  readonly leave: Side
  readonly enter: Side
  /** Corners between the ends: each turns the line, upright and level in turn. */
  readonly through: readonly number[]
  /** px from the middle of its side at which the line leaves so that it runs straight into the other end. */
  readonly shift?: number
}

/**
 * Keeps nodes where the document puts them (left top corners) and draws every link by the best of a few plain ways: the one that crosses fewest
 * boxes, then fewest lines, then with the fewest corners and the least length. What is not the straight way prefers the sides; ways back stay on the left.
 */
export function placeFreely(flow: ChartFlow, places: ReadonlyMap<NodeId, Point>, sizeOf: (id: NodeId) => NodeSize): ChartLayout {
  const left = Math.min(...[...places.values()].map(({ x }) => x))
  const top = Math.min(...[...places].map(([id, { y }]) => y - sizeOf(id).above))
  const lanes = flow.links.filter(({ isLoop }) => isLoop).length
  const shift = { x: margin + 40 + lanes * 12 - left, y: margin - top }
  const nodes = flow.order.map((id) => {
    const { x, y } = places.get(id) ?? { x: 0, y: 0 }
    return { id, ...sizeOf(id), x: x + shift.x, y: y + shift.y }
  })
  const placed = new Map(nodes.map((node) => [node.id, node]))
  const chosen = chooseWays(flow, placed, nodes)
  const links = withPorts(chosen, placed)
  const points = links.flatMap((link) => [...link.points, ...link.balloons])
  return {
    width: Math.max(...nodes.map(({ x, width }) => x + width), ...points.map(({ x }) => x)) + margin,
    height: Math.max(...nodes.map(({ y, height }) => y + height), ...points.map(({ y }) => y)) + margin,
    nodes,
    links,
  }
}

interface Chosen {
  readonly link: FlowLink
  readonly candidate: Candidate
}

function chooseWays(flow: ChartFlow, placed: ReadonlyMap<NodeId, PlacedNode>, nodes: readonly PlacedNode[]): readonly Chosen[] {
  const drawn: (readonly Point[])[] = []
  let lane = 0
  return flow.links.flatMap((link) => {
    const from = placed.get(link.from)
    const to = placed.get(link.to)
    if (from === undefined || to === undefined) return []
    const isMain = flow.mainOf.get(link.from) === link.to
    if (link.isLoop) lane += 1
    const candidates = candidatesFor(from, to, link, Math.min(...nodes.map(({ x }) => x)) - clearance - lane * 12)
    let best: { candidate: Candidate; points: readonly Point[]; cost: number } | null = null
    for (const candidate of candidates) {
      const points = pointsOf(candidate, port(from, candidate.leave, candidate.shift ?? 0), port(to, candidate.enter, 0))
      const cost = costOf(points, from, to, nodes, drawn) + dislike(candidate, isMain)
      if (best === null || cost < best.cost) best = { candidate, points, cost }
    }
    if (best === null) return []
    drawn.push(best.points)
    return [{ link, candidate: best.candidate }]
  })
}

/** The straight way leaves by the bottom, the others by the sides; nothing enters by the right side if it can help it, since others leave there. */
function dislike({ leave, enter }: Candidate, isMain: boolean): number {
  return (leave === 'bottom' ? (isMain ? 0 : 60) : isMain ? 120 : 0) + (enter === 'right' ? 200 : 0)
}

function candidatesFor(from: PlacedNode, to: PlacedNode, link: FlowLink, lane: number): readonly Candidate[] {
  const bottom = from.y + from.height
  const head = to.y - to.above
  const right = from.x + from.width
  const toRight = to.x + to.width
  const outside = Math.min(from.x, to.x) - 36
  const ways: Candidate[] = [
    { leave: 'left', enter: 'left', through: [outside] },
    { leave: 'left', enter: 'left', through: [lane] },
    { leave: 'bottom', enter: 'left', through: [bottom + drop, lane] },
  ]
  if (link.isLoop) return ways
  const across = to.x + to.width / 2 - (from.x + from.width / 2)
  const aslant = to.y + to.height / 2 - (from.y + from.height / 2)
  if (head > bottom && Math.abs(across) < from.width / 2 - 20) ways.push({ leave: 'bottom', enter: 'top', through: [], shift: across })
  if (to.x > right && Math.abs(aslant) < from.height / 2 - 8) ways.push({ leave: 'right', enter: 'left', through: [], shift: aslant })
  if (head > bottom + clearance) {
    const levels = [bottom + drop, (bottom + head) / 2, head - clearance].filter((y) => y > bottom && y < head)
    for (const y of levels) ways.push({ leave: 'bottom', enter: 'top', through: [y] })
  }
  if (to.x > right + clearance) {
    for (const x of [right + 36, (right + to.x) / 2, to.x - 44].filter((x) => x > right && x < to.x)) ways.push({ leave: 'right', enter: 'left', through: [x] })
  }
  if (from.x > toRight + clearance) ways.push({ leave: 'left', enter: 'right', through: [(from.x + toRight) / 2] })
  const middle = from.y + from.height / 2
  if (head > middle + clearance) {
    if (to.x + to.width / 2 > right + 30) ways.push({ leave: 'right', enter: 'top', through: [] })
    if (to.x + to.width / 2 < from.x - 30) ways.push({ leave: 'left', enter: 'top', through: [] })
    ways.push({ leave: 'right', enter: 'top', through: [Math.max(right, toRight) + 30, head - clearance] })
  }
  ways.push({ leave: 'right', enter: 'right', through: [Math.max(right, toRight) + 36] })
  return ways
}

function port(node: PlacedNode, side: Side, offset: number): Point {
  const middle = { x: node.x + node.width / 2, y: node.y + node.height / 2 }
  switch (side) {
    case 'top':
      return { x: middle.x, y: node.y - node.above }
    case 'bottom':
      return { x: middle.x + offset, y: node.y + node.height }
    case 'left':
      return { x: node.x, y: middle.y + offset }
    case 'right':
      return { x: node.x + node.width, y: middle.y + offset }
  }
}

function pointsOf({ leave, enter, through }: Candidate, from: Point, to: Point): readonly Point[] {
  const points: Point[] = [from]
  let level = leave === 'left' || leave === 'right'
  for (const at of through) {
    const last = points.at(-1) ?? from
    points.push(level ? { x: at, y: last.y } : { x: last.x, y: at })
    level = !level
  }
  const last = points.at(-1) ?? from
  const entersUpright = enter === 'top' || enter === 'bottom'
  if (level === entersUpright) points.push(entersUpright ? { x: to.x, y: last.y } : { x: last.x, y: to.y })
  points.push(to)
  return points
}

type Stretch = readonly [Point, Point]

function stretchesOf(points: readonly Point[]): readonly Stretch[] {
  return points.slice(1).map((point, place) => [points[place] ?? point, point] as const)
}

function costOf(points: readonly Point[], from: PlacedNode, to: PlacedNode, nodes: readonly PlacedNode[], drawn: readonly (readonly Point[])[]): number {
  const stretches = stretchesOf(points)
  const length = stretches.reduce((sum, [a, b]) => sum + Math.abs(a.x - b.x) + Math.abs(a.y - b.y), 0)
  const hits = nodes.reduce((sum, node) => sum + stretches.filter((stretch) => hitsBox(stretch, node, node.id === from.id || node.id === to.id ? -1 : 4)).length, 0)
  const crossings = drawn.reduce((sum, other) => sum + stretchesOf(other).filter((stretch) => stretches.some((own) => meet(own, stretch))).length, 0)
  return hits * 5000 + crossings * 90 + points.length * 40 + length
}

function hitsBox([a, b]: Stretch, { x, y, width, height, above }: PlacedNode, room: number): boolean {
  return Math.max(a.x, b.x) > x - room && Math.min(a.x, b.x) < x + width + room && Math.max(a.y, b.y) > y - Math.max(0, above) - room && Math.min(a.y, b.y) < y + height + room
}

function meet([a, b]: Stretch, [c, d]: Stretch): boolean {
  return Math.max(a.x, b.x) >= Math.min(c.x, d.x) && Math.max(c.x, d.x) >= Math.min(a.x, b.x) && Math.max(a.y, b.y) >= Math.min(c.y, d.y) && Math.max(c.y, d.y) >= Math.min(a.y, b.y)
}

/** Spreads the lines that leave one side of a node along it, in the order of where they lead, and sets their balloons so that none covers another. */
function withPorts(chosen: readonly Chosen[], placed: ReadonlyMap<NodeId, PlacedNode>): readonly RoutedLink[] {
  const sides = new Map<string, Chosen[]>()
  for (const choice of chosen) {
    const side = `${choice.link.from} ${choice.candidate.leave}`
    sides.set(side, [...(sides.get(side) ?? []), choice])
  }
  return chosen.flatMap((choice) => {
    const { link, candidate } = choice
    const from = placed.get(link.from)
    const to = placed.get(link.to)
    if (from === undefined || to === undefined) return []
    const all = (sides.get(`${link.from} ${candidate.leave}`) ?? []).toSorted((a, b) => endOf(a, placed) - endOf(b, placed))
    const offset = offsetOf(choice, all, from)
    const start = port(from, candidate.leave, offset)
    const points = pointsOf(candidate, start, port(to, candidate.enter, 0))
    const covered = all.slice(0, all.indexOf(choice)).filter((other) => Math.abs(offsetOf(other, all, from) - offset) < balloonPitch * (candidate.leave === 'bottom' ? (other.link.outcomes.length + link.outcomes.length) / 2 : 1) - 1)
    const before = covered.reduce((sum, other) => sum + (candidate.leave === 'bottom' ? 1 : other.link.outcomes.length), 0)
    return [{ link, points, balloons: link.outcomes.map((_, at) => balloonAt(candidate.leave, start, at, link.outcomes.length, before)) }]
  })
}

/** px from the middle of the side to where a line leaves: spread round the one that runs straight, if there is one, and always on the side. */
function offsetOf(choice: Chosen, all: readonly Chosen[], from: PlacedNode): number {
  if (choice.candidate.shift !== undefined) return choice.candidate.shift
  const isBottom = choice.candidate.leave === 'bottom'
  const half = (isBottom ? from.width : from.height) / 2 - 8
  const pitch = isBottom ? Math.max(1, ...all.map((each) => each.link.outcomes.length)) * balloonPitch + 11 : balloonPitch
  const straight = all.findIndex(({ candidate }) => candidate.shift !== undefined)
  const origin = straight === -1 ? 0 : (all[straight]?.candidate.shift ?? 0)
  const steps = all.indexOf(choice) - (straight === -1 ? (all.length - 1) / 2 : straight)
  return Math.max(-half, Math.min(half, origin + steps * pitch))
}

/** Where a line ends, along the side that it leaves. */
function endOf({ link, candidate }: Chosen, placed: ReadonlyMap<NodeId, PlacedNode>): number {
  const to = placed.get(link.to)
  if (to === undefined) return 0
  return candidate.leave === 'bottom' || candidate.leave === 'top' ? to.x + to.width / 2 : to.y + to.height / 2
}

function balloonAt(leave: Side, start: Point, at: number, count: number, before: number): Point {
  switch (leave) {
    case 'left':
      return { x: start.x - 18 - (at + before) * balloonPitch, y: start.y }
    case 'right':
      return { x: start.x + 18 + (at + before) * balloonPitch, y: start.y }
    case 'top':
    case 'bottom':
      return { x: start.x + (at - (count - 1) / 2) * balloonPitch, y: start.y + 17 + before * balloonPitch }
  }
}
