import { mkdtemp, rm, writeFile } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'

import { afterAll, beforeAll, expect, test } from 'vitest'

import { jump, sketchJson, soundSketch } from '#tests/support/chart-builder.ts'
import { exportVerb } from './chart-export.ts'

let folder = ''
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'chart-export-'))
  const caller = { ...soundSketch, id: 'caller', nodes: [...soundSketch.nodes, jump('j1', 'sound')], edges: soundSketch.edges }
  await writeFile(join(folder, 'caller.json'), JSON.stringify(sketchJson(caller)))
  await writeFile(join(folder, 'sound.json'), JSON.stringify(sketchJson({ ...soundSketch, title: 'Sound chart' })))
})
afterAll(() => rm(folder, { recursive: true }))

const io = { read: async (file: string) => (await import('node:fs/promises')).readFile(file, 'utf8'), note: () => undefined }

test('a chart is exported as a drawing that lists its outcomes and names the charts it jumps to', async () => {
  const { text } = await exportVerb.run([join(folder, 'caller.json'), '--as', 'svg'], io)
  expect(text).toMatch(/^<svg xmlns="http:\/\/www\.w3\.org\/2000\/svg"/)
  for (const words of ['Look at n2', 'Runs well', 'Sound chart', 'PROOF']) expect(text).toContain(words)
  expect((await exportVerb.run(['--as', 'svg', join(folder, 'caller.json')], io)).text).toBe(text)
})

test.each([
  [[], /needs "--as svg"/],
  [['x.json'], /needs "--as svg"/],
  [['x.json', '--as', 'pdf'], /"pdf" is no format/],
  [['--as', 'svg'], /needs a FILE/],
  [['x.json', 'y.json', '--as', 'svg'], /takes one FILE/],
])('%j is refused in words', async (args, words) => {
  await expect(exportVerb.run(args, io)).rejects.toThrow(words)
})
