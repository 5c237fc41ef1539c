import type { NodeId } from '#shared/lib/ids.ts'
import type { Cell } from './grid.ts'
import type { Leg, PlannedRoute } from './plan-routes.ts'

/** What a leg covers of its channel: channel `k` is at 2k, band `k` at 2k + 1. */
export interface Span {
  readonly low: number
  readonly high: number
}

/** What each leg of a route covers of its channel. */
export function spansOf({ link, legs, leave, enter }: PlannedRoute, cells: ReadonlyMap<NodeId, Cell>): readonly Span[] {
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

/** The tracks of all channels: how many each has, and which one a leg runs on. */
export interface Tracks {
  count(this: void, way: Leg['way'], channel: number): number
  of(this: void, leg: Leg): number
}

/** Tracks in every channel: nets take the nearest one where they meet no other net, short ones first, so that long ones lie outside. */
export function assignTracks(cells: ReadonlyMap<NodeId, Cell>, routes: readonly PlannedRoute[]): Tracks {
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
