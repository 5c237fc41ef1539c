import { mkdtemp, readFile, rm, writeFile } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, beforeAll, describe, expect, test } from 'vitest'

import { back, check, jump, sketchJson, soundSketch, start, ask, type ChartSketch } from '#tests/support/chart-builder.ts'
import { largeChart } from '#tests/support/large-chart.ts'
import { vary } from '#tests/support/lint.ts'
import { chartVerbs } from './chart.ts'

const caller = vary(soundSketch, { nodes: [jump('j', 'sub', { returns: true })], drop: ['n2.good > ask'], edges: ['n2.good > j', 'j > ask'] })
const sub: ChartSketch = { id: 'sub', nodes: [start(), check('k'), back(), ask()], edges: ['s > k', 'k.good > back', 'k.bad > ask'] }

let folder: string
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'charts-'))
})
afterAll(() => rm(folder, { recursive: true }))

/** Runs a verb on files in a folder of its own; standard input is `stdin`. */
async function run(verb: 'check' | 'musts', file: string, stdin = ''): Promise<{ json: unknown; failed: boolean; notes: string[] }> {
  const notes: string[] = []
  const io = { read: (name: string) => (name === '-' ? Promise.resolve(stdin) : readFile(name, 'utf8')), note: (text: string) => notes.push(text) }
  const answer = await chartVerbs[verb]?.run([file], io)
  return { json: answer !== undefined && 'json' in answer ? answer.json : undefined, failed: answer?.failed === true, notes }
}

/** Writes charts, or whatever else, into a new folder and gives the path of the first. */
async function write(files: Readonly<Record<string, unknown>>): Promise<string> {
  const own = await mkdtemp(join(folder, 'case-'))
  for (const [name, content] of Object.entries(files)) await writeFile(join(own, name), typeof content === 'string' ? content : JSON.stringify(content))
  return join(own, Object.keys(files)[0] ?? '')
}

describe('chart check', () => {
  test('prints no remark for a sound chart', async () => {
    expect(await run('check', await write({ 'sound.json': sketchJson(soundSketch) }))).toMatchObject({ json: { remarks: [] }, failed: false })
  })

  test('prints its remarks in any case, and fails when one must be fixed', async () => {
    const cut = vary(soundSketch, { drop: ['n2.good > ask'] })
    const answer = await run('check', await write({ 'cut.json': sketchJson(cut) }))
    expect(answer.failed).toBe(true)
    expect(answer.json).toEqual({
      remarks: [
        {
          code: 'outcome-without-edge',
          severity: 'error',
          node: 'n2',
          edge: { from: 'n2', outcome: 'good' },
          message: expect.stringContaining('"Look at n2"') as string,
        },
      ],
    })
  })

  test('a target that is not beside the file is a note; one that is, by whatever name, is followed', async () => {
    const alone = await run('check', await write({ 'caller.json': sketchJson(caller) }))
    expect(alone).toMatchObject({ failed: false, json: { remarks: [{ code: 'jump-chart-not-beside', severity: 'note', node: 'j' }] } })
    const beside = await write({ 'caller.json': sketchJson(caller), 'other-name.json': sketchJson(sub), 'readings.json': { values: [1] } })
    expect(await run('check', beside)).toMatchObject({ json: { remarks: [] }, notes: [] })
    const noBack = vary(sub, { without: ['back'], drop: ['k.good > back'], edges: ['k.good > ask'] })
    expect(await run('check', await write({ 'caller.json': sketchJson(caller), 'sub.json': sketchJson(noBack) }))).toMatchObject({
      failed: true,
      json: { remarks: [{ code: 'returning-jump-without-back' }] },
    })
  })

  test('a broken chart beside the file is passed over with a note', async () => {
    const answer = await run('check', await write({ 'caller.json': sketchJson(caller), 'sub.json': { ...sketchJson(sub), nodes: 7 } }))
    expect(answer).toMatchObject({ json: { remarks: [{ code: 'jump-chart-not-beside' }] } })
    expect(answer.notes).toEqual([expect.stringContaining('sub.json: "nodes" must be a list.')])
  })

  test('standard input is a chart with nothing beside it', async () => {
    expect(await run('check', '-', JSON.stringify(sketchJson(caller)))).toMatchObject({ json: { remarks: [{ code: 'jump-chart-not-beside' }] } })
  })

  test.each([
    ['not JSON', '{"format":\n', 'not JSON'],
    ['not a chart', { readings: [] }, '"format" must be "pullcord-chart"'],
    ['of a newer format', { ...sketchJson(soundSketch), formatVersion: 2 }, '#/formatVersion'],
    [
      'with a wrong field',
      { ...sketchJson(soundSketch), nodes: [{ id: 'n1', kind: 'step', minutes: 'two' }] },
      'Node n1: "minutes" must be a number. [#/nodes/0/minutes]',
    ],
  ])('a file that is %s is refused in one line that names the field', async (_, content, words) => {
    const refused = run('check', await write({ 'bad.json': content }))
    await expect(refused).rejects.toMatchObject({ name: 'BadInput', message: expect.stringContaining(words) as string })
    await expect(refused).rejects.toMatchObject({ message: expect.not.stringContaining('\n') as string })
  })

  test('a file is needed, and nothing else', async () => {
    const io = { read: () => Promise.resolve(''), note: () => undefined }
    await expect(chartVerbs['check']?.run([], io)).rejects.toThrow('needs a FILE')
    await expect(chartVerbs['check']?.run(['a.json', '--fast'], io)).rejects.toThrow('nothing else')
  })

  test('a chart of 5 MB is checked; one of more than 50 MB is refused', async () => {
    const text = JSON.stringify(largeChart(25_000))
    expect(text.length).toBeGreaterThan(5_000_000)
    expect(await run('check', '-', text)).toMatchObject({ json: { remarks: [] } })
    await expect(run('check', '-', text + ' '.repeat(53_000_000))).rejects.toThrow('larger than 50 MB')
  }, 60_000)
})

describe('chart musts', () => {
  test('names for every cause the nodes that every route to it passes, in route order', async () => {
    expect(await run('musts', await write({ 'sound.json': sketchJson(soundSketch) }))).toMatchObject({
      json: { causes: { 'filter-packed': ['s', 'n1', 'n2', 'p2'] } },
    })
  })

  test('names them for the worked example with its sub-chart beside it', async () => {
    expect(await run('musts', join(import.meta.dirname, '../../tests/documents/b-bench.json'))).toMatchObject({
      json: { causes: { filter: ['s', 'n1', 'n2', 'p2'], screen: ['s', 'n1', 'n2', 'n3', 'p3'], band: ['s', 'n1', 'n2', 'n3', 'n4', 'st', 'p4'] } },
    })
  })
})
