import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import type { SpecKeyId } from '#shared/lib/ids.ts'
import { defaultNumberFormat } from '#shared/units/number-format.ts'
import { nodeSchema, specKeySchema, type ReadingNode } from './document.ts'
import { judgeReading, limitsOf, limitWords } from './judge.ts'

const speed = (changes: object = {}): ReadingNode => {
  const node = nodeSchema.parse({
    id: 'n2',
    kind: 'reading',
    title: 'Full speed, no load',
    quantity: 'rotational-speed',
    unit: '1/min',
    limits: { spec: 'fullSpeed' },
    outcomes: [
      { id: 'low', title: 'Low' },
      { id: 'in', title: 'In limits', normal: true },
      { id: 'high', title: 'Over' },
      { id: 'hunts', title: 'Never settles' },
    ],
    bands: [
      { outcome: 'low', to: 'min', toIncluded: false },
      { outcome: 'in', from: 'min', fromIncluded: true, to: 'max', toIncluded: true },
      { outcome: 'high', from: 'max' },
    ],
    ...changes,
  })
  if (node.kind !== 'reading') throw new Error('A reading was asked for.')
  return node
}
const sheet = { min: 11_000, max: 13_500, unit: '1/min' } as const

describe('a value is judged by the band that holds it', () => {
  test.each([
    [9850, 'low'],
    [10_999.999, 'low'],
    [11_000, 'in'],
    [13_500, 'in'],
    [13_501, 'high'],
    [-5, 'low'],
  ])('%d is %s', (value, outcome) => {
    expect(judgeReading(speed(), sheet, value, '1/min')).toBe(outcome)
  })

  test('an outcome without a band is never judged, only picked', () => {
    fc.assert(fc.property(fc.double({ noNaN: true }), (value) => judgeReading(speed(), sheet, value, '1/min') !== 'hunts'))
  })

  test('every finite value gets exactly one outcome where the bands cover the line', () => {
    fc.assert(fc.property(fc.double({ noNaN: true, noDefaultInfinity: true }), (value) => judgeReading(speed(), sheet, value, '1/min') !== null))
  })

  test('a limit that is missing on one side is open', () => {
    expect(judgeReading(speed(), { min: 11_000, unit: '1/min' }, 99_999, '1/min')).toBe('in')
    expect(judgeReading(speed(), { max: 13_500, unit: '1/min' }, 0, '1/min')).toBe('in')
  })

  test('bands with figures of their own are judged in any unit of the quantity, without limits', () => {
    const gap = speed({
      quantity: 'length',
      unit: 'in',
      limits: undefined,
      bands: [
        { outcome: 'low', to: 0.5 },
        { outcome: 'in', from: 0.5, fromIncluded: true },
      ],
    })
    expect(judgeReading(gap, null, 12.7, 'mm')).toBe('in')
    expect(judgeReading(gap, null, 12.69, 'mm')).toBe('low')
  })
})

describe('the person picks, and nothing passes by itself,', () => {
  test('where no limits are known', () => {
    expect(judgeReading(speed(), null, 12_000, '1/min')).toBeNull()
    expect(judgeReading(speed(), { unit: '1/min' }, 12_000, '1/min')).toBeNull()
  })

  test('where the figure was not printed in the typed unit', () => {
    const screen = speed({ quantity: 'length', unit: 'in' })
    const limits = { as: [{ max: 0.0232, unit: 'in' as const }] }
    expect(judgeReading(screen, limits, 0.5, 'mm')).toBeNull()
    expect(judgeReading(screen, limits, 0.02, 'in')).toBe('in')
  })

  test('where the value is no number or the unit is not one of the quantity', () => {
    expect(judgeReading(speed(), sheet, Number.NaN, '1/min')).toBeNull()
    expect(judgeReading(speed(), sheet, Number.POSITIVE_INFINITY, '1/min')).toBeNull()
    expect(judgeReading(speed(), sheet, 12_000, 'psi')).toBeNull()
  })

  test('where the limits are in a unit that does not fit the reading', () => {
    expect(judgeReading(speed(), { min: 7, unit: 'psi' }, 12_000, '1/min')).toBeNull()
  })

  test('where no band or more than one holds the value', () => {
    const gap = speed({ bands: [{ outcome: 'low', to: 'min' }, { outcome: 'in', from: 'min' }] })
    const overlap = speed({ bands: [{ outcome: 'low', to: 'max' }, { outcome: 'in', from: 'min' }] })
    expect(judgeReading(gap, sheet, 11_000, '1/min')).toBeNull()
    expect(judgeReading(overlap, sheet, 12_000, '1/min')).toBeNull()
    expect(judgeReading(speed({ bands: undefined }), sheet, 12_000, '1/min')).toBeNull()
  })
})

describe('limits of a reading', () => {
  const key = specKeySchema.parse({
    id: 'fullSpeed',
    title: 'Full speed',
    quantity: 'rotational-speed',
    unit: '1/min',
    general: [{ min: 7000 }, { engines: ['two-stroke'], min: 11_000, max: 13_500 }, { classes: ['leaf-blower'], engines: ['two-stroke'], min: 6800 }],
  })
  const id = 'fullSpeed' as SpecKeyId

  test('are those of the spec sheet before any general ones', () => {
    expect(limitsOf(speed(), { [id]: { min: 12_500, unit: '1/min' } }, [key])).toEqual({ min: 12_500, unit: '1/min' })
  })

  test('are the general ones that fit the machine most closely', () => {
    expect(limitsOf(speed(), {}, [key], { class: 'chain-saw', engine: 'two-stroke' })).toEqual({ min: 11_000, max: 13_500, unit: '1/min' })
    expect(limitsOf(speed(), {}, [key], { class: 'leaf-blower', engine: 'two-stroke' })).toEqual({ min: 6800, unit: '1/min' })
    expect(limitsOf(speed(), {}, [key], { class: 'mower', engine: 'four-stroke' })).toEqual({ min: 7000, unit: '1/min' })
    expect(limitsOf(speed(), {}, [key])).toEqual({ min: 7000, unit: '1/min' })
  })

  test('are unknown where nobody wrote them', () => {
    expect(limitsOf(speed(), {}, [])).toBeNull()
    expect(limitsOf(speed({ limits: undefined }), {}, [key])).toBeNull()
  })
})

describe('limits in words', () => {
  test.each([
    [{ min: 2700, max: 3100, unit: '1/min' as const }, '1/min' as const, '2 700 to 3 100 rpm'],
    [{ min: 7, unit: 'psi' as const }, 'psi' as const, 'at least 7 psi'],
    [{ min: 7, unit: 'psi' as const }, 'kPa' as const, 'at least 48.27 kPa'],
    [{ max: 30, unit: 'psi' as const }, 'bar' as const, 'at most 2.068 bar'],
    [{ min: 0.5, max: 0.5, unit: 'mm' as const }, 'mm' as const, '0.5 mm'],
    [{ as: [{ max: 0.0232, unit: 'in' as const }, { max: 0.584, unit: 'mm' as const }] }, 'in' as const, 'at most 0.0232 in'],
  ])('%j in %s', (limits, unit, words) => {
    expect(limitWords(limits, unit, defaultNumberFormat).replaceAll(/[\u00a0\u202f]/g, ' ')).toBe(words)
  })

  test('an end that is shown in another unit always passes', () => {
    const hold = speed({ quantity: 'pressure', unit: 'psi' })
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 100_000 }), (thousandths) => {
        const limits = { min: thousandths / 1000, unit: 'psi' } as const
        const shown = Number(limitWords(limits, 'kPa', { decimal: '.', group: 'none' }).replaceAll(/[^\d.]/g, ''))
        expect(judgeReading(hold, limits, shown, 'kPa')).toBe('in')
      }),
    )
  })
})
