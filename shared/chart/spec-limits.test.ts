import { expect, test } from 'vitest'
import type { SpecKeyId } from '#shared/lib/ids.ts'
import { chartDocumentSchema, type ChartDocument } from './document.ts'
import { specLimitsFor } from './spec-limits.ts'

const chart = (id: string, specKeys: object[], limits: object[] = []): ChartDocument =>
  chartDocumentSchema.parse({
    format: 'pullcord-chart',
    formatVersion: 1,
    id,
    title: id,
    library: { specKeys },
    nodes: limits.map((limit, index) => ({
      id: `n${index}`,
      kind: 'reading',
      quantity: 'length',
      unit: 'mm',
      limits: limit,
      outcomes: [],
    })),
    edges: [],
  })
const key = (id: string, general: object[]): object => ({ id, title: id, quantity: 'length', unit: 'mm', general })
const saw = { class: 'chain-saw', engine: 'two-stroke' } as const
const plugGap = 'plugGap' as SpecKeyId

test("the model's own value comes before any general one", () => {
  const charts = [chart('a', [key('plugGap', [{ min: 0.5, max: 0.8 }])])]
  expect(specLimitsFor(charts, saw, { [plugGap]: { min: 0.5, max: 0.5, unit: 'mm' } })).toEqual({ plugGap: { min: 0.5, max: 0.5, unit: 'mm' } })
  expect(specLimitsFor(charts, saw, {})).toEqual({ plugGap: { min: 0.5, max: 0.8, unit: 'mm' } })
})

test('the first chart with a general value for the machine speaks for the key', () => {
  const charts = [chart('a', [key('plugGap', [{ engines: ['four-stroke'], max: 0.8 }])]), chart('b', [key('plugGap', [{ max: 0.6 }])]), chart('c', [key('plugGap', [{ max: 1 }])])]
  expect(specLimitsFor(charts, saw, null)).toEqual({ plugGap: { max: 0.6, unit: 'mm' } })
  expect(specLimitsFor(charts, { class: 'mower', engine: 'four-stroke' }, null)).toEqual({ plugGap: { max: 0.8, unit: 'mm' } })
})

test('a key without any value is left out, one that only a reading names is found on the sheet', () => {
  const charts = [chart('a', [key('leverHeight', [])], [{ spec: 'plugGap' }])]
  expect(specLimitsFor(charts, saw, null)).toEqual({})
  expect(specLimitsFor(charts, saw, { [plugGap]: { max: 0.6, unit: 'mm' } })).toEqual({ plugGap: { max: 0.6, unit: 'mm' } })
})

test('the full-speed limit of the hand-back run travels even where no chart asks for it, other keys of the sheet do not', () => {
  const sheet = { ['fullSpeed' as SpecKeyId]: { min: 12_500, unit: '1/min' as const }, ['other' as SpecKeyId]: { max: 1, unit: 'mm' as const } }
  expect(specLimitsFor([], saw, sheet)).toEqual({ fullSpeed: { min: 12_500, unit: '1/min' } })
})
