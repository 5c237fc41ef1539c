import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import { isDecision } from '#shared/chart/graph.ts'
import type { Machine } from '#shared/walk/events.ts'
import { locate } from '#shared/walk/pinned-charts.ts'
import { positionKey, waysOn, type Arrived } from '#shared/walk/route.ts'
import { demoChart, demoCharts } from '#tests/content/demo-charts.ts'
import { answersOf, benchAt, blower, charts, endOf, fourStrokeTrimmer, isAtEnd, mower, pump, saw, trimmer, type Bench } from './bench.ts'

/** One way on: the answer at a position, and where it arrives. */
interface Way {
  readonly from: string
  /** `undefined` at a step. */
  readonly outcome: string | undefined
  readonly to: Pick<Arrived, 'position' | 'deadEnd'>
}

const keyOf = ({ from, outcome }: Pick<Way, 'from' | 'outcome'>) => `${from} ${outcome ?? ''}`

/** The map of a walk: every way on from every position that it can come to. */
function mapOf(bench: Bench): ReadonlyMap<string, readonly Way[]> {
  const map = new Map<string, Way[]>()
  const queue: Way['to'][] = [{ position: { node: bench.walk.node, calls: bench.walk.calls }, deadEnd: null }]
  for (const { position, deadEnd } of queue) {
    const from = positionKey(position)
    if (deadEnd !== null || map.has(from)) continue
    const node = locate(charts, bench.walk.pins, position.node)?.node
    const arrivals = waysOn(charts, bench.walk, position)
    map.set(
      from,
      arrivals.map((to, at) => ({ from, outcome: node !== undefined && isDecision(node) ? node.outcomes[at]?.id : undefined, to })),
    )
    queue.push(...arrivals)
  }
  return map
}

/** The shortest way from a position to the first thing that is wanted; `null` where none leads there. */
function routeTo(map: ReadonlyMap<string, readonly Way[]>, from: string, isWanted: (way: Way) => boolean): readonly Way[] | null {
  const cameBy = new Map<string, Way | null>([[from, null]])
  for (const here of cameBy.keys()) {
    for (const way of map.get(here) ?? []) {
      if (isWanted(way)) return [...wayBack(cameBy, here), way]
      const next = positionKey(way.to.position)
      if (way.to.deadEnd === null && !cameBy.has(next)) cameBy.set(next, way)
    }
  }
  return null
}

function wayBack(cameBy: ReadonlyMap<string, Way | null>, to: string): readonly Way[] {
  const way = cameBy.get(to)
  return way ? [...wayBack(cameBy, way.from), way] : []
}

/** Goes one way: a step that stands on a page is done there, an answer is given. */
function go(bench: Bench, outcome: string | undefined): void {
  if (outcome === undefined) bench.step(bench.node)
  else bench.answer(bench.node, outcome)
  expectSafe(bench)
}

/** What must hold after every act: nothing spins without what holds it, and no hand is on the plug lead of a running engine. */
function expectSafe(bench: Bench): void {
  const { metal, trail } = bench.walk
  if (metal.engine === 'stopped') return
  const here = trail.at(-1)?.position.node
  for (const id of ['clutch-off', 'lead-off', 'plug-out', 'tank-low', 'muffler-off', 'starter-off', 'casing-open'] as const)
    expect(metal.open, `${here} runs with ${id}`).not.toContain(id)
  if (metal.open.some((id) => id === 'cover-off')) expect(here).toBe('drag-at-clutch/n9b')
  if (metal.open.some((id) => id === 'screen-out')) expect(['no-full-speed/p7', 'hard-to-start/p15a']).toContain(here)
}

/** Walks every answer of every position at least once, each log to its end; tells how each ended. */
function walkEverything(chartId: string, machine: Machine): { readonly ends: ReadonlySet<string>; readonly answered: ReadonlySet<string> } {
  const map = mapOf(benchAt(chartId, machine))
  const wanted = [...map.values()].flat().toReversed()
  const answered = new Set<string>()
  const ends = new Set<string>()
  for (const goal of wanted) {
    if (answered.has(keyOf(goal))) continue
    const bench = benchAt(chartId, machine)
    const take = (route: readonly Way[] | null) => {
      expect(route, `no route for ${keyOf(goal)}`).not.toBeNull()
      for (const way of route ?? []) {
        // Steps that stand on the page of a check are done with its answer.
        if (way.outcome === undefined && answersOf(bench) !== null) answered.add(keyOf(way))
        else {
          go(bench, way.outcome)
          answered.add(keyOf(way))
        }
      }
    }
    const here = () => positionKey({ node: bench.walk.node, calls: bench.walk.calls })
    take(routeTo(map, here(), (way) => keyOf(way) === keyOf(goal)))
    if (!isAtEnd(bench)) take(routeTo(map, here(), ({ to }) => to.deadEnd !== null || (map.get(positionKey(to.position)) ?? []).length === 0))
    expect(isAtEnd(bench), `${keyOf(goal)} ended at ${bench.walk.node}`).toBe(true)
    expect(bench.walk.metal.defeated, keyOf(goal)).toEqual([])
    expect(bench.replayed()).toEqual(bench.state)
    ends.add(endOf(bench))
  }
  return { ends, answered }
}

/** Causes that are found from check 10 of no-full-speed on, to which a saw comes back from the clutch. */
const behindTheTank = ['rings-worn', 'release-open', 'key-sheared', 'coil-gap-wide', 'muffler-blocked']
const notHere = ['not-here-yet', 'no-cause-found', 'pick']
/** Causes of the shared charts: the seal test, spark, and the carburettor on the bench, there on any machine and on those with a diaphragm. */
const sealTest = ['crank-seal-leaks', 'base-gasket-leaks', 'intake-joint-cracked', 'release-open']
const spark = ['plug-fouled', 'stop-circuit-shorted', 'lead-broken', 'coil-gap-wide', 'coil-dead', 'key-sheared', 'coil-fails-hot']
const anyCarburettor = ['shaft-worn', 'jets-gummed', 'pump-ring-leaks']
const diaphragm = ['impulse-blocked', 'inlet-screen-gummed', 'lever-low', 'diaphragm-stiff', 'needle-stuck', 'needle-leaks']
const carburettor = [...anyCarburettor, ...diaphragm, 'lever-high']
/** Causes that are found from check 7 of runs-only-while-priming on. */
const line = ['pickup-clogged', 'hose-off', 'hose-cracked', 'bulb-split', 'bulb-flap-stuck', 'carb-loose', 'intake-joint-cracked']
const fuelLine = [...line, ...diaphragm]
const primed = [...fuelLine, ...spark, 'stale-fuel', 'water-in-fuel', 'oil-in-fuel', 'return-blocked', 'cap-vent-shut', 'could-not-reproduce']
const anyMachine = [
  'throttle-short',
  'choke-part-closed',
  'air-path-blocked',
  'filter-packed',
  'stale-fuel',
  'water-in-fuel',
  'mix-wrong',
  'screen-shut',
  'plug-bridged',
  'plug-fouled',
  ...behindTheTank,
]
const twoStroke = ['limiter-working', 'port-carboned', 'piston-scored']
const cutting = ['chain-blunt', 'gear-too-big']
const sawDrive = [
  'chain-overtight',
  'oil-port-blocked',
  'rails-pinched',
  'nose-seized',
  'band-bent',
  'band-worn',
  'brake-lever-sticks',
  'clutch-spring-broken',
  'shoes-glazed',
  'drum-bearing-dry',
  'crank-bearing-rough',
  'drum-worn',
  'band-drags',
]
const shaftDrive = ['shaft-dry', 'head-bearing-seized']
const idling = [
  'idle-set-high',
  'clutch-spring-broken',
  'drum-bearing-dry',
  'throttle-sticks',
  'debris-in-clutch',
  'latch-stays',
  'springs-wrong',
  'drum-worn',
  'carb-loose',
  'intake-joint-cracked',
  'filter-packed',
  'could-not-reproduce',
  'hold',
  'pick',
]
/** Causes of drag-at-clutch from check 10 on, to which a saw comes whose brake does not stop the chain. */
const lever = ['band-bent', 'band-worn', 'brake-lever-sticks', 'clutch-spring-broken', 'shoes-glazed', 'drum-bearing-dry', 'crank-bearing-rough']

const coldStart = [
  'crank-locked',
  'control-left-off',
  'cap-vent-shut',
  'stale-fuel',
  'water-in-fuel',
  'choke-not-closing',
  'filter-packed',
  'plug-bridged',
  'plug-fouled',
  'flooded',
  'release-open',
  'head-gasket-blown',
  'rings-worn',
  'screen-shut',
  'muffler-blocked',
  'coil-fails-hot',
]
const fourStroke = ['low-oil-cutout', 'valve-gap-closed', 'valve-leaks']
const withoutStart = ['no-cause-found', 'could-not-reproduce', 'pick']
const waterEnd = [
  'started-dry',
  'outlet-shut',
  'lift-too-high',
  'strainer-blocked',
  'strainer-high',
  'hose-hump',
  'suction-hose-soft',
  'coupling-leaks',
  'governor-low',
  'flap-valve-leaks',
  'casing-leaks',
  'casing-cracked',
  'shaft-seal-leaks',
  'impeller-loose',
  'impeller-clogged',
  'impeller-worn',
  'wear-plate-worn',
]

describe('each start reaches its end on every outcome', () => {
  test.each([
    [
      'no-full-speed',
      'chain saw',
      saw,
      [...anyMachine, ...twoStroke, ...cutting, ...sawDrive, ...primed, ...sealTest, ...carburettor, ...coldStart, ...notHere],
    ],
    [
      'no-full-speed',
      'line trimmer',
      trimmer,
      [...anyMachine, ...twoStroke, ...cutting, ...shaftDrive, ...primed, ...sealTest, ...carburettor, ...coldStart, ...notHere],
    ],
    [
      'no-full-speed',
      'four-stroke trimmer',
      fourStrokeTrimmer,
      [...fourStroke, ...anyMachine, ...cutting, ...shaftDrive, ...primed, ...carburettor, ...coldStart, ...notHere],
    ],
    ['no-full-speed', 'blower', blower, [...anyMachine, ...twoStroke, ...primed, ...sealTest, ...carburettor, ...coldStart, ...notHere]],
    [
      'drag-at-clutch',
      'chain saw',
      saw,
      [...sawDrive, ...behindTheTank, ...twoStroke, ...cutting, ...fuelLine, ...sealTest, ...carburettor, 'no-cause-found', 'pick'],
    ],
    ['drag-at-clutch', 'line trimmer', trimmer, [...shaftDrive, ...sealTest, 'no-cause-found', 'pick']],
    [
      'runs-only-while-priming',
      'chain saw',
      saw,
      [...primed, ...sealTest, ...anyMachine, ...twoStroke, ...cutting, ...sawDrive, ...carburettor, ...coldStart, ...notHere],
    ],
    [
      'runs-only-while-priming',
      'line trimmer',
      trimmer,
      [...primed, ...sealTest, ...anyMachine, ...twoStroke, ...cutting, ...shaftDrive, ...carburettor, ...coldStart, ...notHere],
    ],
    ['runs-only-while-priming', 'blower', blower, [...primed, ...sealTest, ...anyMachine, ...twoStroke, ...carburettor, ...coldStart, ...notHere]],
    ['creeps-at-idle', 'chain saw', saw, [...idling, ...lever, ...sealTest, ...carburettor, 'no-cause-found']],
    ['creeps-at-idle', 'line trimmer', trimmer, [...idling, ...sealTest, ...carburettor, 'no-cause-found']],
    ['creeps-at-idle', 'four-stroke trimmer', fourStrokeTrimmer, [...idling, ...carburettor]],
    ['seal-test', 'chain saw', saw, [...sealTest, 'no-cause-found']],
    ['seal-test', 'line trimmer', trimmer, [...sealTest, 'no-cause-found']],
    ['spark', 'mower', mower, [...spark, 'no-cause-found']],
    ['carburettor-bench', 'chain saw', saw, [...carburettor, 'no-cause-found']],
    ['carburettor-bench', 'mower', mower, [...anyCarburettor, 'no-cause-found']],
    ['hard-to-start', 'chain saw', saw, [...coldStart, ...withoutStart, ...spark, ...fuelLine, ...sealTest, 'not-here-yet']],
    ['hard-to-start', 'mower', mower, [...coldStart, ...withoutStart, ...fourStroke, ...spark, ...anyCarburettor, 'not-here-yet']],
    ['hard-to-start', 'pump', pump, [...coldStart, ...withoutStart, ...fourStroke, ...spark, ...anyCarburettor, 'not-here-yet']],
    ['will-not-prime', 'pump', pump, [...waterEnd, ...anyMachine, ...line, ...anyCarburettor, 'no-cause-found', 'pick', 'could-not-reproduce']],
    [
      'hard-to-start-printed',
      'chain saw',
      saw,
      [
        'cap-vent-shut',
        'filter-packed',
        'fuel-line-blocked',
        'plug-fouled',
        'lead-broken',
        'choke-not-closing',
        'flooded',
        'water-in-fuel',
        'stop-circuit-shorted',
        'no-cause-found',
      ],
    ],
  ] as const)(
    '%s, %s',
    (chartId, _name, machine, expected) => {
      const { ends, answered } = walkEverything(chartId, machine)
      const map = mapOf(benchAt(chartId, machine))
      expect(
        [...map.values()]
          .flat()
          .map(keyOf)
          .filter((key) => !answered.has(key)),
      ).toEqual([])
      expect([...ends].sort()).toEqual([...new Set(expected)].sort())
    },
    60_000,
  )
})

test('walks of any answers and gaps come to an end, keep the engine safe, and leave no safety part out of action but on the way to its restoring step', () => {
  const start = fc.constantFrom(
    ['no-full-speed', saw] as const,
    ['no-full-speed', fourStrokeTrimmer] as const,
    ['drag-at-clutch', saw] as const,
    ['drag-at-clutch', trimmer] as const,
    ['hard-to-start', saw] as const,
    ['hard-to-start', mower] as const,
    ['will-not-prime', pump] as const,
    ['hard-to-start-printed', blower] as const,
    ['runs-only-while-priming', saw] as const,
    ['creeps-at-idle', saw] as const,
    ['creeps-at-idle', fourStrokeTrimmer] as const,
    ['spark', mower] as const,
  )
  fc.assert(
    fc.property(start, fc.array(fc.nat(), { minLength: 240, maxLength: 240 }), ([chartId, machine], choices) => {
      const bench = benchAt(chartId, machine)
      for (const choice of choices) {
        if (isAtEnd(bench)) break
        const answers = answersOf(bench)
        if (answers === null) bench.step(bench.node)
        else if (choice % 7 === 0) bench.skip(bench.node)
        else bench.answer(bench.node, answers[choice % answers.length] ?? '')
        expectSafe(bench)
      }
      expect(isAtEnd(bench)).toBe(true)
      expect(bench.walk.metal.defeated).toEqual([])
      expect(bench.replayed()).toEqual(bench.state)
    }),
    { numRuns: 40 },
  )
}, 60_000)

test('a start that cannot be reproduced asks the lead and names it so', () => {
  for (const [chartId, first] of [
    ['no-full-speed', 'n1'],
    ['drag-at-clutch', 'n0'],
    ['hard-to-start', 'n1'],
  ] as const) {
    const bench = benchAt(chartId, saw).skip(first, 'not-reproduced')
    expect(bench.walk).toMatchObject({ phase: 'escalated', reason: 'could-not-reproduce' })
  }
})

describe('every row of the printed table "Troubleshooting Small Engines - hard to start" reaches its cause', () => {
  const rows = [
    ['1 cap loosened', 'n1', 'starts', 'cap-vent-shut'],
    ['2 filter off', 'n2', 'starts', 'filter-packed'],
    ['3 fuel line blown through', 'n3', 'blocked', 'fuel-line-blocked'],
    ['4 plug', 'n4', 'fouled', 'plug-fouled'],
    ['5 plug lead', 'n5', 'broken', 'lead-broken'],
    ['6 choke open when cold', 'n6', 'open', 'choke-not-closing'],
    ['6 choke shut when warm', 'n6', 'shut', 'flooded'],
    ['7 fuel sample', 'n7', 'water', 'water-in-fuel'],
    ['8 stop switch', 'n8', 'back', 'stop-circuit-shorted'],
  ] as const
  const order = ['n1', 'n2', 'n3', 'n4', 'n5', 'n6', 'n7', 'n8']

  test.each(rows)('row %s', (_row, node, outcome, causeId) => {
    const bench = benchAt('hard-to-start-printed', saw)
    for (const id of order.slice(0, order.indexOf(node))) bench.answer(id, normalOf(id))
    bench.answer(node, outcome)
    if (node === 'n8') bench.step('r8a')
    bench.prove(causeId)
    expect(bench.walk).toMatchObject({ phase: 'proven', cause: { causeId } })
    expect(bench.walk.metal.defeated).toEqual([])
  })

  test('in the order in which it is printed, and with all rows good it ends with the lead', () => {
    const bench = benchAt('hard-to-start-printed', saw)
    for (const id of order) bench.answer(id, normalOf(id))
    bench.step('r8b')
    expect(bench.node).toBe('a1')
    expect(demoCharts.find(({ id }) => id === 'hard-to-start-printed')?.basis).toBe('printed-table')
  })
})

function normalOf(id: string): string {
  const node = demoChart('hard-to-start-printed').nodes.find((entry) => entry.id === id)
  return (node !== undefined && isDecision(node) ? node.outcomes.find(({ normal }) => normal === true)?.id : undefined) ?? ''
}
