import { useEffect, useId, useRef, useState, type KeyboardEvent } from 'react'

import type { NodeId } from '#shared/lib/ids.ts'
import type { MarkGroup, Picture } from '#shared/plots/marks.ts'
import { MarkShape } from './mark-shape.tsx'

type NodeGroup = Extract<MarkGroup, { of: 'node' }>

type ChartPictureProps = {
  readonly picture: Picture
  /** The node that is marked as chosen; it is brought into view when it changes. */
  readonly highlight?: NodeId | null
  /** Makes the nodes buttons: one tab stop, arrow keys from node to node in route order. */
  readonly onSelect?: (node: NodeId) => void
  /** The picture shrinks to the width of its place down to this share of its own size; below that it scrolls sideways. */
  readonly leastScale?: number
  readonly className?: string
}

/** A chart drawn from its marks in the page's colours. It shows; the list of the same route beside it is its equal in words. */
export function ChartPicture({ picture, highlight = null, onSelect, leastScale = 0.75, className = '' }: ChartPictureProps) {
  const id = useId()
  const place = useRef<HTMLDivElement>(null)
  useEffect(() => {
    if (highlight !== null) bringIntoView(place.current, highlight)
  }, [highlight])
  const isChoice = onSelect !== undefined
  return (
    <div ref={place} className={`overflow-auto bg-well ${className}`} {...(isChoice ? {} : { tabIndex: 0, role: 'region', 'aria-label': picture.title })}>
      <svg
        viewBox={`0 0 ${picture.width} ${picture.height}`}
        role={isChoice ? 'group' : 'img'}
        aria-labelledby={`${id}-title ${id}-summary`}
        className="mx-auto block h-auto"
        style={{ width: '100%', minWidth: picture.width * leastScale, maxWidth: picture.width }}
      >
        <title id={`${id}-title`}>{picture.title}</title>
        <desc id={`${id}-summary`}>{picture.summary}</desc>
        {picture.groups.map((group, index) => group.of === 'edge' && <Marks key={index} group={group} />)}
        {isChoice ? (
          <NodeButtons nodes={picture.groups.filter((group) => group.of === 'node')} highlight={highlight} onSelect={onSelect} />
        ) : (
          picture.groups.map((group, index) => group.of === 'node' && <Marks key={index} group={group} isChosen={group.node === highlight} />)
        )}
        {picture.groups.map((group, index) => group.of === 'balloon' && <Marks key={index} group={group} />)}
      </svg>
    </div>
  )
}

/** Scrolls the picture, and nothing around it, so that a node stands in the middle of what is seen. */
function bringIntoView(place: HTMLElement | null, node: NodeId): void {
  const mark = place?.querySelector(`[data-node="${CSS.escape(node)}"]`)
  if (!place || !mark) return
  const around = place.getBoundingClientRect()
  const box = mark.getBoundingClientRect()
  const isSeen = box.top >= around.top && box.bottom <= around.bottom && box.left >= around.left && box.right <= around.right
  if (isSeen) return
  place.scrollTo({ top: place.scrollTop + box.top - around.top - (around.height - box.height) / 2, left: place.scrollLeft + box.left - around.left - (around.width - box.width) / 2 })
}

function Marks({ group, isChosen = false }: { readonly group: MarkGroup; readonly isChosen?: boolean }) {
  return (
    <g aria-hidden="true" {...(group.of === 'node' ? { 'data-node': group.node } : {})}>
      {group.marks.map((mark, index) => (
        <MarkShape key={index} mark={mark} tone={isChosen ? 'current' : mark.tone} />
      ))}
    </g>
  )
}

type NodeButtonsProps = { readonly nodes: readonly NodeGroup[]; readonly highlight: NodeId | null; readonly onSelect: (node: NodeId) => void }

function NodeButtons({ nodes, highlight, onSelect }: NodeButtonsProps) {
  const [lastFocused, setLastFocused] = useState<NodeId | null>(null)
  const buttons = useRef(new Map<NodeId, SVGGElement>())
  const stop = [lastFocused, highlight].find((id) => id !== null && nodes.some(({ node }) => node === id)) ?? nodes[0]?.node
  const move = (event: KeyboardEvent, from: number) => {
    const to = targetOf(event.key, from, nodes.length)
    const target = to === null ? undefined : nodes[to]
    if (!target) return
    event.preventDefault()
    buttons.current.get(target.node)?.focus()
  }
  return nodes.map((group, index) => (
    <g
      key={group.node}
      ref={(element) => {
        if (element) buttons.current.set(group.node, element)
        return () => {
          buttons.current.delete(group.node)
        }
      }}
      data-node={group.node}
      role="button"
      aria-label={group.label}
      aria-pressed={group.node === highlight}
      tabIndex={group.node === stop ? 0 : -1}
      className="group cursor-pointer outline-none select-none"
      onClick={() => onSelect(group.node)}
      onFocus={() => setLastFocused(group.node)}
      onKeyDown={(event) => {
        if (event.key === 'Enter' || event.key === ' ') {
          event.preventDefault()
          onSelect(group.node)
        } else move(event, index)
      }}
    >
      <rect
        className="opacity-0 group-focus-visible:opacity-100"
        x={group.box.x - 6}
        y={group.box.y - 6}
        width={group.box.width + 12}
        height={group.box.height + 12}
        fill="none"
        stroke="var(--focus)"
        strokeWidth="3"
      />
      <Marks group={group} isChosen={group.node === highlight} />
    </g>
  ))
}

/** Where an arrow key leads from a node; `null` for any other key, and past either end. */
function targetOf(key: string, from: number, count: number): number | null {
  switch (key) {
    case 'ArrowDown':
    case 'ArrowRight':
      return from + 1 < count ? from + 1 : null
    case 'ArrowUp':
    case 'ArrowLeft':
      return from > 0 ? from - 1 : null
    case 'Home':
      return 0
    case 'End':
      return count - 1
    default:
      return null
  }
}
