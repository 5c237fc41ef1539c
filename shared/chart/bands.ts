import type { Band, ChartLimits } from './document.ts'

/** A gap or an overlap of bands, in words: "below 2700", "at the upper limit", "between 80 and 90". */
export type BandFault = { readonly kind: 'gap' | 'overlap'; readonly where: string; readonly outcomes: readonly string[] }

/** An end of a band with a place on the line of values. */
type End = { readonly at: number; readonly words: string }

/** What the ends of bands mean: numbers where the limits are known, places in order where a spec sheet will tell. */
type Scale = (end: 'min' | 'max' | number) => End | undefined

/**
 * Where bands overlap or leave a gap on the whole line from minus to plus infinity, both ends of each band taken as
 * included or not as it says. `undefined` where that hangs on a limit that only a spec sheet knows: numbers and such
 * limits mixed, or limits that are missing altogether. `nonNegative`: nothing below zero can be measured, so a band may begin at 0.
 * A reading without bands has no fault: the person picks the outcome.
 */
export function bandFaults(bands: readonly Band[], limits: ChartLimits | undefined, nonNegative: boolean): readonly BandFault[] | undefined {
  if (bands.length === 0) return []
  const scale = scaleOf(bands, limits)
  const spans = scale === undefined ? undefined : spansOf(bands, scale)
  if (spans === undefined) return undefined
  return cellsOf(spans, nonNegative && usesNumbers(bands, limits)).flatMap((cell) => {
    const inside = spans.filter((span) => span.from.at <= cell.from && cell.to <= span.to.at && holdsPoint(span, cell))
    if (inside.length === 1) return []
    return [{ kind: inside.length === 0 ? 'gap' : 'overlap', where: cell.words, outcomes: inside.map((span) => span.outcome) } as const]
  })
}

type Span = { readonly from: End; readonly fromIncluded: boolean; readonly to: End; readonly toIncluded: boolean; readonly outcome: string }

/** A stretch of values that no end of a band cuts: a single point (`from` = `to`), or what lies between two points. */
type Cell = { readonly from: number; readonly to: number; readonly words: string }

function usesNumbers(bands: readonly Band[], limits: ChartLimits | undefined): boolean {
  return (limits !== undefined && !('spec' in limits) && !('as' in limits)) || bands.some((band) => typeof band.from === 'number' || typeof band.to === 'number')
}

function scaleOf(bands: readonly Band[], limits: ChartLimits | undefined): Scale | undefined {
  const named = bands.some((band) => typeof band.from === 'string' || typeof band.to === 'string')
  const numbered = bands.some((band) => typeof band.from === 'number' || typeof band.to === 'number')
  if (!named) return (end) => (typeof end === 'number' ? { at: end, words: String(end) } : undefined)
  if (limits === undefined) return undefined
  if ('spec' in limits || 'as' in limits) {
    if (numbered) return undefined
    const hasMin = 'spec' in limits || limits.as.some((figure) => figure.min !== undefined)
    const hasMax = 'spec' in limits || limits.as.some((figure) => figure.max !== undefined)
    return (end) => (end === 'min' ? lower(hasMin ? 1 : undefined) : upper(hasMax ? 2 : undefined))
  }
  return (end) => (typeof end === 'number' ? { at: end, words: String(end) } : end === 'min' ? lower(limits.min) : upper(limits.max))
}

const lower = (at: number | undefined): End => ({ at: at ?? -Infinity, words: 'the lower limit' })
const upper = (at: number | undefined): End => ({ at: at ?? Infinity, words: 'the upper limit' })

function spansOf(bands: readonly Band[], scale: Scale): readonly Span[] | undefined {
  const spans: Span[] = []
  for (const band of bands) {
    const from = band.from === undefined ? lower(undefined) : scale(band.from)
    const to = band.to === undefined ? upper(undefined) : scale(band.to)
    if (from === undefined || to === undefined) return undefined
    spans.push({ from, fromIncluded: band.fromIncluded === true, to, toIncluded: band.toIncluded === true, outcome: band.outcome })
  }
  return spans
}

function cellsOf(spans: readonly Span[], startsAtZero: boolean): readonly Cell[] {
  const points = new Map(spans.flatMap((span) => [span.from, span.to]).flatMap((end) => (Number.isFinite(end.at) ? [[end.at, end.words] as const] : [])))
  const ends = [...points].sort(([left], [right]) => left - right)
  const cells: Cell[] = []
  let below: readonly [at: number, words: string] | undefined
  for (const [at, words] of ends) {
    if (below !== undefined) cells.push({ from: below[0], to: at, words: `between ${below[1]} and ${words}` })
    else if (!(startsAtZero && at === 0)) cells.push({ from: -Infinity, to: at, words: `below ${words}` })
    cells.push({ from: at, to: at, words: `at ${words}` })
    below = [at, words]
  }
  cells.push({ from: below?.[0] ?? -Infinity, to: Infinity, words: below === undefined ? 'everywhere' : `above ${below[1]}` })
  return cells
}

function holdsPoint(span: Span, cell: Cell): boolean {
  if (cell.from !== cell.to) return span.from.at < span.to.at
  return (span.from.at < cell.from || span.fromIncluded) && (cell.to < span.to.at || span.toIncluded)
}
