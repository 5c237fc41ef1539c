import { describe, expect, test } from 'vitest'
import { buildChart, cause, check, reading, soundSketch, step } from '#tests/support/chart-builder.ts'
import { vary } from '#tests/support/lint.ts'
import type { ChartCommand } from './commands.ts'
import type { ChartDocument } from './document.ts'
import { applyCommand } from './edit.ts'

const sound = buildChart(soundSketch)

/** Commands as a canvas would send them; ids are branded nowhere in a test. */
function edit(chart: ChartDocument, command: object): ChartDocument {
  const edited = applyCommand(chart, command as ChartCommand)
  if (!edited.ok) throw new Error(edited.error.detail)
  return edited.value
}

function refusal(chart: ChartDocument, command: object) {
  const edited = applyCommand(chart, command as ChartCommand)
  if (edited.ok) throw new Error('The edit was made.')
  return edited.error
}

const edgesOf = (chart: ChartDocument) => chart.edges.map(({ from, outcome, to }) => `${from}${outcome === undefined ? '' : `.${outcome}`} > ${to}`)
const nodeOf = (chart: ChartDocument, id: string) => chart.nodes.find((node) => node.id === id)
const sketched = (change: Parameters<typeof vary>[1]): ChartDocument => buildChart(vary(soundSketch, change))

describe('nodes', () => {
  test('an edit leaves every node that it does not concern the same object', () => {
    const renamed = edit(sound, { type: 'rename-node', nodeId: 'n2', title: 'Hold it against a lamp' })
    expect(nodeOf(renamed, 'n2')?.title).toBe('Hold it against a lamp')
    expect(renamed.nodes.filter((node) => !sound.nodes.includes(node)).map((node) => node.id)).toEqual(['n2'])
    expect(renamed.edges).toBe(sound.edges)
    expect(renamed.library).toBe(sound.library)
    expect(nodeOf(sound, 'n2')?.title).toBe('Look at n2')
  })

  test('an edit that changes nothing returns the chart itself', () => {
    expect(edit(sound, { type: 'rename-node', nodeId: 'n2', title: 'Look at n2' })).toBe(sound)
    expect(edit(sound, { type: 'set-node', nodeId: 'n2', patch: { minutes: 1, picture: null } })).toBe(sound)
    expect(edit(sound, { type: 'connect', from: 'n2', outcome: 'good', to: 'ask' })).toBe(sound)
    expect(edit(sound, { type: 'set-chart', patch: { title: sound.title } })).toBe(sound)
    expect(edit(sound, { type: 'place-nodes', positions: {} })).toBe(sound)
  })

  test('a patch sets fields, takes out those that are null, and leaves the rest', () => {
    const set = edit(sound, { type: 'set-node', nodeId: 'p2', patch: { change: 'Filter out', minutes: 3 } })
    expect(nodeOf(set, 'p2')).toMatchObject({ change: 'Filter out', minutes: 3, suspect: 'filter-packed' })
    expect(nodeOf(edit(set, { type: 'set-node', nodeId: 'p2', patch: { change: null } }), 'p2')).not.toHaveProperty('change')
  })

  test('a patch that the door would refuse is refused, and names the field', () => {
    expect(refusal(sound, { type: 'set-node', nodeId: 'n2', patch: { minutes: -1 } })).toMatchObject({ code: 'invalid', errors: [{ pointer: '#/minutes' }] })
    expect(refusal(sound, { type: 'set-node', nodeId: 'n2', patch: { suspect: 'filter-packed' } })).toMatchObject({
      code: 'invalid',
      errors: [{ pointer: '#/suspect' }],
    })
    expect(refusal(sound, { type: 'set-node', nodeId: 'n9', patch: { minutes: 1 } }).code).toBe('no-such-node')
  })

  test('id and kind stay; another kind is another node in its place, and edges of outcomes that it lacks go', () => {
    expect(edit(sound, { type: 'set-node', nodeId: 'n2', patch: { id: 'x', kind: 'step' } })).toBe(sound)
    const replaced = edit(sound, {
      type: 'replace-node',
      node: reading('n2', {
        outcomes: [
          { id: 'low', title: 'Low' },
          { id: 'good', title: 'In limits', normal: true },
        ],
      }),
    })
    expect(nodeOf(replaced, 'n2')?.kind).toBe('reading')
    expect(edgesOf(replaced)).toContain('n2.good > ask')
    expect(edgesOf(replaced)).not.toContain('n2.bad > p2')
  })

  test('nodes come with their edges and places, or not at all', () => {
    const nodes = [step('w1'), step('w2')]
    const added = edit(sound, {
      type: 'add-nodes',
      nodes,
      edges: [
        { from: 'w1', to: 'w2' },
        { from: 'w2', to: 'ask' },
      ],
      positions: { w1: { x: 1, y: 2 } },
    })
    expect(edgesOf(added).slice(-2)).toEqual(['w1 > w2', 'w2 > ask'])
    expect(added.positions).toEqual({ w1: { x: 1, y: 2 } })
    expect(refusal(sound, { type: 'add-nodes', nodes: [step('n2')] }).code).toBe('id-taken')
    expect(refusal(sound, { type: 'add-nodes', nodes: [step('w1')], edges: [{ from: 'w1', to: 'gone' }] }).code).toBe('no-such-node')
    expect(refusal(sound, { type: 'add-nodes', nodes: [{ id: 'w1', kind: 'riddle' }] }).code).toBe('invalid')
  })

  test('a node put into an edge leads on to where the edge led, by all its outcomes', () => {
    const inserted = edit(sound, { type: 'insert-node', node: check('n3'), into: { from: 'n2', outcome: 'good' } })
    expect(edgesOf(inserted)).toContain('n2.good > n3')
    expect(edgesOf(inserted).slice(-2)).toEqual(['n3.good > ask', 'n3.bad > ask'])
    expect(edgesOf(edit(sound, { type: 'insert-node', node: cause('c3', 'filter-packed'), into: { from: 'n2', outcome: 'good' } }))).toContain('n2.good > c3')
    expect(refusal(sound, { type: 'insert-node', node: check('n3'), into: { from: 'c2' } }).code).toBe('no-such-edge')
  })
})

describe('taking nodes out', () => {
  test('takes their edges and their place along', () => {
    const placed = edit(sound, { type: 'place-nodes', positions: { n2: { x: 0, y: 0 }, p2: { x: 1, y: 1 } } })
    const removed = edit(placed, { type: 'remove-nodes', nodeIds: ['n2'] })
    expect(edgesOf(removed).filter((edge) => edge.includes('n2'))).toEqual([])
    expect(removed.positions).toEqual({ p2: { x: 1, y: 1 } })
  })

  test('closes the gap along the good way: what led to the node leads on across it', () => {
    const removed = edit(sound, { type: 'remove-nodes', nodeIds: ['n2'], closeGap: true })
    expect(edgesOf(removed)).toContain('n1.yes > ask')
    const both = edit(sound, { type: 'remove-nodes', nodeIds: ['n1', 'n2', 'n1'], closeGap: true })
    expect(edgesOf(both)).toContain('s > ask')
  })

  test('hands the walks of other machines over too', () => {
    const chart = sketched({
      nodes: [check('n3', undefined, { onlyFor: { classes: ['mower'], otherwise: 'n2' } })],
      drop: ['n1.yes > n2'],
      edges: ['n1.yes > n3', 'n3.good > n2', 'n3.bad > ask'],
    })
    expect(nodeOf(edit(chart, { type: 'remove-nodes', nodeIds: ['n2'], closeGap: true }), 'n3')?.onlyFor?.otherwise).toBe('ask')
  })

  test('of several nodes all go or none', () => {
    expect(refusal(sound, { type: 'remove-nodes', nodeIds: ['n2', 'gone'] }).code).toBe('no-such-node')
  })
})

describe('edges', () => {
  test('an outcome leads to one node: a new edge takes the place of the old one', () => {
    const connected = edit(sound, { type: 'connect', from: 'n2', outcome: 'good', to: 'a0' })
    expect(edgesOf(connected)).toEqual(edgesOf(sound).map((edge) => (edge === 'n2.good > ask' ? 'n2.good > a0' : edge)))
  })
  test('an edge begins at an outcome of a check and at the whole of a step', () => {
    expect(refusal(sound, { type: 'connect', from: 'n2', to: 'a0' }).code).toBe('no-such-outcome')
    expect(refusal(sound, { type: 'connect', from: 's', outcome: 'good', to: 'a0' }).code).toBe('no-such-outcome')
    expect(refusal(sound, { type: 'connect', from: 'n2', outcome: 'good', to: 'gone' }).code).toBe('no-such-node')
  })
  test('an edge can be taken out once', () => {
    const cut = edit(sound, { type: 'disconnect', from: 'n2', outcome: 'good' })
    expect(edgesOf(cut)).not.toContain('n2.good > ask')
    expect(refusal(cut, { type: 'disconnect', from: 'n2', outcome: 'good' }).code).toBe('no-such-edge')
  })
})

describe('outcomes', () => {
  const titles = (chart: ChartDocument) => {
    const node = nodeOf(chart, 'n2')
    return node !== undefined && 'outcomes' in node ? node.outcomes.map((outcome) => outcome.id) : []
  }
  test('are added at the end or at a balloon, and moved', () => {
    const dusty = { id: 'dusty', title: 'Dusty' }
    expect(titles(edit(sound, { type: 'add-outcome', nodeId: 'n2', outcome: dusty }))).toEqual(['good', 'bad', 'dusty'])
    const first = edit(sound, { type: 'add-outcome', nodeId: 'n2', outcome: dusty, at: 0 })
    expect(titles(first)).toEqual(['dusty', 'good', 'bad'])
    expect(titles(edit(first, { type: 'move-outcome', nodeId: 'n2', outcomeId: 'dusty', to: 2 }))).toEqual(['good', 'bad', 'dusty'])
    expect(refusal(sound, { type: 'add-outcome', nodeId: 'n2', outcome: { id: 'bad', title: 'Again' } }).code).toBe('id-taken')
    expect(refusal(sound, { type: 'add-outcome', nodeId: 's', outcome: dusty }).code).toBe('has-no-outcomes')
  })
  test('are changed field by field', () => {
    const changed = edit(sound, { type: 'set-outcome', nodeId: 'n2', outcomeId: 'bad', patch: { title: 'No light', seen: 'Dark all over' } })
    expect(nodeOf(changed, 'n2')).toMatchObject({ outcomes: [{ id: 'good' }, { id: 'bad', title: 'No light', seen: 'Dark all over' }] })
    expect(refusal(sound, { type: 'set-outcome', nodeId: 'n2', outcomeId: 'gone', patch: {} }).code).toBe('no-such-outcome')
  })
  test('go with their edge, bands, grades and the way of an unanswered check', () => {
    const chart = sketched({
      nodes: [reading('n2', { ifSkipped: 'low', rows: { 'filter-packed': { low: 'mostly', in: 'seldom' } } })],
      drop: ['n2.good > ask', 'n2.bad > p2'],
      edges: ['n2.in > ask', 'n2.low > p2'],
    })
    const removed = edit(chart, { type: 'remove-outcome', nodeId: 'n2', outcomeId: 'low' })
    expect(nodeOf(removed, 'n2')).toMatchObject({ outcomes: [{ id: 'in' }], bands: [{ outcome: 'in' }], rows: { 'filter-packed': { in: 'seldom' } } })
    expect(nodeOf(removed, 'n2')).not.toHaveProperty('ifSkipped')
    expect(edgesOf(removed)).not.toContain('n2.low > p2')
  })
})

describe('the drawing and the chart itself', () => {
  test('nodes move by a distance, from 0, 0 if they had no place', () => {
    const moved = edit(sound, { type: 'move-nodes', nodeIds: ['n1', 'n2'], by: { x: 8, y: -4 } })
    expect(edit(moved, { type: 'move-nodes', nodeIds: ['n2'], by: { x: 1, y: 1 } }).positions).toEqual({ n1: { x: 8, y: -4 }, n2: { x: 9, y: -3 } })
    expect(refusal(sound, { type: 'move-nodes', nodeIds: ['n2'], by: { x: Infinity, y: 0 } }).code).toBe('invalid')
    expect(refusal(sound, { type: 'move-nodes', nodeIds: ['gone'], by: { x: 1, y: 0 } }).code).toBe('no-such-node')
  })
  test('what a chart says of itself can be changed, its id and format cannot', () => {
    const changed = edit(sound, { type: 'set-chart', patch: { title: 'Creeps at idle', searchWords: ['turns'], id: 'other', formatVersion: 9, nodes: [] } })
    expect(changed).toMatchObject({ id: 'sound', formatVersion: 1, title: 'Creeps at idle', searchWords: ['turns'] })
    expect(changed.nodes).toBe(sound.nodes)
    expect(edit(changed, { type: 'set-chart', patch: { searchWords: null } })).not.toHaveProperty('searchWords')
    expect(refusal(sound, { type: 'set-chart', patch: { title: 7 } }).errors[0]?.pointer).toBe('#/title')
    expect(refusal(sound, { type: 'set-chart', patch: { title: null } }).code).toBe('invalid')
  })
})

describe('causes, accesses, cautions and the other lists', () => {
  const edge = { id: 'edge', word: 'CAUTION', harm: 'minor-injury', hazard: 'Cutters cut', avoid: 'Gloves on' }
  test.each([
    ['causes', { id: 'screen-shut', title: 'Screen shut', system: 'exhaust' }, { grade: 'common' }],
    ['serviceItems', { id: 'clean-filter', title: 'Clean the filter' }, { minutes: 4 }],
    ['specKeys', { id: 'fullSpeed', title: 'Full speed', quantity: 'rotational-speed', unit: '1/min' }, { title: 'Full speed, no load' }],
    ['access', { id: 'cover-off', title: 'Cover off', minutes: 2 }, { closeMinutes: 2 }],
    ['cautions', edge, { standing: true }],
  ])('%s are added, changed and taken out', (list, entry, patch) => {
    const listOf = (chart: ChartDocument) => ({ ...chart.library, cautions: chart.cautions, access: chart.access })[list as 'access'] ?? []
    const added = edit(sound, { type: 'add-entry', list, entry })
    expect(listOf(added).at(-1)).toEqual(entry)
    expect(refusal(added, { type: 'add-entry', list, entry }).code).toBe('id-taken')
    const changed = edit(added, { type: 'set-entry', list, id: entry.id, patch: { ...patch, id: 'other' } })
    expect(listOf(changed).at(-1)).toEqual({ ...entry, ...patch })
    expect(listOf(edit(changed, { type: 'remove-entry', list, id: entry.id }))).toEqual(listOf(sound))
    expect(refusal(sound, { type: 'remove-entry', list, id: entry.id }).code).toBe('no-such-entry')
  })
})
