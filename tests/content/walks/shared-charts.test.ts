import { describe, expect, test } from 'vitest'
import { benchAt, endOf, fourStrokeTrimmer, mower, placesOf, saw, trimmer, walkOn, type Bench, type Found } from './bench.ts'

/** Walks a shared chart that was opened by itself. */
const opened = (chart: string, found: Found, machine = saw): Bench => walkOn(benchAt(chart, machine), found)

describe('the seal test', () => {
  const rows: readonly (readonly [string, Found, string])[] = [
    ['drops, bubbles at the flywheel seal', { n1: 'drops', n4: 'fly' }, 'crank-seal-leaks'],
    ['drops, bubbles at the clutch seal', { n1: 'drops', n4: 'clutch' }, 'crank-seal-leaks'],
    ['drops, bubbles at the cylinder foot', { n1: 'drops', n3: 'foot' }, 'base-gasket-leaks'],
    ['drops, bubbles at the intake joint', { n1: 'drops', n3: 'intake' }, 'intake-joint-cracked'],
    ['drops, bubbles at the release valve', { n1: 'drops', n3: 'release' }, 'release-open'],
    ['drops, and nobody sees where', { n1: 'drops' }, 'no-cause-found'],
    ['holds pressure and loses vacuum, grease on the lips holds it', { n2: 'drops' }, 'crank-seal-leaks'],
    ['holds pressure and loses vacuum, grease or not', { n2: 'drops', p2: 'still' }, 'no-cause-found'],
  ]
  test.each(rows)('%s', (_row, found, end) => {
    const bench = opened('seal-test', found)
    expect(endOf(bench)).toBe(end)
    if (bench.page().kind === 'cause') expect(bench.prove(end).walk.phase).toBe('proven')
  })

  test('looks at the seals last, behind the clutch cover only on a saw', () => {
    expect(placesOf(opened('seal-test', { n1: 'drops' }))).toContain('seal-test/n4')
    const places = placesOf(opened('seal-test', { n1: 'drops' }, trimmer))
    expect(places).toContain('seal-test/n4b')
    expect(places).not.toContain('seal-test/n4')
  })

  test('stops at the bench fee first, on a page of its own, and costs at least 40 minutes in and out', () => {
    const bench = benchAt('seal-test', saw)
    expect(bench.page()).toMatchObject({ kind: 'caution' })
    bench.step('x0')
    expect(bench.node).toBe('x1')
    bench.step('x1').answer('n1', 'holds').answer('n2', 'holds')
    expect(bench.walk.minutesUsed).toBeGreaterThanOrEqual(40)
  })

  test('is made with the plug in and the muffler on', () => {
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
      ['n8', 'white'],
    ] as const)
      bench.answer(id, outcome)
    expect(bench.walk.metal.open).toContain('plug-out')
    bench.step('x0').step('x1')
    expect(bench.walk.metal.open).toContain('seal-kit')
    expect(bench.walk.metal.open).not.toContain('plug-out')
    const places = placesOf(walkOn(bench, {}))
    expect(places.indexOf('no-full-speed/n14')).toBeGreaterThan(places.lastIndexOf('seal-test/n2'))
  })
})

describe('spark', () => {
  const rows: readonly (readonly [string, Found, string])[] = [
    ['in open air only, a good plug cures it', { n8: 'air' }, 'plug-fouled'],
    ['in open air only, and lost hot', { n8: 'air', p8: 'still' }, 'coil-fails-hot'],
    ['none, back with the stop wire off', { n8: 'none' }, 'stop-circuit-shorted'],
    ['none, lead broken', { n8: 'none', n9: 'still', n10: 'broken' }, 'lead-broken'],
    ['none, gap wide', { n8: 'none', n9: 'still', n10b: 'wide' }, 'coil-gap-wide'],
    ['none, all good, a good coil cures it', { n8: 'none', n9: 'still' }, 'coil-dead'],
    ['none, and a good coil does not help', { n8: 'none', n9: 'still', p10c: 'still' }, 'no-cause-found'],
    ['good, key sheared', { n11: 'sheared' }, 'key-sheared'],
    ['good cold, lost hot', { n16a: 'hot' }, 'coil-fails-hot'],
  ]
  test.each(rows)('%s', (_row, found, end) => {
    const bench = opened('spark', found, mower)
    expect(endOf(bench)).toBe(end)
    expect(bench.walk.metal.defeated).toEqual([])
    if (bench.page().kind === 'cause') expect(bench.prove(end).walk.phase).toBe('proven')
  })

  test('has the stop wire off only with the plug out, and on again before anything else', () => {
    const bench = benchAt('spark', saw).answer('n8', 'none').answer('n9', 'still')
    expect(bench.walk.metal).toMatchObject({ engine: 'stopped', defeated: ['stop-switch'] })
    expect(bench.walk.metal.open).toContain('plug-out')
    expect(bench.cautionPages.find(({ node }) => node === 'spark/n9')?.ids).toContain('no-stop')
    bench.step('r9b')
    expect(bench.walk.metal.defeated).toEqual([])
    expect(bench.node).toBe('n10')
  })
})

describe('the carburettor on the bench', () => {
  const rows: readonly (readonly [string, Found, string])[] = [
    ['impulse port dead', { n12: 'dead' }, 'impulse-blocked'],
    ['screen gummed', { n13: 'gummed' }, 'inlet-screen-gummed'],
    ['lever low', { n14: 'low' }, 'lever-low'],
    ['lever high', { n14: 'high' }, 'lever-high'],
    ['diaphragms stiff', { n15: 'stiff' }, 'diaphragm-stiff'],
    ['needle opens late', { n16: 'high' }, 'needle-stuck'],
    ['needle opens early', { n16: 'low' }, 'needle-leaks'],
    ['needle does not hold', { n16b: 'low' }, 'needle-leaks'],
    ['throttle shaft rocks', { n17: 'rocks' }, 'shaft-worn'],
    ['passage shut', { n18: 'shut' }, 'jets-gummed'],
    ['accelerator pump ring cut', { n19: 'cut' }, 'pump-ring-leaks'],
  ]
  test.each(rows)('%s', (_row, found, end) => {
    const bench = opened('carburettor-bench', found)
    expect(endOf(bench)).toBe(end)
    expect(bench.prove(end).walk.phase).toBe('proven')
  })

  test('writes a screw outside its range, or a missing cap, on the service list and comes back', () => {
    expect(opened('carburettor-bench', { n20: 'out' }).walk.serviceList).toEqual(['set-mixture'])
    expect(opened('carburettor-bench', { n20: 'caps' }).walk.serviceList).toEqual(['fit-limiter-cap'])
  })
})

describe('a shared chart comes back where it was called', () => {
  test.each([
    ['spark, priming', 'runs-only-while-priming', { n5: 'same' }, 'spark/n16a', 'runs-only-while-priming/n6'],
    ['seal test, full speed', 'no-full-speed', { n2: 'low', n8: 'white' }, 'seal-test/n2', 'no-full-speed/n8b'],
    ['carburettor, full speed', 'no-full-speed', { n2: 'hunts' }, 'carburettor-bench/n20', 'no-full-speed/n3'],
    ['seal test, then the carburettor, creeping', 'creeps-at-idle', { n2: 'hunts' }, 'seal-test/n2', 'carburettor-bench/n12'],
    ['carburettor, creeping', 'creeps-at-idle', { n2: 'hunts' }, 'carburettor-bench/n20', 'creeps-at-idle/n8'],
  ] as const)('%s', (_words, chart, found, last, next) => {
    const places = placesOf(walkOn(benchAt(chart, saw), found))
    expect(places[places.indexOf(last) + 1]).toBe(next)
  })

  test('opened by itself it ends with the lead, all good', () => {
    for (const chart of ['seal-test', 'spark', 'carburettor-bench']) {
      const bench = opened(chart, {})
      expect([bench.node, endOf(bench)], chart).toEqual(['b', 'no-cause-found'])
    }
  })

  test('on a four-stroke the seal test is passed over, and the chart that called it goes on', () => {
    const places = placesOf(walkOn(benchAt('no-full-speed', fourStrokeTrimmer), {}))
    expect(places.some((place) => place.startsWith('seal-test/'))).toBe(false)
    expect(places.at(-1)).toBe('no-full-speed/n14b')
  })
})
