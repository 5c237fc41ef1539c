import type { NodeId, OutcomeId } from '#shared/lib/ids.ts'
import type { Access, Cause, Caution, ChartDocument, ChartEdge, ChartNode, Outcome, ServiceItem, SpecKey } from './document.ts'

/** Fields to change: a value replaces the field, `null` takes it out, what is absent stays. */
export type Patch<T, Fixed extends string> = T extends unknown ? { readonly [Field in Exclude<keyof T, Fixed>]?: T[Field] | null } : never

/** The lists of a chart whose entries nodes name by id. */
export type EntryLists = { causes: Cause; serviceItems: ServiceItem; specKeys: SpecKey; cautions: Caution; access: Access }
/** One of those lists. */
export type EntryList = keyof EntryLists

/** A place on the drawing, in the units of `positions`. */
export type Point = { readonly x: number; readonly y: number }

/** Where an edge begins: an outcome, or a node that has none. */
export type EdgeStart = { readonly from: NodeId; readonly outcome?: OutcomeId | undefined }

type EntryCommand = {
  [List in EntryList]:
    | { readonly type: 'add-entry'; readonly list: List; readonly entry: EntryLists[List] }
    | { readonly type: 'set-entry'; readonly list: List; readonly id: EntryLists[List]['id']; readonly patch: Patch<EntryLists[List], 'id'> }
    | { readonly type: 'remove-entry'; readonly list: List; readonly id: EntryLists[List]['id'] }
}[EntryList]

/** One edit of a chart, as data. Canvas and outline send the same; what it does, and when it is refused, stands in `applyCommand`. */
export type ChartCommand =
  /** Changes what the chart says of itself. */
  | { readonly type: 'set-chart'; readonly patch: Patch<Pick<ChartDocument, ChartField>, 'title'> & { readonly title?: string } }
  /** Adds nodes, with edges among them or to nodes that are there, and places on the drawing; also what paste does. */
  | {
      readonly type: 'add-nodes'
      readonly nodes: readonly ChartNode[]
      readonly edges?: readonly ChartEdge[]
      readonly positions?: Readonly<Record<string, Point>>
    }
  /** Puts a node into an edge: the edge leads to it, and all its ways on lead to where the edge led. */
  | { readonly type: 'insert-node'; readonly node: ChartNode; readonly into: EdgeStart; readonly position?: Point }
  /** Takes nodes out with their edges; with `closeGap` what led to a node leads on to where its good way led. What else names them stays, and the chart check tells. */
  | { readonly type: 'remove-nodes'; readonly nodeIds: readonly NodeId[]; readonly closeGap?: boolean }
  /** Gives a node another title. */
  | { readonly type: 'rename-node'; readonly nodeId: NodeId; readonly title: string }
  /** Changes fields of a node. Its id and kind stay; outcomes have commands of their own. */
  | { readonly type: 'set-node'; readonly nodeId: NodeId; readonly patch: Patch<ChartNode, 'id' | 'kind' | 'outcomes'> }
  /** Puts another node, of another kind perhaps, in the place of one with its id; edges out of outcomes that it lacks go. */
  | { readonly type: 'replace-node'; readonly node: ChartNode }
  /** Leads an outcome, or a node without outcomes, to a node; an edge that was there gives way. */
  | { readonly type: 'connect'; readonly from: NodeId; readonly outcome?: OutcomeId | undefined; readonly to: NodeId }
  /** Takes an edge out. */
  | { readonly type: 'disconnect'; readonly from: NodeId; readonly outcome?: OutcomeId | undefined }
  /** Adds an outcome, at the end or at a place of the order (0 is balloon 1). */
  | { readonly type: 'add-outcome'; readonly nodeId: NodeId; readonly outcome: Outcome; readonly at?: number }
  /** Changes fields of an outcome. */
  | { readonly type: 'set-outcome'; readonly nodeId: NodeId; readonly outcomeId: OutcomeId; readonly patch: Patch<Outcome, 'id'> }
  /** Takes an outcome out, with its edge, its bands and its grades. */
  | { readonly type: 'remove-outcome'; readonly nodeId: NodeId; readonly outcomeId: OutcomeId }
  /** Moves an outcome to another place of the order (0 is balloon 1). */
  | { readonly type: 'move-outcome'; readonly nodeId: NodeId; readonly outcomeId: OutcomeId; readonly to: number }
  /** Moves nodes on the drawing; one without a place starts from 0, 0. */
  | { readonly type: 'move-nodes'; readonly nodeIds: readonly NodeId[]; readonly by: Point }
  /** Places nodes on the drawing, as the layout does. */
  | { readonly type: 'place-nodes'; readonly positions: Readonly<Record<string, Point>> }
  | EntryCommand

/** What a chart says of itself, as far as an edit may change it. */
export type ChartField = 'title' | 'searchWords' | 'basis' | 'appliesTo' | 'contributing' | 'safetyParts' | 'source'
