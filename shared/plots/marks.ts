import type { NodeId, OutcomeId } from '#shared/lib/ids.ts'

/** A point of a picture, px from its top left corner. */
export interface MarkPoint {
  readonly x: number
  readonly y: number
}

/** What a mark is part of; how it looks follows from this and from its tone (mark-style.ts), so that one list of marks serves every theme. */
export type MarkRole =
  | 'body'
  | 'cause-body'
  | 'inner-line'
  | 'bar'
  | 'tab'
  | 'tab-inner'
  | 'glyph'
  | 'rule-line'
  | 'title'
  | 'cause-title'
  | 'number'
  | 'note'
  | 'cause-note'
  | 'figure'
  | 'outcome'
  | 'outcome-numeral'
  | 'edge'
  | 'edge-loop'
  | 'edge-otherwise'
  | 'arrow'
  | 'balloon'
  | 'balloon-numeral'

/**
 * How a part stands to the route that is drawn: `plain` where no route is drawn, `walked` on it, `current` where it stands now or what is selected, `spent`
 * for what was stepped back from, `quiet` for the rest.
 */
export type Tone = 'plain' | 'quiet' | 'spent' | 'walked' | 'current'

/** One stroke, area or line of text. Lengths are px; a text stands on its baseline. */
export type Mark =
  | { readonly kind: 'path'; readonly role: MarkRole; readonly tone: Tone; readonly d: string }
  | { readonly kind: 'polygon'; readonly role: MarkRole; readonly tone: Tone; readonly points: readonly MarkPoint[] }
  | { readonly kind: 'circle'; readonly role: MarkRole; readonly tone: Tone; readonly center: MarkPoint; readonly radius: number }
  | {
      readonly kind: 'text'
      readonly role: MarkRole
      readonly tone: Tone
      readonly at: MarkPoint
      readonly anchor: 'start' | 'middle'
      readonly text: string
      /** Width that the text takes in its own face; a fallback face is squeezed into it. */
      readonly width: number
    }

/** Marks that belong together: one edge, one balloon, or one node. Groups are drawn in order. */
export type MarkGroup =
  | { readonly of: 'edge'; readonly from: NodeId; readonly to: NodeId; readonly outcomes: readonly OutcomeId[]; readonly marks: readonly Mark[] }
  | { readonly of: 'balloon'; readonly from: NodeId; readonly outcome: OutcomeId; readonly marks: readonly Mark[] }
  | { readonly of: 'node'; readonly node: NodeId; readonly label: string; readonly box: Box; readonly marks: readonly Mark[] }

/** A rectangle of the sheet. */
export interface Box {
  readonly x: number
  readonly y: number
  readonly width: number
  readonly height: number
}

/** A picture as a pure list of marks, drawn by React, by `toSvg` and by print. */
export interface Picture {
  readonly width: number
  readonly height: number
  readonly title: string
  /** What the picture shows, in one or two sentences, for those who do not see it. */
  readonly summary: string
  readonly groups: readonly MarkGroup[]
}

/** A coordinate with at most two decimals, so that the same picture is the same text. */
export function coordinate(value: number): string {
  const rounded = Math.round(value * 100) / 100
  return String(Object.is(rounded, -0) ? 0 : rounded)
}

/** Path data of a line through points with its corners rounded; points that lie on one another or in one line are dropped. */
export function roundedPath(points: readonly MarkPoint[], radius: number): string {
  const corners = withoutStraights(points)
  const [first, ...rest] = corners
  if (first === undefined) return ''
  let d = `M${coordinate(first.x)} ${coordinate(first.y)}`
  rest.forEach((point, place) => {
    const before = corners[place] ?? point
    const after = rest[place + 1]
    if (after === undefined) {
      d += `L${coordinate(point.x)} ${coordinate(point.y)}`
      return
    }
    const cut = Math.min(radius, distance(before, point) / 2, distance(point, after) / 2)
    const start = towards(point, before, cut)
    const end = towards(point, after, cut)
    d += `L${coordinate(start.x)} ${coordinate(start.y)}Q${coordinate(point.x)} ${coordinate(point.y)} ${coordinate(end.x)} ${coordinate(end.y)}`
  })
  return d
}

function withoutStraights(points: readonly MarkPoint[]): readonly MarkPoint[] {
  const kept: MarkPoint[] = []
  for (const point of points) {
    const last = kept.at(-1)
    if (last !== undefined && last.x === point.x && last.y === point.y) continue
    const before = kept.at(-2)
    const isStraight =
      before !== undefined && last !== undefined && ((before.x === last.x && last.x === point.x && (last.y - before.y) * (point.y - last.y) > 0) || (before.y === last.y && last.y === point.y && (last.x - before.x) * (point.x - last.x) > 0))
    if (isStraight) kept.pop()
    kept.push(point)
  }
  return kept
}

function distance(a: MarkPoint, b: MarkPoint): number {
  return Math.hypot(a.x - b.x, a.y - b.y)
}

/** The point so many px from `from` on the way to `to`. */
export function towards(from: MarkPoint, to: MarkPoint, length: number): MarkPoint {
  const whole = distance(from, to)
  const share = whole === 0 ? 0 : length / whole
  return { x: from.x + (to.x - from.x) * share, y: from.y + (to.y - from.y) * share }
}
