import type { NodeId } from '#shared/lib/ids.ts'
import type { FlowLink } from './flow.ts'
import type { Cell } from './grid.ts'
import type { Leg, PlannedRoute } from './plan-routes.ts'

/** A point of the sheet, px from its top left corner. */
export interface Point {
  readonly x: number
  readonly y: number
}

/** What a node takes on the sheet; `above` is the part of its mark that stands over its top edge, such as the tab of a check. */
export interface NodeSize {
  readonly width: number
  readonly height: number
  readonly above: number
}

/** A node in its place: left and top of its body, without what stands over its top edge. */
export interface PlacedNode extends NodeSize {
  readonly id: NodeId
  readonly x: number
  readonly y: number
}

/** A link as it is drawn: corners of its line, right-angled, and the middles of its balloons, one for every outcome. */
export interface RoutedLink {
  readonly link: FlowLink
  readonly points: readonly Point[]
  readonly balloons: readonly Point[]
}

/** A chart in its place on the sheet. */
export interface ChartLayout {
  readonly width: number
  readonly height: number
  /** In route order. */
  readonly nodes: readonly PlacedNode[]
  readonly links: readonly RoutedLink[]
}

/** Radius of a balloon. */
export const balloonRadius = 10
/** Distance between the middles of balloons that sit side by side. */
export const balloonPitch = 23
const margin = 24
const trackPitch = 22
const levelPitch = 12
/** From the bottom of a box to its balloon, and to the first level track below that. */
const balloonDrop = 17
const trackDrop = 36
/** Room for the arrow above the mark of the node below. */
const arrowRoom = 14
/** From a side of a box to the nearest upright track. */
const sideRoom = 16
/** From the last upright track, or the box, to the box on its right: a balloon and the arrow. */
const entryRoom = 50
/** Distance between several ways out of one left side. */
const sideSlot = 14

/** Gives the grid its measures: widths of columns, heights of rows, tracks in the channels, and so the corners of every route. */
export function measure(cells: ReadonlyMap<NodeId, Cell>, routes: readonly PlannedRoute[], sizeOf: (id: NodeId) => NodeSize): ChartLayout {
  const ids = [...cells.keys()]
  const columns = Math.max(-1, ...[...cells.values()].map(({ column }) => column)) + 1
  const rows = Math.max(-1, ...[...cells.values()].map(({ row }) => row)) + 1
  const tracks = assignTracks(cells, routes)
  const abreast = (channel: number): number =>
    Math.max(1, ...routes.filter((route) => entersBeside(route) && (cells.get(route.link.from)?.column ?? -1) + 1 === channel).map(({ link }) => link.outcomes.length))
  const uprights = stack(columns, (column) => Math.max(0, ...ids.filter((id) => cells.get(id)?.column === column).map((id) => sizeOf(id).width)), (k) => uprightRoom(k, columns, tracks.count('upright', k)) + (abreast(k) - 1) * balloonPitch)
  const levels = stack(rows, (row) => Math.max(0, ...ids.filter((id) => cells.get(id)?.row === row).map((id) => sizeOf(id).height)), (k) => levelRoom(k, rows, tracks.count('level', k), ids.filter((id) => cells.get(id)?.row === k).map(sizeOf)))
  const nodes = ids.map((id) => {
    const { row, column } = cells.get(id) ?? { row: 0, column: 0 }
    const size = sizeOf(id)
    return { id, ...size, x: (uprights.middles[column] ?? 0) - size.width / 2, y: (levels.middles[row] ?? 0) - size.height / 2 }
  })
  const placed = new Map(nodes.map((node) => [node.id, node]))
  const trackAt = (leg: Leg, span: Span): number => {
    const track = tracks.of(leg, span)
    if (leg.way === 'level') return (levels.ends[leg.channel] ?? 0) + (leg.channel === 0 ? margin / 2 : trackDrop) + track * levelPitch
    return leg.channel === 0 ? (uprights.starts[0] ?? 0) - entryRoom - track * trackPitch : (uprights.ends[leg.channel] ?? 0) + sideRoom + track * trackPitch
  }
  const links = routes.flatMap((route) => {
    const from = placed.get(route.link.from)
    const to = placed.get(route.link.to)
    return from === undefined || to === undefined ? [] : [trace(route, from, to, spansOf(route, cells), trackAt, (uprights.starts[(cells.get(route.link.from)?.column ?? 0) + 1] ?? 0))]
  })
  return { width: uprights.end, height: levels.end, nodes, links }
}

function entersBeside({ balloons }: PlannedRoute): boolean {
  return balloons === 'beside' || balloons === 'entering'
}

function uprightRoom(channel: number, columns: number, tracks: number): number {
  if (channel === 0) return tracks === 0 ? margin : margin + entryRoom + (tracks - 1) * trackPitch + 10
  if (channel === columns) return tracks === 0 ? margin : margin + sideRoom + tracks * trackPitch
  return tracks === 0 ? entryRoom + 14 : sideRoom + (tracks - 1) * trackPitch + entryRoom
}

function levelRoom(channel: number, rows: number, tracks: number, below: readonly NodeSize[]): number {
  const above = Math.max(0, ...below.map((size) => size.above))
  if (channel === 0) return margin + above + (tracks === 0 ? 0 : tracks * levelPitch + arrowRoom)
  if (channel === rows) return tracks === 0 ? margin : trackDrop + tracks * levelPitch + margin
  return trackDrop + above + (tracks === 0 ? 2 : (tracks - 1) * levelPitch + arrowRoom)
}

/** Bands and the channels before, between and after them, along one direction. `ends[k]` is where channel `k` begins, `starts[k]` where it ends. */
function stack(count: number, sizeOf: (band: number) => number, roomOf: (channel: number) => number): { middles: number[]; starts: number[]; ends: number[]; end: number } {
  const middles: number[] = []
  const starts: number[] = []
  const ends: number[] = [0]
  let at = 0
  for (let band = 0; band < count; band += 1) {
    at += roomOf(band)
    starts.push(at)
    const size = sizeOf(band)
    middles.push(at + size / 2)
    at += size
    ends.push(at)
  }
  const end = at + roomOf(count)
  starts.push(end)
  return { middles, starts, ends, end }
}

/** What a leg covers of its channel: channel `k` is at 2k, band `k` at 2k + 1. */
interface Span {
  readonly low: number
  readonly high: number
}

function spansOf({ link, legs, leave, enter }: PlannedRoute, cells: ReadonlyMap<NodeId, Cell>): readonly Span[] {
  const from = cells.get(link.from) ?? { row: 0, column: 0 }
  const to = cells.get(link.to) ?? { row: 0, column: 0 }
  return legs.map((leg, place) => {
    const before = legs[place - 1]
    const after = legs[place + 1]
    const ends =
      leg.way === 'upright'
        ? [before ? 2 * before.channel : 2 * from.row + 1, after ? 2 * after.channel : 2 * to.row + 1]
        : [before ? 2 * before.channel : 2 * from.column + (leave === 'bottom' || leave === 'top' ? 1 : 0), after ? 2 * after.channel : 2 * to.column + (enter === 'top' || enter === 'bottom' ? 1 : 0)]
    return { low: Math.min(...ends), high: Math.max(...ends) }
  })
}

interface Tracks {
  count(way: Leg['way'], channel: number): number
  of(leg: Leg, span: Span): number
}

/** Tracks in every channel: nets take the nearest one where they meet no other net, short ones first, so that long ones lie outside. */
function assignTracks(cells: ReadonlyMap<NodeId, Cell>, routes: readonly PlannedRoute[]): Tracks {
  const nets = new Map<string, { channel: string; low: number; high: number }>()
  for (const route of routes) {
    const spans = spansOf(route, cells)
    route.legs.forEach((leg, place) => {
      const span = spans[place]
      if (span === undefined) return
      const channel = `${leg.way} ${leg.channel}`
      const name = `${channel} ${leg.net}`
      const known = nets.get(name)
      nets.set(name, { channel, low: Math.min(known?.low ?? span.low, span.low), high: Math.max(known?.high ?? span.high, span.high) })
    })
  }
  const taken = new Map<string, Span[][]>()
  const trackOf = new Map<string, number>()
  for (const [name, net] of [...nets].toSorted(([, a], [, b]) => a.high - a.low - (b.high - b.low) || a.low - b.low)) {
    const tracks = taken.get(net.channel) ?? []
    const free = tracks.findIndex((spans) => spans.every(({ low, high }) => net.high < low || net.low > high))
    const track = free === -1 ? tracks.length : free
    tracks[track] = [...(tracks[track] ?? []), net]
    taken.set(net.channel, tracks)
    trackOf.set(name, track)
  }
  return {
    count: (way, channel) => taken.get(`${way} ${channel}`)?.length ?? 0,
    of: (leg) => trackOf.get(`${leg.way} ${leg.channel} ${leg.net}`) ?? 0,
  }
}

function trace(route: PlannedRoute, from: PlacedNode, to: PlacedNode, spans: readonly Span[], trackAt: (leg: Leg, span: Span) => number, nextColumn: number): RoutedLink {
  const points: Point[] = [leavingPoint(route, from)]
  route.legs.forEach((leg, place) => {
    const last = points.at(-1) ?? { x: 0, y: 0 }
    const at = trackAt(leg, spans[place] ?? { low: 0, high: 0 })
    points.push(leg.way === 'upright' ? { x: at, y: last.y } : { x: last.x, y: at })
  })
  const end = enteringPoint(route, to)
  const last = points.at(-1) ?? end
  const lastLeg = route.legs.at(-1)
  if (lastLeg !== undefined) points.push(lastLeg.way === 'upright' ? { x: last.x, y: end.y } : { x: end.x, y: last.y })
  points.push(end)
  return { link: route.link, points, balloons: balloonsOf(route, points, nextColumn) }
}

/** Slots 0, 1, 2, 3 … lie in the middle, right, left, further right. */
function slotOffset(slot: number, pitch: number): number {
  return Math.ceil(slot / 2) * pitch * (slot % 2 === 1 ? 1 : -1)
}

function leavingPoint({ leave, leaveSlot, balloonsAbreast }: PlannedRoute, node: PlacedNode): Point {
  const middle = { x: node.x + node.width / 2, y: node.y + node.height / 2 }
  switch (leave) {
    case 'right':
      return { x: node.x + node.width, y: middle.y }
    case 'left':
      return { x: node.x, y: middle.y + slotOffset(leaveSlot, sideSlot) }
    case 'top':
      return { x: middle.x, y: node.y - node.above }
    case 'bottom':
      return { x: middle.x + slotOffset(leaveSlot, balloonsAbreast * balloonPitch + 11), y: node.y + node.height }
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

function balloonsOf({ link, leave, balloons }: PlannedRoute, points: readonly Point[], nextColumn: number): readonly Point[] {
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
        return leave === 'left' ? { x: first.x - 18 - place * balloonPitch, y: first.y } : { x: first.x + spread(place), y: first.y + balloonDrop }
    }
  })
}
