import type { NodeId } from '#shared/lib/ids.ts'
import type { ChartIndex } from '../graph.ts'
import { toFlow } from './flow.ts'
import { placeOnGrid } from './grid.ts'
import { measure } from './measure.ts'
import { givenPlaces, placeFreely } from './place-freely.ts'
import { planRoutes } from './plan-routes.ts'
import type { ChartLayout, NodeSize } from './sheet.ts'

/**
 * Lays a chart out on a sheet: the main line straight down on the left, what an outcome sets aside to the right of its check, ways back on the left.
 * No two nodes overlap and no line crosses a node. A document that places every node keeps those places, and answers for them.
 * Same chart and sizes, same layout; total on faulty charts.
 */
export function layoutChart(index: ChartIndex, sizeOf: (id: NodeId) => NodeSize): ChartLayout {
  const flow = toFlow(index)
  const places = givenPlaces(index.chart, flow)
  if (places !== null) return placeFreely(flow, places, sizeOf)
  const cells = placeOnGrid(flow)
  const layout = measure(cells, planRoutes(flow, cells), sizeOf)
  const orderOf = new Map(flow.order.map((id, place) => [id, place]))
  return { ...layout, nodes: layout.nodes.toSorted((a, b) => (orderOf.get(a.id) ?? 0) - (orderOf.get(b.id) ?? 0)) }
}
