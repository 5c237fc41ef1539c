import { describe, expect, test } from 'vitest'
import { benchAt, saw, trimmer, type Bench } from './bench.ts'

/** Minutes of the findings and steps recorded at a node, each with the access that it opened. */
function minutesAt(bench: Bench, place: string): readonly number[] {
  return bench.walk.trail.filter((line) => line.position.node === place).map((line) => line.minutes)
}

describe('a saw that starts and idles but will not reach full speed', () => {
  const walkIt = () =>
    benchAt('no-full-speed', saw)
      .answer('n1', 'low')
      .answer('n2', 'low', [9600, 9620])
      .answer('n3', 'both')
      .answer('n4', 'free')
      .answer('n5', 'dusty')
      .answer('n6', 'fresh')
      .answer('n6b', 'dry')
      .answer('n7', 'clear')
      .answer('n8', 'tan')
      .answer('n8b', 'in', [0.55])
      .answer('n9', 'marks')
      .answer('n9', 'low', [9650])
      .step('x9b')
      .answer('n9b', 'in', [12400])
      .step('n9c')
      .step('r9')
      .answer('n9d', 'gone', [12350])
      .prove('band-drags')

  test('is walked to a dragging brake band: the load is taken out of play, and the same reading comes back', () => {
    const bench = walkIt()
    expect(bench.walk).toMatchObject({ phase: 'proven', cause: { causeId: 'band-drags', proof: { by: 'finding' } } })
    const proof = bench.walk.trail.findLast((line) => line.kind === 'finding')
    expect(proof).toMatchObject({ position: { node: 'drag-at-clutch/n9d' }, answer: { outcome: 'gone', value: 12350, unit: '1/min' }, judgedBy: 'limits' })
  })

  test('keeps a dusty filter that lets light through off the suspects and on the service list', () => {
    expect(walkIt().walk.serviceList).toEqual(['clean-filter'])
  })

  test('never runs the engine with the drum off, and has the brake back before the proof', () => {
    const bench = walkIt()
    expect(bench.walk.metal.open).not.toContain('clutch-off')
    expect(bench.walk.metal.defeated).toEqual([])
    expect(bench.log.filter((event) => event.type === 'access-changed')).toEqual([])
  })

  test('charges a cover that is opened once only once, and again only after it was closed for a run', () => {
    const bench = walkIt()
    // Check 7 reaches the screen with the clutch cover off (2 min of its own, 2 + 2 for the cover); check 9 finds it off.
    expect(minutesAt(bench, 'no-full-speed/n7')).toEqual([6])
    expect(minutesAt(bench, 'no-full-speed/n9')).toEqual([1])
    // Top cover and filter come off at check 3 and are off at checks 5 and 8; the plug costs its own 2 + 2.
    expect(minutesAt(bench, 'no-full-speed/n3')).toEqual([3])
    expect(minutesAt(bench, 'no-full-speed/n5')).toEqual([1])
    expect(minutesAt(bench, 'no-full-speed/n8')).toEqual([6])
    // 3 for the check, 1 + 2 for bar and chain, 3 to warm up again.
    expect(minutesAt(bench, 'drag-at-clutch/n9')).toEqual([9])
    // The cover was closed for that run: 2 + 2 again, with the lead (0.5 + 0.5) and the step itself.
    expect(minutesAt(bench, 'drag-at-clutch/x9b')).toEqual([6])
    const each = bench.walk.trail.reduce((sum, line) => sum + line.minutes, 0)
    expect(bench.walk.minutesUsed).toBeCloseTo(each, 9)
    // Checks 1 to 9: 28.5, covers among them; then 9, 6, 3, 3 with the lead off again 1, 0.5 and 3.
    expect(bench.walk.minutesUsed).toBe(54)
  })

  test('asks for the drum caution before the drum is bare, and for the lead before every touch', () => {
    const pages = walkIt().cautionPages
    expect(pages.find(({ node }) => node === 'drag-at-clutch/n9b')?.ids).toEqual(expect.arrayContaining(['drum', 'start', 'co']))
    for (const node of ['no-full-speed/n4', 'drag-at-clutch/x9b', 'drag-at-clutch/n9c'])
      expect(pages.find((page) => page.node === node)?.ids, node).toContain('lead')
  })

  test('ends repaired: never cleaned led to it, the filter is cleaned on the way out, the run is passed', () => {
    const bench = walkIt().repairAndClose(['never-cleaned'], 19)
    expect(bench.walk).toMatchObject({
      phase: 'closed',
      result: 'repaired',
      causeId: 'band-drags',
      contributing: ['never-cleaned'],
      serviceList: ['clean-filter'],
    })
    expect(bench.log.find((event) => event.type === 'repair-done')?.payload).toMatchObject({ serviceDone: ['clean-filter'] })
    expect(bench.replayed()).toEqual(bench.state)
  })

  test('full speed with chain and bar off sends back to chain and bar, and ends with the lead when these are good too', () => {
    const bench = benchAt('drag-at-clutch', saw)
      .answer('n0', 'drags')
      .answer('n1', 'slides')
      .answer('n6', 'clear')
      .answer('n7', 'plain')
      .answer('n8', 'even')
      .answer('n9', 'in')
      .answer('n5x', 'good')
      .answer('n2x', 'in')
    expect(bench.node).toBe('a1')
  })

  test('low with no band round the drum goes back to the engine, brake refitted first', () => {
    const bench = benchAt('drag-at-clutch', saw)
      .answer('n0', 'drags')
      .answer('n1', 'slides')
      .answer('n6', 'packed')
      .answer('n7', 'stripe')
      .answer('n8', 'touches')
      .answer('n9', 'low')
      .step('x9b')
      .answer('n9b', 'low')
    expect(bench.walk.metal.defeated).toEqual(['chain-brake'])
    bench.step('r9b')
    expect(bench.walk.metal.defeated).toEqual([])
    expect(bench.walk.node).toBe('no-full-speed/n10')
    expect(bench.walk.serviceList).toEqual(['clean-band-seat'])
  })

  test('a brake that sits in the body cannot be tried with the cover off: the walk cleans the seat and proves that', () => {
    const bench = benchAt('drag-at-clutch', saw)
      .answer('n0', 'drags')
      .answer('n1', 'slides')
      .answer('n6', 'clear')
      .answer('n7', 'plain')
      .answer('n8', 'even')
      .answer('n9', 'low')
      .step('x9b')
      .skip('n9b')
    bench.step('n9c').step('r9').answer('n9d', 'still')
    expect(bench.node).toBe('n10')
  })
})

describe('the ten-check route from full speed missing to a fouled plug', () => {
  const walkIt = () =>
    benchAt('no-full-speed', saw)
      .answer('n1', 'low')
      .answer('n2', 'low', [9600, 9620])
      .answer('n3', 'both')
      .answer('n4', 'free')
      .answer('n5', 'light')
      .answer('n6', 'fresh')
      .answer('n6b', 'dry')
      .answer('n7', 'clear')
      .answer('n8', 'fouled')
      .answer('p8b', 'gone', [12300])
      .prove('plug-fouled')

  test('takes ten checks and at most 20 taps from its first page', () => {
    const bench = walkIt()
    expect(bench.walk.trail.filter((line) => line.kind === 'finding')).toHaveLength(10)
    expect(bench.taps).toBeLessThanOrEqual(20)
    expect(bench.taps).toBe(16)
  })

  test('reads its cautions on four pages: before the first run, before hands go in, before the tank, before the run of the proof', () => {
    expect(walkIt().cautionPages.map(({ node }) => node)).toEqual(['no-full-speed/n1', 'no-full-speed/n4', 'no-full-speed/n6', 'no-full-speed/p8b'])
    expect(walkIt().cautionPages.map(({ ids }) => ids)).toEqual([
      expect.arrayContaining(['co', 'start', 'hot', 'lean', 'cut']),
      expect.arrayContaining(['lead', 'edge']),
      expect.arrayContaining(['geyser', 'hot']),
      expect.arrayContaining(['co', 'start', 'lean', 'hot']),
    ])
  })

  test('runs the engine with the plug, the covers and the lead back on', () => {
    const { open, engine } = walkIt().walk.metal
    expect(engine).toBe('running')
    expect(open).toEqual(['warm'])
  })
})

test('a furred screen is proved by running without it, and is back before the cause is named', () => {
  const bench = benchAt('no-full-speed', saw)
    .answer('n1', 'low')
    .answer('n2', 'low')
    .answer('n3', 'both')
    .answer('n4', 'free')
    .answer('n5', 'light')
    .answer('n6', 'fresh')
    .answer('n6b', 'grime')
    .answer('n7', 'furred')
    .answer('p7', 'gone')
  expect(bench.walk.metal).toMatchObject({ engine: 'running', defeated: ['spark-screen'] })
  bench.step('r7a').prove('screen-shut')
  expect(bench.walk.metal).toMatchObject({ engine: 'stopped', defeated: [] })
  expect(bench.walk.metal.open).not.toContain('screen-out')
})

test('on a trimmer the checks under the clutch cover are passed, and a stiff shaft is proved with the drum left on', () => {
  const bench = benchAt('no-full-speed', trimmer).answer('n1', 'low').answer('n2', 'low').answer('n3', 'both').answer('n4', 'stiff')
  expect(bench.walk.node).toBe('drag-at-clutch/n15')
  bench.answer('n15', 'shaft').answer('n15b', 'low').answer('p15a', 'gone').prove('shaft-dry')
  expect(bench.walk.phase).toBe('proven')
})

test('a chain that a stuck brake holds is never run at full speed for the proof: the pull round the bar is compared', () => {
  const bench = benchAt('drag-at-clutch', saw).answer('n0', 'drags').answer('n1', 'locked').answer('n10x', 'sticks')
  expect(bench.page()).toMatchObject({ kind: 'proof', before: { answer: { outcome: 'locked' } }, entering: { machine: 'stopped' } })
  bench.answer('p10bx', 'gone').prove('brake-lever-sticks')
  expect(bench.page()).toMatchObject({ kind: 'proven', canCloseUnrepaired: false })
})

test('full speed that was read with the chain on is what a good bar is compared with, also across charts', () => {
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
    ['n9', 'marks'],
    ['n9', 'in'],
    ['n5x', 'rails'],
  ] as const)
    bench.answer(id, outcome)
  expect(bench.node).toBe('p5ax')
  bench.answer('p5ax', 'gone').prove('rails-pinched')
  expect(bench.walk.trail.at(-1)).toMatchObject({ before: null })
})
