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
  const runs: { cells: Cell[]; outcomes: readonly string[] }[] = []
  for (const cell of cellsOf(spans, nonNegative && usesNumbers(bands, limits))) {
    const outcomes = spans.filter((span) => holds(span, cell)).map((span) => span.outcome)
    const run = runs.at(-1)
    if (run !== undefined && run.outcomes.join(' ') === outcomes.join(' ')) run.cells.push(cell)
    else runs.push({ cells: [cell], outcomes })
  }
  return runs.flatMap(({ cells, outcomes }) =>
    outcomes.length === 1 ? [] : [{ kind: outcomes.length === 0 ? 'gap' : 'overlap', where: whereWords(cells), outcomes } as const],
  )
}

type Span = { readonly from: End; readonly fromIncluded: boolean; readonly to: End; readonly toIncluded: boolean; readonly outcome: string }

/** A stretch of values that no end of a band cuts: a single point (`from` = `to`), or what lies between two points. */
type Cell = { readonly from: End; readonly to: End }

function usesNumbers(bands: readonly Band[], limits: ChartLimits | undefined): boolean {
  return (
    (limits !== undefined && !('spec' in limits) && !('as' in limits)) || bands.some((band) => typeof band.from === 'number' || typeof band.to === 'number')
  )
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
  const points = new Map(spans.flatMap((span) => [span.from, span.to]).map((end) => [end.at, end]))
  points.delete(-Infinity)
  points.delete(Infinity)
  const cells: Cell[] = []
  let below = lower(undefined)
  for (const end of [...points.values()].sort((left, right) => left.at - right.at)) {
    if (!(startsAtZero && end.at === 0 && cells.length === 0)) cells.push({ from: below, to: end })
    cells.push({ from: end, to: end })
    below = end
  }
  return [...cells, { from: below, to: upper(undefined) }]
}

function holds(span: Span, cell: Cell): boolean {
  if (cell.from.at !== cell.to.at) return span.from.at <= cell.from.at && cell.to.at <= span.to.at
  const { at } = cell.from
  return (span.from.at < at || (span.from.at === at && span.fromIncluded)) && (at < span.to.at || (at === span.to.at && span.toIncluded))
}

function whereWords(cells: readonly Cell[]): string {
  const from = cells[0]?.from ?? lower(undefined)
  const to = cells.at(-1)?.to ?? upper(undefined)
  const isOpen = cells.length === 1
  if (from.at === to.at) return `at ${from.words}`
  if (from.at === -Infinity) return to.at === Infinity ? 'everywhere' : `${isOpen ? 'below' : 'up to'} ${to.words}`
  if (to.at === Infinity) return `${isOpen ? 'above' : 'from'} ${from.words}${isOpen ? '' : ' up'}`
  return `${isOpen ? 'between' : 'from'} ${from.words} ${isOpen ? 'and' : 'to'} ${to.words}`
}
