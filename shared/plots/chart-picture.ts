import { assertNever } from '#shared/lib/assert-never.ts'
import type { ChartId, NodeId } from '#shared/lib/ids.ts'
import { layoutChart } from '#shared/chart/layout/layout-chart.ts'
import { balloonRadius, type PlacedNode, type RoutedLink } from '#shared/chart/layout/sheet.ts'
import type { ChartDocument, ChartNode } from '#shared/chart/document.ts'
import { chartNumbers, indexChart, isDecision, type ChartIndex } from '#shared/chart/graph.ts'
import type { MachineKind } from '#shared/chart/spec-limits.ts'
import type { SpecLimits } from '#shared/units/limits.ts'
import { defaultNumberFormat, type NumberFormat } from '#shared/units/number-format.ts'
import { roundedPath, towards, type Mark, type MarkGroup, type MarkPoint, type Picture, type Tone } from './marks.ts'
import { drawShape, shapeNode, textMark, type NodeShape } from './node-shape.ts'
import { nodeWords, type NodeWords, type WordContext } from './node-words.ts'
import { toneWords, toTones, type PictureRoute, type RouteTones } from './picture-route.ts'

/** What a picture may show beside the chart itself. */
export interface PictureOptions {
  readonly route?: PictureRoute
  /** The whole chart, or only what the route passed and where its outcomes lead; without a route always the whole. */
  readonly scope?: 'all' | 'near-route'
  /** Outcomes as numerals on the lines alone, or listed in the boxes as well, so that the sheet explains itself. */
  readonly outcomes?: 'numerals' | 'listed'
  readonly format?: NumberFormat
  readonly specLimits?: SpecLimits
  readonly machine?: MachineKind
  readonly chartTitles?: ReadonlyMap<ChartId, string>
}

const cornerRadius = 4

/**
 * Draws a chart as a list of marks: nodes in the outlines of ISO 5807 with number, title and what else their kind carries; lines at right angles with
 * numbered balloons for the outcomes; with a route, the walk as a thick cord through it. Pure and total: same chart and options, same marks.
 * A chart whose document places every node keeps those places.
 */
export function drawChart(chart: ChartDocument, options: PictureOptions = {}): Picture {
  const whole = indexChart(chart)
  const index = options.scope === 'near-route' && options.route !== undefined ? indexChart(nearRoute(chart, options.route)) : whole
  const context: WordContext = {
    index,
    numbers: chartNumbers(whole),
    format: options.format ?? defaultNumberFormat,
    specLimits: options.specLimits ?? {},
    machine: options.machine ?? null,
    chartTitles: options.chartTitles ?? new Map(),
  }
  const words = new Map([...index.nodes].map(([id, node]) => [id, nodeWords(context, node)]))
  const shapes = new Map<NodeId, NodeShape>()
  for (const [id, node] of index.nodes) shapes.set(id, shapeNode(node, wordsOf(words, id), options.outcomes === 'listed'))
  const layout = layoutChart(index, (id) => shapes.get(id) ?? { width: 0, height: 0, above: 0 })
  const tones = toTones(options.route)
  const links = layout.links.toSorted((a, b) => drawOrder(tones.link(a.link)) - drawOrder(tones.link(b.link)))
  const inOrder = new Map([...(options.route?.nodes ?? []), ...layout.nodes.map(({ id }) => id)].toReversed().map((id, place, all) => [id, all.length - place]))
  const nodes = layout.nodes.toSorted((a, b) => (inOrder.get(a.id) ?? 0) - (inOrder.get(b.id) ?? 0))
  return {
    width: Math.ceil(layout.width),
    height: Math.ceil(layout.height),
    title: chart.title,
    summary: summaryOf(index, words, options.route),
    groups: [
      ...links.map((link): MarkGroup => edgeGroup(link, tones.link(link.link))),
      ...nodes.map((placed) => nodeGroup(placed, shapes, words, tones.node(placed.id))),
      ...links.flatMap((link) => balloonGroups(link, tones, index)),
    ],
  }
}

/** The part of a chart that a route passed, with the nodes that its outcomes lead to. */
function nearRoute(chart: ChartDocument, route: PictureRoute): ChartDocument {
  const passed = new Set([...route.nodes, ...(route.spentNodes ?? []), ...(route.current === undefined ? [] : [route.current])])
  const edges = chart.edges.filter(({ from }) => passed.has(from))
  const shown = new Set([...passed, ...edges.map(({ to }) => to)])
  return { ...chart, nodes: chart.nodes.filter(({ id }) => shown.has(id)), edges }
}

function wordsOf(words: ReadonlyMap<NodeId, NodeWords>, id: NodeId): NodeWords {
  return words.get(id) ?? { number: '', title: '', note: '', figure: '', outcomes: [], label: '' }
}

/** Strong lines are drawn over faint ones. */
function drawOrder(tone: Tone): number {
  switch (tone) {
    case 'plain':
    case 'quiet':
      return 0
    case 'spent':
      return 1
    case 'walked':
      return 2
    case 'current':
      return 3
    default:
      return assertNever(tone)
  }
}

function edgeGroup({ link, points }: RoutedLink, tone: Tone): MarkGroup {
  const size = tone === 'walked' ? { length: 11, half: 7 } : { length: 8, half: 4.5 }
  const tip = points.at(-1) ?? { x: 0, y: 0 }
  const before = points.at(-2) ?? tip
  const end = towards(tip, before, size.length - 1)
  const role = link.isLoop ? 'edge-loop' : link.isOtherwise ? 'edge-otherwise' : 'edge'
  return {
    of: 'edge',
    from: link.from,
    to: link.to,
    outcomes: link.outcomes,
    marks: [
      { kind: 'path', role, tone, d: roundedPath([...points.slice(0, -1), end], cornerRadius) },
      { kind: 'polygon', role: 'arrow', tone, points: arrowHead(before, tip, size) },
    ],
  }
}

function arrowHead(before: MarkPoint, tip: MarkPoint, { length, half }: { length: number; half: number }): readonly MarkPoint[] {
  const base = towards(tip, before, length)
  const across = towards({ x: 0, y: 0 }, { x: tip.y - before.y, y: before.x - tip.x }, half)
  return [tip, { x: base.x + across.x, y: base.y + across.y }, { x: base.x - across.x, y: base.y - across.y }]
}

function nodeGroup(placed: PlacedNode, shapes: ReadonlyMap<NodeId, NodeShape>, words: ReadonlyMap<NodeId, NodeWords>, tone: Tone): MarkGroup {
  const { id, x, y, width, height } = placed
  const shape = shapes.get(id)
  const box = { x, y, width, height }
  const label = [wordsOf(words, id).label, toneWords[tone]].filter((part) => part !== '').join('. ')
  return { of: 'node', node: id, label, box, marks: shape === undefined ? [] : drawShape(shape, box, tone) }
}

function balloonGroups({ link, balloons }: RoutedLink, tones: RouteTones, index: ChartIndex): readonly MarkGroup[] {
  const node = index.nodes.get(link.from)
  const outcomes = node !== undefined && isDecision(node) ? node.outcomes : []
  return link.outcomes.flatMap((outcome, place) => {
    const center = balloons[place]
    if (center === undefined) return []
    const tone = tones.balloon(link.from, outcome)
    const at = outcomes.findIndex(({ id }) => id === outcome)
    const numeral = at === -1 ? '?' : String(at + 1)
    const marks: readonly Mark[] = [
      { kind: 'circle', role: 'balloon', tone, center, radius: balloonRadius },
      textMark('balloon-numeral', tone, { x: center.x, y: center.y + 4.6 }, 'middle', numeral),
    ]
    return [{ of: 'balloon', from: link.from, outcome, marks }]
  })
}

const countedKinds: readonly (readonly [ChartNode['kind'], string, string])[] = [
  ['check', 'check', 'checks'],
  ['reading', 'reading', 'readings'],
  ['proof', 'proof', 'proofs'],
  ['cause', 'cause', 'causes'],
]

function summaryOf(index: ChartIndex, words: ReadonlyMap<NodeId, NodeWords>, route: PictureRoute | undefined): string {
  const kinds = [...index.nodes.values()].map(({ kind }) => kind)
  const counts = countedKinds.flatMap(([kind, one, many]) => {
    const count = kinds.filter((each) => each === kind).length
    return count === 0 ? [] : [`${count} ${count === 1 ? one : many}`]
  })
  const whole = `Flowchart "${index.chart.title}": ${counts.length === 0 ? 'no checks yet' : counts.join(', ')}.`
  if (route === undefined) return whole
  const passed = route.nodes.map((id) => wordsOf(words, id)).map(({ number, title }) => (number === '' ? title : `${number} ${title}`))
  return passed.length === 0 ? whole : `${whole} The route drawn: ${passed.join(', then ')}.`
}
