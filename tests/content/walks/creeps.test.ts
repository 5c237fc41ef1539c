import { describe, expect, test } from 'vitest'
import { demoChart } from '#tests/content/demo-charts.ts'
import { benchAt, endOf, fourStrokeTrimmer, placesOf, saw, trimmer, walkOn, type Found } from './bench.ts'

const chart = 'creeps-at-idle'
const found = (answers: Found, machine = saw) => walkOn(benchAt(chart, machine), answers)

describe('a chain that creeps at idle', () => {
  const rows: readonly (readonly [string, Found, string])[] = [
    ['1 still, 6 same on all sides', { n1: 'still', n6x: 'same' }, 'could-not-reproduce'],
    ['1 does something else', { n1: 'other' }, 'pick'],
    ['1 runs on, then stops, 3 cable', { n1: 'after', n3: 'sticks' }, 'throttle-sticks'],
    ['2 high, 3 latch', { n2: 'high', n3: 'latch' }, 'latch-stays'],
    ['2 high, 4 idle screw', { n2: 'high' }, 'idle-set-high'],
    ['4 hangs, 5 filter', { n2: 'high', n4: 'hangs', n5: 'filter' }, 'filter-packed'],
    ['4 hangs, 5 nuts', { n2: 'high', n4: 'hangs', n5: 'loose' }, 'carb-loose'],
    ['4 hangs, 5 boot', { n2: 'high', n4: 'hangs', n5: 'crack' }, 'intake-joint-cracked'],
    ['1 still, 6 changes, 7 drop at a crank seal', { n1: 'still', n6x: 'changes', 'seal-test/n1': 'drops', 'seal-test/n4': 'clutch' }, 'crank-seal-leaks'],
    ['2 hunts, 6 changes, 7 drop at the cylinder foot', { n2: 'hunts', n6: 'changes', 'seal-test/n1': 'drops', 'seal-test/n3': 'foot' }, 'base-gasket-leaks'],
    ['7 tight, the carburettor on the bench', { n2: 'hunts', 'carburettor-bench/n17': 'rocks' }, 'shaft-worn'],
    ['2 in limits, 8 spring', { n2: 'in', n8: 'odd' }, 'clutch-spring-broken'],
    ['2 low and creeping, 8 spring', { n2: 'low', n8: 'odd' }, 'clutch-spring-broken'],
    ['4 stalls before it is still, 8 spring', { n2: 'high', n4: 'stalls', n8: 'odd' }, 'clutch-spring-broken'],
    ['9 chips', { n9: 'chips' }, 'debris-in-clutch'],
    ['9 rim', { n9: 'mouth' }, 'drum-worn'],
    ['10 drags', { n10: 'drags' }, 'drum-bearing-dry'],
    ['11 under, other springs', { n11: 'low', n11b: 'other' }, 'springs-wrong'],
    ['11 under, the listed springs', { n11: 'low', n11b: 'listed' }, 'clutch-spring-broken'],
    ['all good and still creeping', {}, 'hold'],
  ]

  test.each(rows)('row %s', (_row, answers, end) => {
    const bench = found(answers)
    expect(endOf(bench)).toBe(end)
    if (bench.page().kind === 'cause') expect(bench.prove(end).walk).toMatchObject({ phase: 'proven', cause: { causeId: end } })
  })

  test('leaves the shop repaired, or only held: nothing on this chart but a packed filter may be handed back as it is', () => {
    for (const [row, answers, end] of rows) {
      const bench = found(answers)
      if (bench.page().kind !== 'cause' || end === 'filter-packed' || end === 'shaft-worn') continue
      expect(bench.prove(end).page(), row).toMatchObject({ kind: 'proven', canCloseUnrepaired: false })
    }
  })

  test('is tried on all sides with the brake set, and comes to the seal test whichever way it hung up', () => {
    for (const answers of [{ n2: 'high', n4: 'hangs' }, { n2: 'hunts' }] as const) expect(placesOf(found(answers))).toContain('seal-test/n1')
    expect(JSON.stringify(demoChart(chart).nodes.find(({ id }) => id === 'n6'))).toMatch(/If it has a brake, set it/)
  })

  test('is not cured by a screw that hides an air leak: hanging up after a blip is no confirmation', () => {
    const bench = benchAt(chart, saw).answer('n1', 'creeps').answer('n2', 'high').answer('n3', 'home').answer('n4', 'hangs')
    expect(bench.node).toBe('n5')
    expect(placesOf(bench).slice(-2)).toEqual([`${chart}/x4`, `${chart}/n4`])
    expect(bench.walk.trail.at(-1)).toMatchObject({ judgedBy: 'hand' })
  })

  test('whose brake does not stop it is tagged, and goes on at lever and band', () => {
    const bench = benchAt(chart, saw)
    for (const [id, outcome] of [
      ['n1', 'creeps'],
      ['n2', 'in'],
      ['n8', 'home'],
      ['n9', 'clean'],
      ['n10', 'free'],
      ['n11', 'in'],
      ['n12', 'runs'],
    ] as const)
      bench.answer(id, outcome)
    bench.step('x12')
    expect(bench.place).toBe('drag-at-clutch/n10')
  })

  test('asks for the lead to be off before every look at the clutch, and runs with everything closed', () => {
    const bench = benchAt(chart, saw).answer('n1', 'creeps').answer('n2', 'in').answer('n8', 'odd').answer('p8', 'still').answer('n9', 'clean')
    expect(bench.cautionPages.filter(({ ids }) => ids.includes('lead')).map(({ node }) => node)).toEqual([`${chart}/n8`, `${chart}/p8`, `${chart}/n9`])
    bench.answer('n10', 'free').answer('n11', 'in')
    expect(bench.walk.metal.open).toEqual(['warm'])
  })

  const unconfirmed: readonly (readonly [Found, string])[] = [
    [{ n2: 'high', n3: 'sticks', p3a: 'still' }, 'n4'],
    [{ n2: 'high', n3: 'latch', p3b: 'still' }, 'n4'],
    [{ n2: 'high', n4: 'hangs', n5: 'filter', p5a: 'still' }, 'n6'],
    [{ n2: 'high', n4: 'hangs', n5: 'loose', p5b: 'still' }, 'n6'],
    [{ n2: 'high', n4: 'hangs', n5: 'crack', p5c: 'still' }, 'n6'],
    [{ n8: 'odd', p8: 'still' }, 'n9'],
    [{ n9: 'chips', p9a: 'still' }, 'n10'],
    [{ n9: 'mouth', p9b: 'not' }, 'n10'],
    [{ n10: 'drags', p10: 'still' }, 'n11'],
    [{ n11: 'low', n11b: 'other', p11a: 'still' }, 'n12'],
    [{ n11: 'low', n11b: 'listed', p11b: 'still' }, 'n12'],
  ]
  test.each(unconfirmed)('with %o the proof is not confirmed and the next row is asked', (answers, next) => {
    const proof = Object.keys(answers).at(-1) ?? ''
    const places = placesOf(found(answers)).filter((place) => !/\/x/.test(place))
    expect(places[places.indexOf(`${chart}/${proof}`) + 1]).toBe(`${chart}/${next}`)
  })
})

describe('a trimmer head that turns at idle', () => {
  test.each([
    [{ n8t: 'odd' }, 'clutch-spring-broken'],
    [{ n9t: 'chips' }, 'debris-in-clutch'],
    [{ n9t: 'mouth' }, 'drum-worn'],
    [{ n10t: 'drags' }, 'drum-bearing-dry'],
    [{ n11: 'low', n11bt: 'other' }, 'springs-wrong'],
    [{}, 'hold'],
  ] as readonly (readonly [Found, string])[])('%o: %s, with the clutch housing off the engine and no bar, chain or brake', (answers, end) => {
    const bench = found(answers, trimmer)
    expect(endOf(bench)).toBe(end)
    expect(placesOf(bench)).not.toContain(`${chart}/n8`)
    expect(placesOf(bench)).not.toContain(`${chart}/n12`)
  })

  test('has its housing taken off once for three looks', () => {
    const bench = benchAt(chart, trimmer).answer('n1', 'creeps').answer('n2', 'in').answer('n8t', 'home').answer('n9t', 'clean').answer('n10t', 'free')
    // 1 for the look, 4 + 4 for the housing, 0.5 + 0.5 for the plug lead; then 1 and 1.
    expect(bench.walk.trail.slice(-3).map(({ minutes }) => minutes)).toEqual([10, 1, 1])
    bench.answer('n11', 'in')
    expect(bench.walk.metal.open).toEqual(['warm'])
  })

  test('with a four-stroke engine is spared the seal test', () => {
    expect(placesOf(found({ n2: 'hunts' }, fourStrokeTrimmer)).filter((place) => place.startsWith('seal-test/'))).toEqual([])
  })
})
