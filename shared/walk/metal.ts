import type { Access, ChartNode } from '#shared/chart/document.ts'
import type { ChartIndex } from '#shared/chart/graph.ts'
import type { AccessId } from '#shared/lib/ids.ts'
import type { Located } from './pinned-charts.ts'
import type { Metal, Trigger } from './state.ts'

/** What an act did to the machine. */
export interface Worked {
  readonly metal: Metal
  /** Access opened, in order; one that was closed again within the act is listed all the same. */
  readonly opened: readonly AccessId[]
  readonly closed: readonly AccessId[]
  /** Bench minutes of the openings, each with its closing. */
  readonly minutes: number
  /** Minutes by the clock in which nobody works. */
  readonly waitMinutes: number
  /** Everything that changed, for the cautions that ask to be read again. */
  readonly changed: ReadonlySet<Trigger>
}

/** The machine as it comes onto the bench. */
export const untouched: Metal = { engine: 'stopped', open: [], defeated: [] }

/** What opening an access charges: opening it and, one day, closing it. */
export function openingMinutes(access: Access | undefined): number {
  return (access?.minutes ?? 0) + (access?.closeMinutes ?? 0)
}

/** The machine while hands are on it; written to, then read off once. */
interface Bench {
  open: AccessId[]
  readonly opened: AccessId[]
  readonly closed: AccessId[]
  minutes: number
  waitMinutes: number
}

function benchOf(metal: Metal): Bench {
  return { open: [...metal.open], opened: [], closed: [], minutes: 0, waitMinutes: 0 }
}

function close(bench: Bench, ids: readonly AccessId[]): void {
  for (const id of ids) {
    if (!bench.open.includes(id)) continue
    bench.open = bench.open.filter((open) => open !== id)
    bench.closed.push(id)
  }
}

/**
 * Opens one access: nothing if it is open; else first what it needs, in turn, then itself, which closes what it excludes. `within` holds the
 * accesses that are being opened, so that a ring of needs comes to an end. An access that the chart does not define opens free.
 */
function open(bench: Bench, index: ChartIndex, id: AccessId, within: readonly AccessId[] = []): void {
  if (bench.open.includes(id) || within.includes(id)) return
  const access = index.access.get(id)
  for (const needed of access?.needs ?? []) open(bench, index, needed, [...within, id])
  bench.open.push(id)
  bench.opened.push(id)
  bench.minutes += openingMinutes(access)
  bench.waitMinutes += access?.waitMinutes ?? 0
  close(bench, access?.excludes ?? [])
}

function excludesOf(index: ChartIndex, id: AccessId): readonly AccessId[] {
  return index.access.get(id)?.excludes ?? []
}

/** A node's own list in the order of opening: those that exclude something come last. */
function inOpeningOrder(index: ChartIndex, own: readonly AccessId[]): readonly AccessId[] {
  const excludes = (id: AccessId) => excludesOf(index, id).length > 0
  return [...own.filter((id) => !excludes(id)), ...own.filter(excludes)]
}

function benchAfterOpening(metal: Metal, index: ChartIndex, own: readonly AccessId[]): Bench {
  const bench = benchOf(metal)
  for (const id of inOpeningOrder(index, own)) open(bench, index, id)
  return bench
}

/** Minutes closer than this are the same; sums of tenths are not exact. */
const sameMinutes = 1e-9

/**
 * The accesses that a node asks for itself: its `needs`, and of `needsOneOf` the alternative that is cheapest to have open now, with the
 * needs; the first on ties.
 */
export function ownAccess(metal: Metal, index: ChartIndex, node: ChartNode): readonly AccessId[] {
  const needs = node.needs ?? []
  let best: { readonly own: readonly AccessId[]; readonly minutes: number } | null = null
  for (const alternative of node.needsOneOf ?? []) {
    const own = [...needs, ...alternative]
    const { minutes } = benchAfterOpening(metal, index, own)
    if (best === null || minutes < best.minutes - sameMinutes) best = { own, minutes }
  }
  return best?.own ?? needs
}

/** What the changes of access, engine and safety parts add up to. */
function worked(before: Metal, bench: Bench, after: Pick<Metal, 'engine' | 'defeated'>, parts: readonly Trigger[]): Worked {
  const changed = new Set<Trigger>([...bench.opened, ...bench.closed, ...parts])
  if (before.engine === 'stopped' && after.engine === 'running') changed.add('running')
  const { opened, closed, minutes, waitMinutes } = bench
  return { metal: { ...after, open: bench.open }, opened, closed, minutes, waitMinutes, changed }
}

/**
 * What recording a node does to the machine: its access is opened, then what its own accesses exclude and what it wants closed is closed,
 * free; the engine runs or stands as the node says; the safety parts that it defeats go out of action, those that it restores come back.
 */
export function enter(metal: Metal, { index, node }: Located): Worked {
  const own = ownAccess(metal, index, node)
  const bench = benchAfterOpening(metal, index, own)
  for (const id of own) close(bench, excludesOf(index, id))
  close(bench, node.closed ?? [])
  const restores = node.restores ?? []
  const fresh = (node.defeats ?? []).filter((part) => !metal.defeated.includes(part))
  const back = restores.filter((part) => metal.defeated.includes(part) || fresh.includes(part))
  const defeated = [...metal.defeated, ...fresh].filter((part) => !restores.includes(part))
  return worked(metal, bench, { engine: node.machine ?? metal.engine, defeated }, [...fresh, ...back])
}

/** Several acts, one after the other. */
export function enterAll(metal: Metal, nodes: readonly Located[]): Worked {
  return nodes.reduce<Worked>((before, node) => {
    const next = enter(before.metal, node)
    return {
      metal: next.metal,
      opened: [...before.opened, ...next.opened],
      closed: [...before.closed, ...next.closed],
      minutes: before.minutes + next.minutes,
      waitMinutes: before.waitMinutes + next.waitMinutes,
      changed: new Set([...before.changed, ...next.changed]),
    }
  }, nothingDone(metal))
}

/** An act that left the machine alone. */
export function nothingDone(metal: Metal): Worked {
  return { metal, opened: [], closed: [], minutes: 0, waitMinutes: 0, changed: new Set() }
}

/** What opening one access out of turn takes: what it needs first, then itself. */
export function openOne(metal: Metal, index: ChartIndex, id: AccessId): Worked {
  const bench = benchOf(metal)
  open(bench, index, id)
  return worked(metal, bench, metal, [])
}

/** What an `access-changed` says was done, taken at its word: first closed, then opened one by one, each charged once. */
export function changeAccess(
  metal: Metal,
  definitionOf: (id: AccessId) => Access | undefined,
  opened: readonly AccessId[],
  closed: readonly AccessId[],
): Worked {
  const bench = benchOf(metal)
  close(bench, closed)
  for (const id of opened) {
    if (bench.open.includes(id)) continue
    const access = definitionOf(id)
    bench.open.push(id)
    bench.opened.push(id)
    bench.minutes += openingMinutes(access)
    bench.waitMinutes += access?.waitMinutes ?? 0
  }
  return worked(metal, bench, metal, [])
}
