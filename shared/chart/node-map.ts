import type { NodeId } from '#shared/lib/ids.ts'

/**
 * A read-only map from node ids to values that stand in a list by the number of the node; `rest` holds what belongs to
 * ids that have no number. Several such maps share one table of numbers, which makes the index of a large chart cheap.
 */
export function nodeMap<V>(
  numbers: ReadonlyMap<NodeId, number>,
  values: readonly (V | undefined)[],
  rest: ReadonlyMap<NodeId, V> = new Map(),
): ReadonlyMap<NodeId, V> {
  const get = (id: NodeId): V | undefined => {
    const number = numbers.get(id)
    return number === undefined ? rest.get(id) : values[number]
  }
  function* entries(): MapIterator<[NodeId, V]> {
    for (const [id, number] of numbers) {
      const value = values[number]
      if (value !== undefined) yield [id, value]
    }
    yield* rest
  }
  function* keys(): MapIterator<NodeId> {
    for (const [id] of entries()) yield id
  }
  function* list(): MapIterator<V> {
    for (const number of numbers.values()) {
      const value = values[number]
      if (value !== undefined) yield value
    }
    yield* rest.values()
  }
  // Every id has a value and every value an id: the list itself can be walked, which costs far less.
  const isWhole = rest.size === 0 && numbers.size === values.length && !values.includes(undefined)
  const map: ReadonlyMap<NodeId, V> = {
    get,
    has: (id) => get(id) !== undefined,
    get size() {
      return isWhole ? values.length : [...list()].length
    },
    entries,
    keys,
    values: isWhole ? () => (values as readonly V[]).values() : list,
    [Symbol.iterator]: entries,
    forEach: (act) => {
      for (const [id, value] of entries()) act(value, id, map)
    },
  }
  return map
}
