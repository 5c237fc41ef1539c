import { describe, expect, test } from 'vitest'
import { benchAt, endOf, mower, placesOf, saw, walkOn, type Found } from './bench.ts'

const chart = 'runs-only-while-priming'
const found = (answers: Found) => walkOn(benchAt(chart, saw), answers)

describe('an engine that runs only while it is primed', () => {
  const rows: readonly (readonly [string, Found, string])[] = [
    ['1 layers or beads', { n1: 'layers' }, 'water-in-fuel'],
    ['1 sour, dark', { n1: 'sour' }, 'stale-fuel'],
    ['1 greasy, 2 stiff, oil in the return line', { n1: 'mix', n2: 'stiff', n2b: 'oil' }, 'oil-in-fuel'],
    ['2 stiff, clear fuel from the return line', { n2: 'stiff', n2b: 'clear' }, 'return-blocked'],
    ['2 stays flat, 7', { n2: 'flat', n7: 'dark' }, 'pickup-clogged'],
    ['2 endless bubbles, 8', { n2: 'bubbles', n8: 'lives', n9: 'air' }, 'hose-cracked'],
    ['3 runs well', { n3: 'well' }, 'could-not-reproduce'],
    ['3 does something else', { n3: 'other' }, 'pick'],
    ['4 lives with the cap loose', { n4: 'lives' }, 'cap-vent-shut'],
    ['7 dark or slow', { n7: 'dark' }, 'pickup-clogged'],
    ['7 off the hose', { n7: 'off' }, 'hose-off'],
    ['8 lives from the can, 9 bubble or crack', { n8: 'lives', n9: 'air' }, 'hose-cracked'],
    ['10 split', { n8: 'lives', n10: 'split' }, 'bulb-split'],
    ['10 flap', { n8: 'lives', n10: 'flap' }, 'bulb-flap-stuck'],
    ['10 good', { n8: 'lives' }, 'no-cause-found'],
    ['11 nuts', { n11: 'loose' }, 'carb-loose'],
    ['11 boot', { n11: 'crack' }, 'intake-joint-cracked'],
    ['12 dead', { n12: 'dead' }, 'impulse-blocked'],
    ['13 gummed', { n13: 'gummed' }, 'inlet-screen-gummed'],
    ['14 low', { n14: 'low' }, 'lever-low'],
    ['15 stiff', { n15: 'stiff' }, 'diaphragm-stiff'],
    ['16 opens late', { n16: 'high' }, 'needle-stuck'],
    ['16 opens early', { n16: 'low' }, 'needle-leaks'],
    ['16 does not hold', { n16b: 'low' }, 'needle-leaks'],
    ['17 the seal test finds it', { n1: 'fresh', 'seal-test/n1': 'drops', 'seal-test/n3': 'foot' }, 'base-gasket-leaks'],
    ['17 tight', {}, 'no-cause-found'],
  ]

  test.each(rows)('row %s', (_row, answers, end) => {
    const bench = found(answers)
    expect(endOf(bench)).toBe(end)
    expect(bench.walk.metal.defeated).toEqual([])
    if (bench.page().kind === 'cause') expect(bench.prove(end).walk).toMatchObject({ phase: 'proven', cause: { causeId: end } })
  })

  test('that idles but has no top end goes on in the chart of full speed', () => {
    const bench = benchAt(chart, saw).answer('n1', 'fresh').answer('n2', 'fills').answer('n3', 'top')
    expect(bench.place).toBe('no-full-speed/n1')
  })

  test('that half choke does not help is looked at for spark, and comes back to the drops down the throat', () => {
    expect(placesOf(found({ n5: 'same', n7: 'dark' }))).toEqual(
      expect.arrayContaining(['runs-only-while-priming/n5', 'spark/n8', 'runs-only-while-priming/n6']),
    )
    expect(placesOf(found({ n7: 'dark' }))).not.toContain('spark/n8')
  })

  test('that lives from the can has its fault on the tank side, one that dies on it has it in the carburettor: only one of them is looked at', () => {
    const lives = placesOf(found({ n8: 'lives' }))
    expect(lives).toEqual(expect.arrayContaining([`${chart}/n9`, `${chart}/n10`]))
    expect(lives).not.toContain(`${chart}/n11`)
    const dies = placesOf(found({}))
    expect(dies).toEqual(expect.arrayContaining([`${chart}/n11`, `${chart}/n16b`]))
    expect(dies).not.toContain(`${chart}/n9`)
  })

  const unconfirmed: readonly (readonly [Found, string])[] = [
    [{ n1: 'layers', p1a: 'still' }, 'n2'],
    [{ n1: 'sour', p1b: 'still' }, 'n2'],
    [{ n2: 'stiff', n2b: 'oil', p2a: 'not' }, 'n3'],
    [{ n2: 'stiff', n2b: 'clear', p2b: 'still' }, 'n3'],
    [{ n4: 'lives', p4: 'still' }, 'n5'],
    [{ n7: 'dark', p7a: 'still' }, 'n8'],
    [{ n7: 'off', p7b: 'not' }, 'n8'],
    [{ n8: 'lives', n9: 'air', p9: 'still' }, 'n10'],
    [{ n11: 'loose', p11a: 'still' }, 'n12'],
    [{ n11: 'crack', p11b: 'still' }, 'n12'],
    [{ n12: 'dead', p12: 'still' }, 'n13'],
    [{ n13: 'gummed', p13: 'still' }, 'n14'],
    [{ n14: 'low', p14a: 'still' }, 'n15'],
    [{ n15: 'stiff', p15: 'still' }, 'n16'],
    [{ n16: 'high', p16a: 'still' }, 'n16b'],
  ]
  test.each(unconfirmed)('with %o the proof is not confirmed and the next row is asked', (answers, next) => {
    const proof = Object.keys(answers).at(-1) ?? ''
    const places = placesOf(found(answers)).filter((place) => !/\/[rx]/.test(place))
    expect(places[places.indexOf(`${chart}/${proof}`) + 1]).toBe(`${chart}/${next}`)
  })

  test('is seen to die before anything is proved, also where an early look leads straight to a proof', () => {
    const bench = benchAt(chart, saw).answer('n1', 'layers')
    expect(bench.page()).toMatchObject({ kind: 'caution' })
    bench.answer('p1a', 'gone')
    expect(bench.walk.trail.at(-1)).toMatchObject({ before: { outcome: 'dies' } })
  })

  test('never has its cap loosened warm, and has it shut again before the next run', () => {
    const bench = benchAt(chart, saw).answer('n1', 'fresh').answer('n2', 'fills').answer('n3', 'dies')
    expect(bench.node).toBe('x4')
    bench.step('x4')
    expect(bench.walk.metal).toMatchObject({ engine: 'stopped', open: ['cool'] })
    bench.answer('n4', 'same')
    expect(bench.walk.metal.defeated).toEqual(['fuel-cap'])
    bench.step('r4b')
    expect(bench.walk.metal).toMatchObject({ engine: 'stopped', defeated: [] })
  })

  test('that could not be made to die asks the customer once more', () => {
    const bench = benchAt(chart, saw).answer('n1', 'fresh').answer('n2', 'fills').skip('n3', 'not-reproduced')
    expect(bench.walk).toMatchObject({ phase: 'escalated', reason: 'could-not-reproduce' })
  })
})

test('a saw sent here for its tank side is proved by its own trouble: what it did before the change is taken first', () => {
  const bench = benchAt('no-full-speed', saw)
  for (const [id, outcome] of [
    ['n1', 'low'],
    ['n2', 'low'],
    ['n3', 'both'],
    ['n4', 'free'],
    ['n5', 'light'],
    ['n6', 'fresh'],
    ['n6b', 'dry'],
    ['n7', 'clear'],
    ['n8', 'tan'],
    ['n8b', 'in'],
    ['n9', 'clear'],
    ['n10', 'filter'],
  ] as const)
    bench.answer(id, outcome)
  expect(bench.place).toBe(`${chart}/n7`)
  bench.answer('n7', 'dark').answer('p7a', 'gone').prove('pickup-clogged')
  expect(bench.walk.trail.findLast((line) => line.kind === 'finding')?.before).toMatchObject({ outcome: 'dies' })
})

test('a carburettor without pulse, lever and diaphragms is looked at on the bench at once', () => {
  const bench = benchAt('carburettor-bench', mower)
  expect(bench.node).toBe('n17')
})
