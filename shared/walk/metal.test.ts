import { describe, expect, test } from 'vitest'

import type { ChartNode } from '#shared/chart/document.ts'
import { indexChart } from '#shared/chart/graph.ts'
import type { AccessId, NodeId } from '#shared/lib/ids.ts'
import { buildChart, check, start } from '#tests/support/chart-builder.ts'
import { enter, enterAll, openOne, untouched, type Worked } from './metal.ts'
import type { Metal } from './state.ts'

const ids = (...names: string[]) => names as AccessId[]

/** Accesses as a bench knows them: warm excludes all that must be shut for a run, cool excludes warm. */
const accesses = [
  { id: 'warm', title: 'Warm', minutes: 3, closeMinutes: 0, excludes: ['cool', 'lead-off', 'plug-out', 'clutch-off'] },
  { id: 'cool', title: 'Cooled down', minutes: 0, closeMinutes: 0, waitMinutes: 10, excludes: ['warm'] },
  { id: 'lead-off', title: 'Lead off', minutes: 0.5, closeMinutes: 0.5 },
  { id: 'top-off', title: 'Top cover off', minutes: 1, closeMinutes: 1 },
  { id: 'plug-out', title: 'Plug out', minutes: 2, closeMinutes: 2, needs: ['top-off', 'cool'] },
  { id: 'screen-out', title: 'Screen out', minutes: 3, closeMinutes: 3, needs: ['cool'] },
  { id: 'cover-off', title: 'Clutch cover off', minutes: 2, closeMinutes: 2, needs: ['lead-off'] },
  { id: 'chain-off', title: 'Chain off', minutes: 1, closeMinutes: 2, needs: ['cover-off'] },
  { id: 'hatch-off', title: 'Hatch off', minutes: 0.7, closeMinutes: 0.3 },
  { id: 'loop-a', title: 'Needs the other', minutes: 1, needs: ['loop-b'] },
  { id: 'loop-b', title: 'Needs the first', minutes: 1, needs: ['loop-a'] },
]

function node(more: Record<string, unknown>) {
  const index = indexChart(buildChart({ nodes: [start(), check('n1', ['good', 'bad'], more)], edges: ['s > n1'], access: accesses }))
  return { index, node: index.nodes.get('n1' as NodeId) as ChartNode }
}

function entering(metal: Partial<Metal>, more: Record<string, unknown>): Worked {
  return enter({ ...untouched, ...metal }, node(more))
}

describe('opening access', () => {
  test('what is needed is opened first, and each opening charges its closing with it', () => {
    const done = entering({}, { needs: ['plug-out'] })
    expect(done.opened).toEqual(ids('top-off', 'cool', 'plug-out'))
    expect(done.minutes).toBe(6)
    expect(done.waitMinutes).toBe(10)
  })

  test('covers that are opened once are charged once', () => {
    const first = entering({}, { needs: ['cover-off'] })
    const second = entering(first.metal, { needs: ['cover-off', 'lead-off'] })
    expect([first.minutes, second.minutes]).toEqual([5, 0])
    expect(second.opened).toEqual([])
  })

  test('an open access asks no more for what it needed while it was opened: the cover may stay off once the lead is back on', () => {
    const done = entering({ open: ids('cover-off') }, { needs: ['chain-off'] })
    expect(done.opened).toEqual(ids('chain-off'))
    expect(done.minutes).toBe(3)
  })

  test('of several ways in the one that is cheapest now is taken', () => {
    const ways = { needsOneOf: [['screen-out'], ['cover-off']] }
    expect(entering({}, ways).opened).toEqual(ids('lead-off', 'cover-off'))
    expect(entering({ open: ids('screen-out') }, ways).minutes).toBe(0)
    expect(entering({ open: ids('lead-off') }, ways).minutes).toBe(4)
  })

  test('of ways in that cost the same the first is taken', () => {
    expect(entering({}, { needsOneOf: [['lead-off'], ['hatch-off']] }).opened).toEqual(ids('lead-off'))
    expect(entering({}, { needsOneOf: [['hatch-off'], ['lead-off']] }).opened).toEqual(ids('hatch-off'))
    expect(entering({ open: ids('lead-off') }, { needsOneOf: [['screen-out', 'lead-off'], ['screen-out']] }).opened).toEqual(ids('cool', 'screen-out'))
  })

  test('what a way in shares with the needs of the node counts once', () => {
    const done = entering({}, { needs: ['lead-off'], needsOneOf: [['screen-out'], ['cover-off']] })
    expect(done.opened).toEqual(ids('lead-off', 'cover-off'))
    expect(done.minutes).toBe(5)
  })

  test('opening closes, free, what it excludes, and opening that again costs again', () => {
    const warm = entering({}, { needs: ['warm'] })
    const plug = entering(warm.metal, { needs: ['plug-out'] })
    expect(plug.closed).toEqual(ids('warm'))
    expect(plug.metal.open).toEqual(ids('top-off', 'cool', 'plug-out'))
    const run = entering(plug.metal, { needs: ['warm'] })
    expect(run.closed).toEqual(ids('cool', 'plug-out'))
    expect(run.minutes).toBe(3)
    expect(entering(run.metal, { needs: ['plug-out'] }).opened).toEqual(ids('cool', 'plug-out'))
  })

  test('of a node its own list opens what excludes others last: a proof pays for the plug and runs with it in', () => {
    for (const needs of [
      ['plug-out', 'warm'],
      ['warm', 'plug-out'],
    ]) {
      const done = entering({}, { needs })
      expect(done.opened).toEqual(ids('top-off', 'cool', 'plug-out', 'warm'))
      expect(done.minutes).toBe(9)
      expect(done.metal.open).toEqual(ids('top-off', 'warm'))
    }
  })

  test('at the end what the own accesses exclude and what the node wants closed is closed, even if nothing had to be opened', () => {
    const done = entering({ open: ids('warm', 'lead-off', 'cover-off') }, { needs: ['warm'], closed: ['cover-off', 'nobody-knows-it'] })
    expect(done.closed).toEqual(ids('lead-off', 'cover-off'))
    expect(done.minutes).toBe(0)
    expect(done.metal.open).toEqual(ids('warm'))
  })

  test('closing closes nothing else', () => {
    const done = entering({ open: ids('lead-off', 'cover-off', 'chain-off') }, { closed: ['lead-off'] })
    expect(done.metal.open).toEqual(ids('cover-off', 'chain-off'))
  })

  test('a ring of needs comes to an end, and an access that nobody defined opens free', () => {
    expect(entering({}, { needs: ['loop-a'] }).opened).toEqual(ids('loop-b', 'loop-a'))
    const { index, node: faulty } = node({})
    expect(enter(untouched, { index, node: { ...faulty, needs: ids('nobody-knows-it') } })).toMatchObject({ opened: ['nobody-knows-it'], minutes: 0 })
  })

  test('several nodes of one page add up', () => {
    const done = enterAll(untouched, [node({ needs: ['lead-off'] }), node({ needs: ['cover-off'], machine: 'running' })])
    expect(done).toMatchObject({ opened: ['lead-off', 'cover-off'], minutes: 5, metal: { engine: 'running' } })
  })

  test('one access out of turn opens what it needs with it', () => {
    const { index } = node({})
    expect(openOne(untouched, index, ids('chain-off')[0] as AccessId)).toMatchObject({ opened: ['lead-off', 'cover-off', 'chain-off'], minutes: 8 })
  })
})

describe('engine and safety parts', () => {
  test('a node without a word on the engine leaves it as it is; only from stopped to running counts as a start', () => {
    expect(entering({ engine: 'running' }, {}).metal.engine).toBe('running')
    expect([...entering({}, { machine: 'running' }).changed]).toEqual(['running'])
    expect([...entering({ engine: 'running' }, { machine: 'running' }).changed]).toEqual([])
    expect([...entering({ engine: 'running' }, { machine: 'stopped' }).changed]).toEqual([])
  })

  test('a part that one node puts out of action and back has changed, and is in place', () => {
    const done = entering({}, { defeats: ['spark-screen'], restores: ['spark-screen'] })
    expect(done.metal.defeated).toEqual([])
    expect([...done.changed]).toEqual(['spark-screen'])
  })

  test('a part stays out of action until something restores it', () => {
    const out = entering({}, { defeats: ['brake'] })
    expect(out.metal.defeated).toEqual(['brake'])
    expect(entering(out.metal, {}).metal.defeated).toEqual(['brake'])
    expect(entering(out.metal, { restores: ['brake', 'never-out'] })).toMatchObject({ metal: { defeated: [] } })
  })
})
