import { describe, expect, test } from 'vitest'
import { ask, check, jump, proof, reading, soundSketch, start, step, type ChartSketch } from '#tests/support/chart-builder.ts'
import { saysOf, vary } from '#tests/support/lint.ts'

const known = { access: [{ id: 'cover-off', title: 'Cover off', minutes: 2 }] }

describe('names', () => {
  test('two nodes, two outcomes or two entries of one list may not share an id', () => {
    expect(saysOf({ ...soundSketch, nodes: [...soundSketch.nodes, ask('ask')] })).toEqual(['duplicate-id ask'])
    expect(saysOf(vary(soundSketch, { nodes: [check('n2', ['good', 'bad', { id: 'bad', title: 'Worse' }])] }))).toEqual(['duplicate-outcome n2.bad'])
    const causes = ['a', 'b'].map((title) => ({ id: 'filter-packed', title, system: 'air', remedy: { text: 'Clean it' } }))
    expect(saysOf({ ...soundSketch, causes })).toEqual(['duplicate-id'])
  })

  test.each([
    ['access', { needs: ['cover-off'] }, 'unknown-access n2', known],
    [
      'access of an alternative',
      { needsOneOf: [['cover-off'], ['top-off']] },
      'unknown-access n2',
      { access: [{ id: 'top-off', title: 'Top off', minutes: 1 }, ...known.access] },
    ],
    [
      'caution',
      { cautions: ['edge'] },
      'unknown-caution n2',
      { cautions: [{ id: 'edge', word: 'CAUTION', harm: 'minor-injury', hazard: 'Sharp edge', avoid: 'Gloves on' }] },
    ],
  ])('a node may not name an %s that the chart lacks', (_, more, code, mend) => {
    const causes = [{ id: 'filter-packed', title: 'Filter packed', system: 'air', remedy: { text: 'Clean it' } }]
    const faulty = { ...vary(soundSketch, { nodes: [check('n2', undefined, more), proof('p2', 'filter-packed', { closed: ['x'] })] }), fill: false, causes }
    expect(saysOf(faulty).filter((said) => said.startsWith('unknown'))).toContain(code)
    expect(saysOf({ ...faulty, ...mend })).toEqual([])
  })

  test('what a node wants closed, and what an access excludes, may be foreign to the chart', () => {
    const access = [{ id: 'warm', title: 'Warm', minutes: 3, excludes: ['cool'] }]
    expect(
      saysOf(
        vary(soundSketch, {
          nodes: [check('n2', undefined, { needs: ['warm'], closed: ['screen-out'] }), proof('p2', 'filter-packed', { needs: ['warm'] })],
          more: { access },
        }),
      ),
    ).toEqual([])
  })

  test('an access may not need an access, or name a caution, that the chart lacks', () => {
    const access = [{ id: 'cover-off', title: 'Cover off', minutes: 2, needs: ['lead-off'], cautions: ['edge'] }]
    const behind = vary(soundSketch, {
      nodes: [check('n2', undefined, { needs: ['cover-off'] }), proof('p2', 'filter-packed', { needs: ['cover-off'] })],
      more: { access },
    })
    const causes = [{ id: 'filter-packed', title: 'Filter packed', system: 'air', remedy: { text: 'Clean it' } }]
    expect(saysOf({ ...behind, fill: false, causes })).toEqual(['unknown-access', 'unknown-caution'])
  })

  test('suspects, causes, holds and what leads to causes stand in the library', () => {
    const bare = { ...soundSketch, fill: false }
    expect(saysOf(bare)).toEqual(['unknown-cause p2', 'unknown-cause c2'])
    expect(saysOf({ ...soundSketch, more: { contributing: ['never-cleaned'] } })).toEqual(['unknown-cause'])
    const neverCleaned = { id: 'never-cleaned', title: 'Never cleaned', system: 'use', contributing: true }
    expect(saysOf({ ...soundSketch, causes: [neverCleaned], more: { contributing: ['never-cleaned'] } })).toEqual([])
  })

  test('service items, spec keys and safety parts are listed', () => {
    const dusty = { id: 'dusty', title: 'Dusty', serviceable: true, serviceItem: 'clean-filter' }
    const causes = [{ id: 'filter-packed', title: 'Filter packed', system: 'air', remedy: { text: 'Clean it' } }]
    const faulty = { ...vary(soundSketch, { nodes: [check('n2', ['good', 'bad', dusty])], edges: ['n2.dusty > ask'] }), causes, fill: false }
    expect(saysOf(faulty)).toEqual(['unknown-service-item n2'])
    expect(saysOf({ ...faulty, serviceItems: [{ id: 'clean-filter', title: 'Clean the filter' }] })).toEqual([])

    const speed = vary(soundSketch, {
      nodes: [reading('n2', { limits: { spec: 'fullSpeed' } })],
      drop: ['n2.good > ask', 'n2.bad > p2'],
      edges: ['n2.in > ask', 'n2.low > p2'],
    })
    expect(saysOf(speed)).toEqual(['unknown-spec-key n2'])
    expect(saysOf({ ...speed, specKeys: [{ id: 'fullSpeed', title: 'Full speed', quantity: 'rotational-speed', unit: '1/min' }] })).toEqual([])

    const part = vary(soundSketch, { nodes: [proof('p2', 'filter-packed', { defeats: ['screen'], restores: ['screen'] })] })
    expect(saysOf(part)).toEqual(['unknown-safety-part p2'])
    expect(saysOf({ ...part, more: { safetyParts: ['screen'] } })).toEqual([])
  })

  test('a node speaks of outcomes that it has: where a skipped check goes, bands, grades', () => {
    expect(saysOf(vary(soundSketch, { nodes: [check('n2', undefined, { ifSkipped: 'odd' })] }))).toEqual(['unknown-outcome n2'])
    expect(saysOf(vary(soundSketch, { nodes: [check('n2', undefined, { rows: { 'filter-packed': { odd: 'mostly' } } })] }))).toEqual(['unknown-outcome n2'])
    expect(
      saysOf(
        vary(soundSketch, { nodes: [check('n2', undefined, { ifSkipped: 'bad', rows: { 'filter-packed': { bad: 'mostly' }, unlisted: { good: 'even' } } })] }),
      ),
    ).toEqual([])
  })

  test('grades may speak of a cause of a joined chart; while one is missing nobody can tell', () => {
    const graded = vary(soundSketch, {
      nodes: [check('n2', undefined, { rows: { 'seal-leaks': { bad: 'mostly' } } }), jump('j', 'sub')],
      drop: ['n2.good > ask'],
      edges: ['n2.good > j'],
    })
    const sub: ChartSketch = { id: 'sub', nodes: [start(), step('w'), ask()], edges: ['s > w', 'w > ask'] }
    expect(saysOf(graded, [sub])).toEqual(['unknown-cause n2'])
    const sealLeaks = { id: 'seal-leaks', title: 'Seal leaks', system: 'compression', remedy: { text: 'New seal' } }
    expect(saysOf(graded, [{ ...sub, causes: [sealLeaks] }])).toEqual([])
    expect(saysOf(graded)).toEqual(['jump-chart-missing j'])
  })

  test('a proof compares with a node that exists, and the shorthand for one check names a check', () => {
    expect(saysOf(vary(soundSketch, { nodes: [proof('p2', 'filter-packed', { compares: { node: 'n9' } })] }))).toEqual(['unknown-node p2'])
    expect(saysOf(vary(soundSketch, { nodes: [check('n2', undefined, { sameAs: 'ask' })] }))).toEqual(['unknown-node n2'])
  })
})
