import { toChartSet } from '#shared/chart/chart-set.ts'
import { indexChart } from '#shared/chart/graph.ts'
import { lintChart, type LintOptions } from '#shared/chart/lint/lint-chart.ts'
import type { Remark } from '#shared/chart/lint/remark.ts'
import { buildChart, type ChartSketch } from './chart-builder.ts'

/** Everything that the chart check says about a sketch, other sketches being the published charts around it. */
export function remarksOf(sketch: ChartSketch, others: readonly ChartSketch[] = [], options: LintOptions = {}): Remark[] {
  const known = toChartSet(others.map(buildChart))
  return lintChart(indexChart(buildChart(sketch)), { others: (id) => known.get(id), ...options })
}

/** The same, each remark as "code", "code node" or "code from.outcome". */
export function saysOf(sketch: ChartSketch, others: readonly ChartSketch[] = [], options: LintOptions = {}): string[] {
  return remarksOf(sketch, others, options).map(({ code, node, edge }) =>
    [code, edge?.outcome === undefined ? (node ?? edge?.from) : `${edge.from}.${edge.outcome}`].filter((part) => part !== undefined).join(' '),
  )
}

/** A sketch with some nodes replaced (by id) or added, and edges taken out and put in. */
export function vary(
  sketch: ChartSketch,
  change: { nodes?: ChartSketch['nodes']; without?: readonly string[]; drop?: readonly string[]; edges?: readonly string[]; more?: Partial<ChartSketch> },
): ChartSketch {
  const changed = new Map((change.nodes ?? []).map((node) => [node['id'], node]))
  const kept = sketch.nodes.filter((node) => !change.without?.includes(String(node['id']))).map((node) => changed.get(node['id']) ?? node)
  const known = new Set(sketch.nodes.map((node) => node['id']))
  return {
    ...sketch,
    nodes: [...kept, ...(change.nodes ?? []).filter((node) => !known.has(node['id']))],
    edges: [...sketch.edges.filter((edge) => !change.drop?.includes(edge)), ...(change.edges ?? [])],
    ...change.more,
  }
}
