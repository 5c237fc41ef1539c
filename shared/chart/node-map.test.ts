import { describe, expect, test } from 'vitest'
import type { NodeId } from '#shared/lib/ids.ts'
import { nodeMap } from './node-map.ts'

const numbers = new Map([
  ['a' as NodeId, 0],
  ['b' as NodeId, 2],
])

describe.each([
  [
    'every number has a value',
    nodeMap(new Map([...numbers.keys()].map((id, number) => [id, number])), ['A', 'B']),
    new Map([
      ['a', 'A'],
      ['b', 'B'],
    ]),
  ],
  [
    'numbers have gaps, and values stand beside them',
    nodeMap(numbers, ['A', 'double', undefined], new Map([['x' as NodeId, 'X']])),
    new Map([
      ['a', 'A'],
      ['x', 'X'],
    ]),
  ],
])('a map by node numbers, where %s', (_, map, same) => {
  test('answers as a map of the same entries does', () => {
    expect(map.size).toBe(same.size)
    expect([...map]).toEqual([...same])
    expect([...map.entries()]).toEqual([...same])
    expect([...map.keys()]).toEqual([...same.keys()])
    expect([...map.values()]).toEqual([...same.values()])
    for (const id of ['a', 'b', 'x', 'gone']) {
      expect(map.get(id as NodeId)).toBe(same.get(id))
      expect(map.has(id as NodeId)).toBe(same.has(id))
    }
    const seen: unknown[] = []
    map.forEach((value, id) => seen.push([id, value]))
    expect(seen).toEqual([...same])
  })
})
