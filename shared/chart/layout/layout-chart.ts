import type { NodeId } from '#shared/lib/ids.ts'
import type { ChartIndex } from '../graph.ts'
import { toFlow } from './flow.ts'
import { placeOnGrid } from './grid.ts'
import { measure, type ChartLayout, type NodeSize } from './measure.ts'
import { givenPlaces, placeFreely } from './place-freely.ts'
import { planRoutes } from './plan-routes.ts'

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
  return measure(cells, planRoutes(flow, cells), sizeOf)
}
