import type { Access, ChartDocument, ChartNode } from '#shared/chart/document.ts'
import { indexChart, type ChartIndex } from '#shared/chart/graph.ts'
import { splitPlace, toPlace, type AccessId, type ChartId, type NodeId, type Place } from '#shared/lib/ids.ts'

/** The published versions that walks are pinned to: all the charts that guard, evolve and the pages ever look at. */
export interface PinnedCharts {
  /** One version of a chart; `null` when it is not there. */
  find(chartId: ChartId, version: number): ChartIndex | null
  /** Whether a version that is not found does not exist. Files of the command line hold what lies beside them, and no more. */
  readonly holdsAll: boolean
}

/** The given versions; of one version given twice the first counts. */
export function toPinnedCharts(versions: Iterable<{ readonly version: number; readonly document: ChartDocument }>): PinnedCharts {
  const byName = new Map<string, ChartIndex>()
  for (const { version, document } of versions) {
    const name = `${document.id}@${version}`
    if (!byName.has(name)) byName.set(name, indexChart(document))
  }
  return { find: (chartId, version) => byName.get(`${chartId}@${version}`) ?? null, holdsAll: true }
}

/** Each chart standing for whatever version is asked of it: files of the command line, a draft that is being tried. */
export function anyVersionOf(documents: Iterable<ChartDocument>): PinnedCharts {
  const byId = new Map<ChartId, ChartIndex>()
  for (const document of documents) if (!byId.has(document.id)) byId.set(document.id, indexChart(document))
  return { find: (chartId) => byId.get(chartId) ?? null, holdsAll: false }
}

/** A node with the chart that holds it. */
export interface Located {
  readonly index: ChartIndex
  readonly node: ChartNode
}

/** The versions by which a walk goes. */
export type Pins = Readonly<Record<ChartId, number>>

/** The version of a chart by which a walk goes; `null` when it pins none, or one that is not there. */
export function chartOf(charts: PinnedCharts, pins: Pins, chartId: ChartId): ChartIndex | null {
  const version = Object.hasOwn(pins, chartId) ? pins[chartId] : undefined
  return version === undefined ? null : charts.find(chartId, version)
}

/** All charts by which a walk goes, in the order of its pins. */
export function chartsOf(charts: PinnedCharts, pins: Pins): readonly ChartIndex[] {
  return (Object.keys(pins) as ChartId[]).flatMap((chartId) => chartOf(charts, pins, chartId) ?? [])
}

/** The node at a place; `null` when the walk's charts hold no such node. */
export function locate(charts: PinnedCharts, pins: Pins, place: Place): Located | null {
  const { chartId, nodeId } = splitPlace(place)
  const index = chartOf(charts, pins, chartId)
  const node = index?.nodes.get(nodeId)
  return index && node ? { index, node } : null
}

/** The place of a node of a chart. */
export function placeOf(index: ChartIndex, nodeId: NodeId): Place {
  return toPlace(index.id, nodeId)
}

/** The charts that a walk is in: the one where it stands, then those that called it, the nearest first. */
export function chartsOnStack(
  charts: PinnedCharts,
  walk: { readonly pins: Pins; readonly node: Place; readonly calls: readonly Place[] },
): readonly ChartIndex[] {
  const ids = new Set([walk.node, ...walk.calls.toReversed()].map((place) => splitPlace(place).chartId))
  return [...ids].flatMap((chartId) => chartOf(charts, walk.pins, chartId) ?? [])
}

/** An access as the walk's charts define it: the chart where it stands first, then those that called it, then any other that it pins. */
export function accessOnStack(
  charts: PinnedCharts,
  walk: { readonly pins: Pins; readonly node: Place; readonly calls: readonly Place[] },
  id: AccessId,
): Access | undefined {
  for (const index of [...chartsOnStack(charts, walk), ...chartsOf(charts, walk.pins)]) {
    const access = index.access.get(id)
    if (access !== undefined) return access
  }
  return undefined
}
