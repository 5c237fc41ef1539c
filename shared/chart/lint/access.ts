import type { AccessId, NodeId } from '#shared/lib/ids.ts'
import { onCycle, toDigraph } from '../digraph.ts'
import type { Access } from '../document.ts'
import type { ChartIndex } from '../graph.ts'
import { nameOf, type Rule } from './context.ts'
import { remark } from './remark.ts'

/** No access needs itself, by however many others. */
export const accessRings: Rule = function* ({ index }) {
  const list = [...index.access.values()]
  const numberOf = new Map(list.map((access, number) => [access.id, number]))
  const edges = list.flatMap((access, from) => (access.needs ?? []).flatMap((id) => (numberOf.has(id) ? [[from, numberOf.get(id) ?? 0] as const] : [])))
  const marks = onCycle(toDigraph(list.length, edges))
  const ring = list.filter((_, number) => marks[number] === 1)
  if (ring.length > 0)
    yield remark(
      'access-ring',
      {},
      `${titles(ring)} ${ring.length === 1 ? 'needs itself' : 'need each other'}, so none of them can ever be opened. Take one need out.`,
    )
}

/** What a node needs can be open together, and is not what it wants closed. */
export const needsClash: Rule = function* ({ index }) {
  for (const node of index.nodes.values()) {
    const mayClash = (node.needs?.length ?? 0) > 1 || node.needsOneOf !== undefined || node.closed !== undefined
    if (!mayClash) continue
    const closed = new Set(node.closed)
    const own = node.needs ?? []
    const ways = node.needsOneOf !== undefined && node.needsOneOf.length > 0 ? node.needsOneOf.map((way) => [...own, ...way]) : [own]
    const shut = [...new Set(ways.flat())].filter((id) => closed.has(id))
    for (const id of shut)
      yield remark(
        'needs-clash',
        { node: node.id },
        `${nameOf(index, node)} needs "${titleOf(index, id)}" and wants it closed. Take it out of one of the two lists.`,
      )
    const clashes = new Map(
      ways.flatMap((way) =>
        pairs(way).flatMap(([left, right]) => (excludeEachOther(index, left, right) ? [[`${left} ${right}`, [left, right] as const] as const] : [])),
      ),
    )
    for (const [left, right] of clashes.values())
      yield remark(
        'needs-clash',
        { node: node.id },
        `${nameOf(index, node)} needs both "${titleOf(index, left)}" and "${titleOf(index, right)}", which exclude each other. Take one out, or split the node.`,
      )
  }
}

function pairs(ids: readonly AccessId[]): (readonly [AccessId, AccessId])[] {
  return ids.flatMap((left, place) => ids.slice(place + 1).map((right) => [left, right] as const))
}

function excludeEachOther(index: ChartIndex, left: AccessId, right: AccessId): boolean {
  return left !== right && index.access.get(left)?.excludes?.includes(right) === true && index.access.get(right)?.excludes?.includes(left) === true
}

/** Every access serves some node, if only through another access. */
export const unusedAccess: Rule = function* ({ index }) {
  const used = new Set<AccessId>()
  for (const node of index.nodes.values()) {
    for (const id of node.needs ?? []) used.add(id)
    for (const id of node.needsOneOf?.flat() ?? []) used.add(id)
  }
  for (const id of used) for (const needed of index.access.get(id)?.needs ?? []) used.add(needed)
  for (const access of index.access.values())
    if (!used.has(access.id)) yield remark('unused-access', {}, `No node needs access "${access.title}". Take it out, or name it where it is needed.`)
}

/** An access is one thing in all joined charts, so they describe it alike. */
export const sharedAccess: Rule = function* ({ index, charts }) {
  for (const other of charts.values()) {
    if (other === index) continue
    for (const access of index.access.values()) {
      const theirs = other.access.get(access.id)
      const fields = theirs === undefined ? [] : differences(access, theirs)
      if (fields.length > 0)
        yield remark(
          'access-defined-otherwise',
          {},
          `Access "${access.title}" (${access.id}) has other ${fields.join(', ')} in chart "${other.chart.title}", which is joined to this one. A walk uses those of the chart it began with: make them alike.`,
        )
    }
  }
}

function differences(here: Access, there: Access): string[] {
  return accessFields.flatMap(([words, read]) => (JSON.stringify(read(here)) === JSON.stringify(read(there)) ? [] : [words]))
}

const sorted = (ids: readonly string[] | undefined) => [...new Set(ids)].sort()
const accessFields: readonly (readonly [string, (access: Access) => unknown])[] = [
  ['title', (access) => access.title],
  ['minutes', (access) => access.minutes],
  ['minutes to close', (access) => access.closeMinutes ?? 0],
  ['minutes to wait', (access) => access.waitMinutes ?? 0],
  ['needs', (access) => access.needs ?? []],
  ['exclusions', (access) => sorted(access.excludes)],
  ['cautions', (access) => sorted(access.cautions)],
  ['trap', (access) => access.trap ?? ''],
]

function titleOf(index: ChartIndex, id: AccessId): string {
  return index.access.get(id)?.title ?? id
}

function titles(list: readonly Access[]): string {
  return list.map((access) => `"${access.title}"`).join(', ')
}

/** What a node may have open: all that it needs, whichever way, and what that needs in turn. */
export function accessBehind(index: ChartIndex, id: NodeId): ReadonlySet<AccessId> {
  const node = index.nodes.get(id)
  const open = new Set([...(node?.needs ?? []), ...(node?.needsOneOf ?? []).flat()])
  for (const access of open) for (const needed of index.access.get(access)?.needs ?? []) open.add(needed)
  return open
}
