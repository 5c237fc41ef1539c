import type { Access, ChartNode } from '../document.ts'
import { isDecision } from '../graph.ts'
import { nameOf, repeated, type LintContext, type Rule } from './context.ts'
import type { RemarkCode } from './codes.ts'
import { remark, type Remark } from './remark.ts'

/** No id stands for two things. */
export const uniqueIds: Rule = function* ({ index, chart }) {
  for (const node of repeated(chart.nodes, ({ id }) => id))
    yield remark('duplicate-id', { node: node.id }, `Two nodes are called ${node.id}. Give one of them, ${nameOf(index, node)}, another id.`)
  const lists: readonly (readonly [string, readonly { readonly id: string }[] | undefined])[] = [
    ['cautions', chart.cautions],
    ['accesses', chart.access],
    ['causes', chart.library.causes],
    ['service items', chart.library.serviceItems],
    ['spec keys', chart.library.specKeys],
  ]
  for (const [name, list] of lists) {
    for (const { id } of repeated(list ?? [], (entry) => entry.id))
      yield remark('duplicate-id', {}, `Two ${name} are called ${id}. Give one of them another id, or take it out.`)
  }
  for (const node of chart.nodes.filter(isDecision)) {
    for (const { id } of repeated(node.outcomes, (outcome) => outcome.id))
      yield remark(
        'duplicate-outcome',
        { node: node.id, edge: { from: node.id, outcome: id } },
        `Two outcomes of ${nameOf(index, node)} are called ${id}. Give one of them another id.`,
      )
  }
}

/** Whatever a node or an entry names exists. What an access excludes, or a node wants closed, may be foreign to the chart. */
export const references: Rule = function* (context) {
  const { index, chart } = context
  for (const node of index.nodes.values()) yield* nodeReferences(context, node)
  for (const access of chart.access ?? []) yield* accessReferences(context, access)
  for (const id of chart.contributing ?? []) {
    if (!index.causes.has(id))
      yield remark(
        'unknown-cause',
        {},
        `The chart lists ${id} as something that leads to its causes, but its library has no such cause. Add it, or take it off the list.`,
      )
  }
}

function* nodeReferences(context: LintContext, node: ChartNode): Iterable<Remark> {
  const { index, chart } = context
  const name = nameOf(index, node)
  const unknown = (code: RemarkCode, verb: string, thing: string, id: string, where: string) =>
    remark(code, { node: node.id }, `${name} ${verb} ${thing} ${id}, which ${where} does not have. Add it, or name another.`)
  for (const id of [...(node.needs ?? []), ...(node.needsOneOf ?? []).flat()])
    if (!index.access.has(id)) yield unknown('unknown-access', 'needs', 'access', id, 'the chart')
  for (const id of node.cautions ?? []) if (!index.cautions.has(id)) yield unknown('unknown-caution', 'names', 'caution', id, 'the chart')
  const parts = new Set(chart.safetyParts)
  for (const id of new Set([...(node.defeats ?? []), ...(node.restores ?? [])]))
    if (!parts.has(id)) yield unknown('unknown-safety-part', 'names', 'safety part', id, "the chart's list of safety parts")
  const causes = [node.kind === 'cause' || node.kind === 'hold' ? node.causeId : undefined, node.kind === 'proof' ? node.suspect : undefined]
  for (const id of causes) if (id !== undefined && !index.causes.has(id)) yield unknown('unknown-cause', 'names', 'cause', id, 'the library')
  if (node.kind === 'reading' && node.limits !== undefined && 'spec' in node.limits && !index.specKeys.has(node.limits.spec)) {
    yield unknown('unknown-spec-key', 'takes its limits from', 'spec key', node.limits.spec, 'the library')
  }
  if (!isDecision(node)) return
  for (const { serviceItem } of node.outcomes)
    if (serviceItem !== undefined && !index.serviceItems.has(serviceItem))
      yield unknown('unknown-service-item', 'adds', 'service item', serviceItem, 'the library')
  if (node.sameAs !== undefined && !isDecisionId(context, node.sameAs)) yield unknown('unknown-node', 'is the same check as', 'node', node.sameAs, 'the chart')
  if (node.kind === 'proof' && node.compares !== undefined && !index.nodes.has(node.compares.node))
    yield unknown('unknown-node', 'compares with', 'node', node.compares.node, 'the chart')
  const outcomes = new Set(node.outcomes.map((outcome) => outcome.id))
  const bands = node.kind === 'reading' ? (node.bands ?? []) : []
  const graded = Object.values(node.rows ?? {}).flatMap((row) => Object.keys(row) as (typeof node.outcomes)[number]['id'][])
  for (const id of new Set([...(node.ifSkipped === undefined ? [] : [node.ifSkipped]), ...bands.map((band) => band.outcome), ...graded])) {
    if (!outcomes.has(id))
      yield remark('unknown-outcome', { node: node.id }, `${name} speaks of outcome ${id}, which it does not have. Add the outcome, or name another.`)
  }
  for (const id of Object.keys(node.rows ?? {}))
    if (!isKnownCause(context, id)) yield unknown('unknown-cause', 'grades', 'cause', id, 'neither this chart nor a chart joined to it')
}

function isDecisionId({ index }: LintContext, id: ChartNode['id']): boolean {
  const node = index.nodes.get(id)
  return node !== undefined && isDecision(node)
}

/** A check may grade causes that a joined chart proves; while one of those charts is missing nobody can tell. */
function isKnownCause({ charts, missingCharts }: LintContext, id: string): boolean {
  if (id === 'unlisted' || missingCharts.size > 0) return true
  return [...charts.values()].some(({ causes }) => (causes as ReadonlyMap<string, unknown>).has(id))
}

function* accessReferences({ index }: LintContext, access: Access): Iterable<Remark> {
  for (const id of access.needs ?? [])
    if (!index.access.has(id))
      yield remark('unknown-access', {}, `Access "${access.title}" needs access ${id}, which the chart does not have. Add it, or name another.`)
  for (const id of access.cautions ?? [])
    if (!index.cautions.has(id))
      yield remark('unknown-caution', {}, `Access "${access.title}" names caution ${id}, which the chart does not have. Add it, or name another.`)
}
