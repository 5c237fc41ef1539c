import type { NodeId } from '#shared/lib/ids.ts'
import type { FlowLink } from './flow.ts'

/** A point of the sheet, px from its top left corner. */
export interface Point {
  readonly x: number
  readonly y: number
}

/** What a node takes on the sheet; `above` is the part of its mark that stands over its top edge, such as the tab of a check. */
export interface NodeSize {
  readonly width: number
  readonly height: number
  readonly above: number
}

/** A node in its place: left and top of its body, without what stands over its top edge. */
export interface PlacedNode extends NodeSize {
  readonly id: NodeId
  readonly x: number
  readonly y: number
}

/** A link as it is drawn: corners of its line, right-angled, and the middles of its balloons, one for every outcome. */
export interface RoutedLink {
  readonly link: FlowLink
  readonly points: readonly Point[]
  readonly balloons: readonly Point[]
}

/** A chart in its place on the sheet. */
export interface ChartLayout {
  readonly width: number
  readonly height: number
  /** In route order. */
  readonly nodes: readonly PlacedNode[]
  readonly links: readonly RoutedLink[]
}

/** Radius of a balloon. */
export const balloonRadius = 10
/** Distance between the middles of balloons that sit side by side. */
export const balloonPitch = 23
