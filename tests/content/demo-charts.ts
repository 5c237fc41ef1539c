import { readdirSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import { z } from 'zod'
import { toChartSet, type ChartSet } from '#shared/chart/chart-set.ts'
import type { ChartDocument, ChartNode, DecisionNode, NodeOf } from '#shared/chart/document.ts'
import { isDecision } from '#shared/chart/graph.ts'
import { parseChartText } from '#shared/chart/parse.ts'
import { modelIdSchema, specKeyIdSchema } from '#shared/lib/ids.ts'
import { engineKinds, equipmentClasses } from '#shared/trade/equipment.ts'
import { specLimitsSchema } from '#shared/units/limits.ts'

const folder = join(import.meta.dirname, '../../seeds-demo')

/** Names of the chart files of the demo shop, without their ending. */
export const chartFiles: readonly string[] = readdirSync(join(folder, 'charts'))
  .filter((name) => name.endsWith('.json'))
  .map((name) => name.slice(0, -'.json'.length))

/** Text of one chart file. */
export function readChartFile(name: string): string {
  return readFileSync(join(folder, 'charts', `${name}.json`), 'utf8')
}

/** One chart of the demo shop, through the door. */
export function demoChart(name: string): ChartDocument {
  const parsed = parseChartText(readChartFile(name))
  if (!parsed.ok) throw new Error(`${name}: ${parsed.error.errors.map((error) => `${error.pointer} ${error.detail}`).join('; ')}`)
  return parsed.value
}

/** All charts of the demo shop. */
export const demoCharts: readonly ChartDocument[] = chartFiles.map(demoChart)
/** The same, indexed and joined. */
export const demoChartSet: ChartSet = toChartSet(demoCharts)

/** Every node of the demo's charts beside the chart that holds it. */
export const demoNodes: readonly { readonly chart: ChartDocument; readonly node: ChartNode; readonly name: string }[] = demoCharts.flatMap((chart) =>
  chart.nodes.map((node) => ({ chart, node, name: `${chart.id}/${node.id}` })),
)

/** Nodes with outcomes. */
export const demoDecisions = demoNodes.flatMap(({ chart, node, name }): { chart: ChartDocument; node: DecisionNode; name: string }[] =>
  isDecision(node) ? [{ chart, node, name }] : [],
)

/** Nodes of one kind. */
export function demoNodesOf<Kind extends ChartNode['kind']>(kind: Kind): { chart: ChartDocument; node: NodeOf<Kind>; name: string }[] {
  return demoNodes.flatMap(({ chart, node, name }) => (node.kind === kind ? [{ chart, node: node as NodeOf<Kind>, name }] : []))
}

const sourceSchema = z.strictObject({ mark: z.enum(['read', 'from memory', 'common practice', 'own arithmetic']), title: z.string().optional() })
const sheetSchema = z.strictObject({
  id: modelIdSchema,
  maker: z.enum(['Brackenfeld', 'Tolvane', 'Orrinvale', 'Marrowby']),
  name: z.string().min(1),
  class: z.enum(equipmentClasses),
  engine: z.enum(engineKinds),
  limits: specLimitsSchema,
  sources: z.record(specKeyIdSchema, sourceSchema),
})

/** The spec sheets of the demo shop's invented models. */
export const demoSheets = z.array(sheetSchema).parse(JSON.parse(readFileSync(join(folder, 'models.json'), 'utf8')))
