import type { NodeId } from '#shared/lib/ids.ts'
import type { Cell } from './grid.ts'
import type { Leg, PlannedRoute } from './plan-routes.ts'
import { balloonPitch, type ChartLayout, type NodeSize } from './sheet.ts'
import { middleExit, placeExits, trace } from './trace.ts'
import { assignTracks, type Tracks } from './tracks.ts'

const margin = 24
const trackPitch = 22
const levelPitch = 12
/** From the bottom of a box to the first level track below it: its balloon fits in between. */
const trackDrop = 36
/** Room for the arrow above the mark of the node below. */
const arrowRoom = 14
/** From a side of a box to the nearest upright track. */
const sideRoom = 16
/** From the last upright track, or the box, to the box on its right: a balloon and the arrow. */
const entryRoom = 50

/** Gives the grid its measures: widths of columns, heights of rows, tracks in the channels, and so the corners of every route. */
export function measure(cells: ReadonlyMap<NodeId, Cell>, routes: readonly PlannedRoute[], sizeOf: (id: NodeId) => NodeSize): ChartLayout {
  const tracks = assignTracks(cells, routes)
  const exits = placeExits(routes, sizeOf)
  const needs = toNeeds(cells, sizeOf)
  for (const route of routes) {
    const from = cells.get(route.link.from)
    if (from === undefined) continue
    needs.deepest.raise(from.row + 1, exits.get(route)?.last ?? 0)
    if (route.balloons === 'beside' || route.balloons === 'entering') needs.abreast.raise(from.column + 1, route.link.outcomes.length - 1)
  }
  const uprights = stack(needs.columns, needs.widths.of, (channel) => uprightRoom(channel, needs, tracks))
  const levels = stack(needs.rows, needs.heights.of, (channel) => levelRoom(channel, needs, tracks))
  const nodes = [...cells].map(([id, { row, column }]) => {
    const size = sizeOf(id)
    return { id, ...size, x: (uprights.middles[column] ?? 0) - size.width / 2, y: (levels.middles[row] ?? 0) - size.height / 2 }
  })
  const placed = new Map(nodes.map((node) => [node.id, node]))
  const trackAt = (leg: Leg): number => {
    const track = tracks.of(leg)
    if (leg.way === 'level') return (levels.ends[leg.channel] ?? 0) + (leg.channel === 0 ? margin / 2 : levelDrop(leg.channel, needs)) + track * levelPitch
    return leg.channel === 0 ? (uprights.starts[0] ?? 0) - entryRoom - track * trackPitch : (uprights.ends[leg.channel] ?? 0) + sideRoom + track * trackPitch
  }
  const links = routes.flatMap((route) => {
    const from = placed.get(route.link.from)
    const to = placed.get(route.link.to)
    if (from === undefined || to === undefined) return []
    const nextColumn = uprights.starts[(cells.get(route.link.from)?.column ?? 0) + 1] ?? 0
    return [trace(route, { from, to, exit: exits.get(route) ?? middleExit, trackAt, nextColumn })]
  })
  return { width: uprights.end, height: levels.end, nodes, links }
}

/** The greatest of the numbers raised for each place, 0 where none was. */
interface Greatest {
  raise(place: number, value: number): void
  of(this: void, place: number): number
}

function greatest(): Greatest {
  const values: number[] = []
  return {
    raise: (place, value) => {
      values[place] = Math.max(values[place] ?? 0, value)
    },
    of: (place) => values[place] ?? 0,
  }
}

/** What the nodes and balloons ask of each column, row and channel. */
interface Needs {
  readonly columns: number
  readonly rows: number
  readonly widths: Greatest
  readonly heights: Greatest
  /** What stands over the nodes of a row. */
  readonly above: Greatest
  /** Further rows of balloons below the nodes above a level channel. */
  readonly deepest: Greatest
  /** Further balloons side by side before the nodes right of an upright channel. */
  readonly abreast: Greatest
}

function toNeeds(cells: ReadonlyMap<NodeId, Cell>, sizeOf: (id: NodeId) => NodeSize): Needs {
  const needs = { widths: greatest(), heights: greatest(), above: greatest(), deepest: greatest(), abreast: greatest() }
  let columns = 0
  let rows = 0
  for (const [id, { row, column }] of cells) {
    const { width, height, above } = sizeOf(id)
    needs.widths.raise(column, width)
    needs.heights.raise(row, height)
    needs.above.raise(row, above)
    columns = Math.max(columns, column + 1)
    rows = Math.max(rows, row + 1)
  }
  return { ...needs, columns, rows }
}

function uprightRoom(channel: number, { columns, abreast }: Needs, { count }: Tracks): number {
  const tracks = count('upright', channel)
  if (channel === 0) return tracks === 0 ? margin : margin + entryRoom + (tracks - 1) * trackPitch + 10
  if (channel === columns) return tracks === 0 ? margin : margin + sideRoom + tracks * trackPitch
  return (tracks === 0 ? entryRoom + 14 : sideRoom + (tracks - 1) * trackPitch + entryRoom) + abreast.of(channel) * balloonPitch
}

function levelDrop(channel: number, { deepest }: Needs): number {
  return trackDrop + deepest.of(channel) * balloonPitch
}

function levelRoom(channel: number, needs: Needs, { count }: Tracks): number {
  const tracks = count('level', channel)
  const above = needs.above.of(channel)
  if (channel === 0) return margin + above + (tracks === 0 ? 0 : tracks * levelPitch + arrowRoom)
  const drop = levelDrop(channel, needs)
  if (channel === needs.rows) return tracks === 0 ? margin : drop + tracks * levelPitch + margin
  return drop + above + (tracks === 0 ? 2 : (tracks - 1) * levelPitch + arrowRoom)
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
