import type { NodeId, OutcomeId } from '#shared/lib/ids.ts'
import type { ChartEdge } from '../document.ts'
import { remarkCodes, severities, type RemarkCode, type Severity } from './codes.ts'

/** The edge that a remark is about; without an outcome it is the single edge of a node that has none. */
export type RemarkEdge = { readonly from: NodeId; readonly outcome?: OutcomeId }

/** Names an edge for a remark. */
export function edgeAt({ from, outcome }: ChartEdge): RemarkEdge {
  return outcome === undefined ? { from } : { from, outcome }
}

/** What the chart check has to say. `node` and `edge` are where to look; a remark without either is about the chart as a whole. */
export type Remark = {
  readonly code: RemarkCode
  readonly severity: Severity
  readonly node?: NodeId
  readonly edge?: RemarkEdge
  readonly message: string
}

/** Makes a remark; its severity is that of its code, and its message begins with a capital. */
export function remark(code: RemarkCode, at: { readonly node?: NodeId; readonly edge?: RemarkEdge }, message: string): Remark {
  return { code, severity: remarkCodes[code], ...at, message: message.charAt(0).toUpperCase() + message.slice(1) }
}

/** Sorts remarks by severity, then by where their node stands in the chart (none: first); ties keep the order of the rules. */
export function inOrder(remarks: readonly Remark[], order: ReadonlyMap<NodeId, number>): Remark[] {
  const placeOf = (entry: Remark) => order.get(entry.node ?? entry.edge?.from ?? ('' as NodeId)) ?? -1
  return remarks.toSorted((left, right) => severities.indexOf(left.severity) - severities.indexOf(right.severity) || placeOf(left) - placeOf(right))
}
