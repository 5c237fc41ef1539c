import { mkdtemp, readFile, rm, writeFile } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'

import { afterAll, beforeAll, describe, expect, test } from 'vitest'

import type { WalkEvent } from '#shared/walk/events.ts'
import { jump, sketchJson } from '#tests/support/chart-builder.ts'
import { Bench, proven, revs, started, tap, uuid } from '#tests/support/walk-builder.ts'
import { jumpingChart, otherChart, sawChart, sawSketch, sealChart } from '#tests/support/walk-charts.ts'
import { BadInput, type Io } from './verb.ts'
import { walkVerbs } from './walk.ts'

let folder = ''
const inFolder = (name: string) => join(folder, name)
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'walk-replay-'))
  await writeFile(inFolder('saw.json'), JSON.stringify(sawChart))
})
afterAll(() => rm(folder, { recursive: true }))

function ioWith(stdin = ''): Io {
  return {
    read: (file) => (file === '-' ? Promise.resolve(stdin) : readFile(file, 'utf8').catch(() => Promise.reject(new BadInput(`${file} can't be read`)))),
    note: () => undefined,
  }
}

const replay = (args: readonly string[], stdin?: string) =>
  (walkVerbs['replay'] ?? { run: () => Promise.reject(new Error('There is no such verb.')) }).run(args, ioWith(stdin))

/** The log of a walk to a proven cause, by version 7 of its chart. */
function logToCause(): WalkEvent[] {
  const bench = new Bench([sawChart])
  bench.do([started({ pins: { saw: 7 } as never }), tap('yes'), revs(9850), tap('dark'), revs(12_400), proven], true)
  return bench.log
}

async function eventsFile(events: unknown): Promise<string> {
  const file = inFolder('events.json')
  await writeFile(file, JSON.stringify(events))
  return file
}

describe('walk replay', () => {
  test('prints the state that the events come to; the file stands for whatever version they name', async () => {
    const { json } = await replay([inFolder('saw.json'), await eventsFile(logToCause())])
    expect(json).toMatchObject({ phase: 'proven', cause: { causeId: 'filter-packed' }, node: 'saw/c3', minutesUsed: 11, pins: { saw: 7 } })
    expect(JSON.parse(JSON.stringify(json))).toEqual(json)
  })

  test('takes a log wrapped as the API gives it, and either file from standard input', async () => {
    const log = logToCause()
    expect((await replay([inFolder('saw.json'), await eventsFile({ walk: {}, events: log })])).json).toMatchObject({ phase: 'proven' })
    expect((await replay([inFolder('saw.json'), '-'], JSON.stringify(log))).json).toMatchObject({ phase: 'proven' })
    expect((await replay(['-', await eventsFile(log)], JSON.stringify(sawChart))).json).toMatchObject({ phase: 'proven' })
  })

  test('no events are a walk that has not begun', async () => {
    expect((await replay([inFolder('saw.json'), await eventsFile([])])).json).toEqual({ phase: 'new' })
  })

  test('a refused event is named with its place, its code and its field, and nothing is printed', async () => {
    const [first, ...rest] = logToCause()
    const twice = [first, ...rest.slice(0, 2), { ...rest[1], id: uuid(2000), seq: 4 }]
    await expect(replay([inFolder('saw.json'), await eventsFile(twice)])).rejects.toThrow(
      /^events\[3\] \(finding-recorded\): wrong-node at \/payload\/node: The walk has left this check/,
    )
    const gap = logToCause().map((event, index) => (index === 2 ? { ...event, seq: 9 } : event))
    await expect(replay([inFolder('saw.json'), await eventsFile(gap)])).rejects.toThrow(/^events\[2\] .*wrong-seq at \/seq/)
  })

  test('an event that is none is named with its field', async () => {
    const events = logToCause().map((event, index) => (index === 1 ? { ...event, payload: { ...event.payload, outcome: 17 } } : event))
    await expect(replay([inFolder('saw.json'), await eventsFile(events)])).rejects.toThrow(/events\[1\] \(finding-recorded\): malformed at \/payload\/outcome/)
    await expect(replay([inFolder('saw.json'), await eventsFile([null])])).rejects.toThrow(/events\[0\]: malformed/)
  })

  test.each([
    ['no JSON', 'not json', /is not JSON/],
    ['no list', '{"walk": 1}', /holds no list of events/],
    ['a text', '"events"', /holds no list of events/],
  ])('a file that holds %s is refused in one line', async (_name, text, words) => {
    const refusal = replay([inFolder('saw.json'), '-'], text)
    await expect(refusal).rejects.toThrow(words)
    await expect(refusal).rejects.not.toThrow(/\n/)
  })

  test('it takes two files, of which one may be standard input', async () => {
    for (const args of [[], ['saw.json'], ['saw.json', 'events.json', 'more'], ['-', '-']]) await expect(replay(args)).rejects.toThrow(BadInput)
  })

  test('jumps, and symptoms that were picked, resolve among the files beside the chart', async () => {
    const beside = await mkdtemp(join(tmpdir(), 'walk-beside-'))
    const bench = new Bench([jumpingChart, sealChart, otherChart])
    bench.do(
      [
        started(),
        tap('yes'),
        tap('else'),
        ({ place }) => [{ type: 'jumped', payload: { chartId: place('other/s').split('/')[0], startId: 's', version: 1, pins: {} } as never }],
        tap('yes'),
      ],
      true,
    )
    await writeFile(join(beside, 'saw.json'), JSON.stringify(jumpingChart))
    await writeFile(join(beside, 'other.json'), JSON.stringify(otherChart))
    await writeFile(join(beside, 'events.json'), JSON.stringify(bench.log))
    expect((await replay([join(beside, 'saw.json'), join(beside, 'events.json')])).json).toMatchObject({ phase: 'at-node', node: 'other/n7' })
    await rm(beside, { recursive: true })
  })

  test('a one-way jump into a chart that is not beside the file asks the lead', async () => {
    const away = sketchJson({
      ...sawSketch,
      nodes: [...sawSketch.nodes, jump('j', 'nobody-wrote-it')],
      edges: sawSketch.edges.map((edge) => (edge === 'n1.yes > n2' ? 'n1.yes > j' : edge)),
    })
    const log = logToCause().slice(0, 2)
    expect((await replay(['-', await eventsFile(log)], JSON.stringify(away))).json).toMatchObject({ phase: 'escalated', reason: 'not-here-yet' })
  })
})
