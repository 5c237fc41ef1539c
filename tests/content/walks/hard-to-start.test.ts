import { describe, expect, test } from 'vitest'
import { isDecision } from '#shared/chart/graph.ts'
import { locate } from '#shared/walk/pinned-charts.ts'
import type { Machine } from '#shared/walk/events.ts'
import { demoChart, demoChartSet } from '#tests/content/demo-charts.ts'
import { benchAt, charts, mower, pump, saw, type Bench } from './bench.ts'

/** What is found at nodes of this chart, where it is not as it should be. */
type Found = Readonly<Record<string, string>>

/** Goes on, through called charts as well, until the walk comes to a cause or to the lead: with what is found, else with the normal answer. */
function walkOn(bench: Bench, found: Found): Bench {
  for (let act = 0; act < 60; act += 1) {
    if (['cause', 'ask', 'escalated', 'pick'].includes(bench.page().kind)) return bench
    const located = locate(charts, bench.walk.pins, bench.place)
    const node = located?.node
    if (node?.kind === 'step') bench.step(node.id)
    else if (node !== undefined && isDecision(node)) {
      const given = located?.index.id === 'hard-to-start' ? found[node.id] : undefined
      const normal = node.outcomes.find((outcome) => outcome.normal ?? outcome.confirms)?.id
      bench.answer(node.id, given ?? normal ?? raise(`normal answer at ${bench.place}`))
    } else raise(`answer at ${bench.place}`)
  }
  return raise('end')
}

function raise(what: string): never {
  throw new Error(`no ${what}`)
}

/** The cause that the walk has come to, or the reason for which it asks. */
function endOf(bench: Bench): string | null {
  const page = bench.page()
  if (page.kind === 'cause') return page.cause.causeId
  return page.kind === 'ask' || page.kind === 'escalated' ? page.reason : page.kind
}

const hard = { n1: 'hard' }
/** Wet plug, sound spark, nothing on drops: on to the pressure. */
const toPressure = { ...hard, n12x: 'silent', n12bx: 'dead' }

describe('every row of the method reaches its causes', () => {
  test.each<[row: string, machine: Machine, found: Found, end: string]>([
    ['1 starts, trouble neither hot nor cold', saw, { n1b: 'no', n1: 'starts' }, 'could-not-reproduce'],
    ['1 rope stuck', saw, { n1: 'rope' }, 'not-here-yet'],
    ['1 crank locked', saw, { n1: 'rope', n1c: 'locked' }, 'crank-locked'],
    ['1 locked by what fills the cylinder', saw, { n1: 'rope', n1c: 'locked', p1c: 'not' }, 'flooded'],
    ['1 something else', saw, { n1: 'other' }, 'pick'],
    ['2 switch or tap', mower, { ...hard, n2: 'off' }, 'control-left-off'],
    ['2 oil low', mower, { ...hard, n2b: 'low' }, 'low-oil-cutout'],
    ['4 cap loose', saw, { ...hard, n4: 'starts' }, 'cap-vent-shut'],
    ['4 stale fuel', saw, { ...hard, n4b: 'sour' }, 'stale-fuel'],
    ['4 water', mower, { ...hard, n4b: 'layers' }, 'water-in-fuel'],
    ['5 choke held shut', saw, { ...hard, n5: 'gap' }, 'choke-not-closing'],
    ['5 without filter', saw, { ...hard, n5b: 'none' }, 'filter-packed'],
    ['6 bridged', saw, { ...hard, n6: 'bridged' }, 'plug-bridged'],
    ['6 sooted', saw, { ...hard, n6: 'sooted' }, 'plug-fouled'],
    ['7 soaked', saw, { ...hard, n6: 'soaked' }, 'flooded'],
    ['14 release valve', saw, { ...toPressure, n13: 'low', n14: 'hiss' }, 'release-open'],
    ['14 head loose', saw, { ...toPressure, n13: 'low', n14b: 'loose' }, 'head-gasket-blown'],
    ['14 two-stroke, oil lifts it', saw, { ...toPressure, n13: 'low' }, 'rings-worn'],
    ['14 intake gap', mower, { ...toPressure, n13: 'low', n14c: 'narrow' }, 'valve-gap-closed'],
    ['14 exhaust gap', mower, { ...toPressure, n13: 'low', n14d: 'narrow' }, 'valve-gap-closed'],
    ['14 air at a valve', mower, { ...toPressure, n13: 'low', n14e: 'valve' }, 'valve-leaks'],
    ['14 air at the dipstick', mower, { ...toPressure, n13: 'low', n14e: 'rings' }, 'rings-worn'],
    ['14 air round the head', mower, { ...toPressure, n13: 'low', n14e: 'head' }, 'head-gasket-blown'],
    ['15 screen', saw, { ...toPressure, n15: 'none', n15b: 'furred' }, 'screen-shut'],
    ['15 muffler', saw, { ...toPressure, n15: 'none', n15b: 'stuffed' }, 'muffler-blocked'],
    ['16 lost hot, back cold', saw, { n1: 'starts', n1b: 'hot', n16: 'gone' }, 'coil-fails-hot'],
    ['16 spark stays, hot cap vent', saw, { n1: 'starts', n1b: 'hot', n16: 'stays', n16b: 'sighs' }, 'cap-vent-shut'],
    ['16 spark stays, flooded hot', saw, { n1: 'starts', n1b: 'hot', n16: 'stays', n16c: 'soaked' }, 'flooded'],
    ['16 restarts hot each time', saw, { n1: 'starts', n1b: 'hot', n16: 'never' }, 'could-not-reproduce'],
  ])('row %s', (_row, machine, found, end) => {
    const bench = walkOn(benchAt('hard-to-start', machine), found)
    expect(endOf(bench)).toBe(end)
    if (bench.page().kind !== 'cause') return
    bench.prove(end)
    expect(bench.walk).toMatchObject({ phase: 'proven', cause: { causeId: end } })
    expect(bench.walk.metal.defeated).toEqual([])
  })

  // Rows 8 to 11 are a chart of their own, and so are the tank side and the seal test.
  test.each([
    ['3 no fuel at the bulb', 'n3', 'none', 'j3', { chart: 'runs-only-while-priming', at: 'n7' }],
    ['8 spark, behind a damp plug', 'n6', 'damp', 'j8', { chart: 'spark', returns: true }],
    ['8 spark, behind a plug that was cleared in vain', 'n7', 'still', 'j8', { chart: 'spark', returns: true }],
    ['8 spark, behind a dry plug and no life on drops', 'n12b', 'dead', 'j8b', { chart: 'spark', returns: true }],
    ['12 fires on drops', 'n12', 'fires', 'j12', { chart: 'runs-only-while-priming', at: 'n7' }],
    ['12 fires on drops in the cylinder alone', 'n12b', 'fires', 'j12s', { chart: 'seal-test', returns: true }],
    ['17 nothing found', 'n15', 'puff', 'j17', { chart: 'seal-test', returns: true }],
  ])('row %s leads to its chart', (_row, from, outcome, to, jump) => {
    const chart = demoChart('hard-to-start')
    expect(chart.edges).toContainEqual({ from, outcome, to })
    expect(chart.nodes.find(({ id }) => id === to)).toMatchObject({ kind: 'jump', ...jump })
  })

  test('what the spark chart finds has its grade here', () => {
    const causes = new Map((demoChart('hard-to-start').library.causes ?? []).map((cause) => [cause.id as string, cause.grade]))
    for (const id of ['stop-circuit-shorted', 'coil-gap-wide', 'key-sheared', 'coil-fails-hot']) expect(causes.get(id), id).toBe('occasional')
    for (const id of ['coil-dead', 'lead-broken']) expect(causes.get(id), id).toBe('rare')
  })
})

test('the tank side of a diaphragm carburettor is for machines held in the hand; others go to the carburettor, and come back', () => {
  const index = demoChartSet.get(demoChart('hard-to-start').id)
  for (const id of ['j3', 'j12'] as const) {
    const jump = [...(index?.nodes.values() ?? [])].find((node) => node.id === id)
    expect(jump?.onlyFor?.classes).toContain('chain-saw')
    expect(jump?.onlyFor?.classes).not.toContain('mower')
    expect(index?.nodes.get(jump?.onlyFor?.otherwise ?? ('' as never))).toMatchObject({ kind: 'jump', chart: 'carburettor-bench', returns: true })
  }
})

describe('a saw that floods after a winter in the shed', () => {
  const walkIt = () =>
    benchAt('hard-to-start', saw)
      .answer('n1', 'hard')
      .answer('n2', 'set')
      .answer('n3', 'moves')
      .answer('n4', 'same')
      .answer('n4b', 'mix')
      .answer('n5', 'hangs')
      .answer('n5b', 'dusty')
      .step('x6')
      .answer('n6', 'soaked')
      .answer('n7', 'gone')
      .prove('flooded')

  test('is walked to the cause in nine findings and at most 20 taps', () => {
    const bench = walkIt()
    expect(bench.walk.trail.filter((line) => line.kind === 'finding')).toHaveLength(9)
    expect(bench.taps).toBeLessThanOrEqual(20)
  })

  test('keeps what is dirty but not the cause on the service list', () => {
    expect(walkIt().walk.serviceList).toEqual(['renew-mix', 'free-choke', 'clean-filter'])
  })

  test('has plug, lead and covers back for every start, and is cold throughout', () => {
    const bench = walkIt()
    expect(bench.walk.metal).toMatchObject({ engine: 'running', open: ['cool'] })
    expect(bench.walk.trail.flatMap((line) => ('opened' in line ? line.opened : []))).not.toContain('warm')
  })

  test('ends repaired, with what led to it', () => {
    const bench = walkIt().repairAndClose(['wrong-starting-drill'], 12)
    expect(bench.walk).toMatchObject({ phase: 'closed', result: 'repaired', causeId: 'flooded', contributing: ['wrong-starting-drill'] })
    expect(bench.replayed()).toEqual(bench.state)
  })
})

test('before a pump is started its casing is filled, and the notice about the seal stands there', () => {
  const bench = benchAt('hard-to-start', pump)
  expect(bench.node).toBe('x1')
  bench.step('x1')
  expect(bench.cautionPages[0]?.ids).toEqual(expect.arrayContaining(['co', 'start', 'geyser', 'spark', 'dry']))
  expect(benchAt('hard-to-start', saw).node).toBe('n1')
})

test('a shut screen is back in its seat before the cause is named', () => {
  const bench = walkOn(benchAt('hard-to-start', saw), { ...toPressure, n15: 'none', n15b: 'furred' })
  expect(bench.walk.metal).toMatchObject({ engine: 'stopped', defeated: [] })
  expect(bench.walk.metal.open).not.toContain('screen-out')
})

test('a machine that starts badly hot alone is proved by its hot restart, since cold it starts anyway', () => {
  const bench = walkOn(benchAt('hard-to-start', saw), { n1: 'starts', n1b: 'hot', n16: 'stays', n16b: 'sighs' })
  const proof = bench.walk.trail.findLast((line) => line.kind === 'finding')
  expect(proof).toMatchObject({ position: { node: 'hard-to-start/p16b' }, answer: { outcome: 'gone' } })
  for (const { suspect, compares } of demoChart('hard-to-start').nodes.flatMap((node) => (node.kind === 'proof' ? [node] : [])))
    if (compares?.node === 'n16') expect(['coil-fails-hot', 'cap-vent-shut', 'flooded']).toContain(suspect)
})
