import type { SafetyPartId } from '#shared/lib/ids.ts'
import type { Access, ChartNode, DecisionNode } from '../document.ts'
import { isDecision, type ChartIndex } from '../graph.ts'
import { nameOf, repeated, type LintContext, type Rule } from './context.ts'
import type { RemarkCode } from './codes.ts'
import { remark, type Remark } from './remark.ts'

/** No id stands for two things. */
export const uniqueIds: Rule = function* ({ index, chart }) {
  for (const node of index.nodes.size === chart.nodes.length ? [] : repeated(chart.nodes, ({ id }) => id))
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
  for (const node of chart.nodes) {
    if (!isDecision(node)) continue
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
  const parts = new Set(chart.safetyParts)
  for (const node of index.nodes.values()) {
    yield* machineReferences(index, parts, node)
    yield* libraryReferences(index, node)
    if (isDecision(node)) yield* decisionReferences(context, node)
  }
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

function unknown(index: ChartIndex, node: ChartNode, code: RemarkCode, verb: string, what: string, owner = 'the chart'): Remark {
  return remark(code, { node: node.id }, `${nameOf(index, node)} ${verb} ${what}, which ${owner} does not have. Add it, or name another.`)
}

function* machineReferences(index: ChartIndex, parts: ReadonlySet<SafetyPartId>, node: ChartNode): Iterable<Remark> {
  for (const id of node.needs ?? []) if (!index.access.has(id)) yield unknown(index, node, 'unknown-access', 'needs', `access ${id}`)
  for (const id of node.needsOneOf?.flat() ?? []) if (!index.access.has(id)) yield unknown(index, node, 'unknown-access', 'needs', `access ${id}`)
  for (const id of node.cautions ?? []) if (!index.cautions.has(id)) yield unknown(index, node, 'unknown-caution', 'names', `caution ${id}`)
  if (node.defeats === undefined && node.restores === undefined) return
  for (const id of new Set([...(node.defeats ?? []), ...(node.restores ?? [])]))
    if (!parts.has(id)) yield unknown(index, node, 'unknown-safety-part', 'names', `safety part ${id}`, "the chart's list of safety parts")
}

function* libraryReferences(index: ChartIndex, node: ChartNode): Iterable<Remark> {
  const cause = node.kind === 'cause' || node.kind === 'hold' ? node.causeId : node.kind === 'proof' ? node.suspect : undefined
  if (cause !== undefined && !index.causes.has(cause)) yield unknown(index, node, 'unknown-cause', 'names', `cause ${cause}`, 'the library')
  const spec = node.kind === 'reading' && node.limits !== undefined && 'spec' in node.limits ? node.limits.spec : undefined
  if (spec !== undefined && !index.specKeys.has(spec))
    yield unknown(index, node, 'unknown-spec-key', 'takes its limits from', `spec key ${spec}`, 'the library')
}

function* decisionReferences(context: LintContext, node: DecisionNode): Iterable<Remark> {
  const { index } = context
  for (const { serviceItem } of node.outcomes) {
    if (serviceItem !== undefined && !index.serviceItems.has(serviceItem))
      yield unknown(index, node, 'unknown-service-item', 'adds', `service item ${serviceItem}`, 'the library')
  }
  if (node.sameAs !== undefined && !isDecisionId(context, node.sameAs))
    yield unknown(index, node, 'unknown-node', 'is the same check as', `node ${node.sameAs}`)
  if (node.kind === 'proof' && node.compares !== undefined && !index.nodes.has(node.compares.node))
    yield unknown(index, node, 'unknown-node', 'compares with', `node ${node.compares.node}`)
  const spokenOf = outcomesSpokenOf(node)
  for (const id of new Set(spokenOf)) {
    if (!node.outcomes.some((outcome) => outcome.id === id))
      yield remark(
        'unknown-outcome',
        { node: node.id },
        `${nameOf(index, node)} speaks of outcome ${id}, which it does not have. Add the outcome, or name another.`,
      )
  }
  for (const id in node.rows)
    if (!isKnownCause(context, id))
      yield remark(
        'unknown-cause',
        { node: node.id },
        `${nameOf(index, node)} grades cause ${id}, which neither this chart nor a chart joined to it has. Add it, or name another.`,
      )
}

/** Outcomes that a node names beside its list: where an unanswered check goes, what bands stand for, what grades are about. */
function outcomesSpokenOf(node: DecisionNode): readonly string[] {
  const ids: string[] = []
  if (node.ifSkipped !== undefined) ids.push(node.ifSkipped)
  if (node.kind === 'reading') for (const band of node.bands ?? []) ids.push(band.outcome)
  if (node.rows !== undefined) for (const row of Object.values(node.rows)) ids.push(...Object.keys(row))
  return ids
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
