import { describe, expect, test } from 'vitest'
import { reading, soundSketch, type ChartSketch } from '#tests/support/chart-builder.ts'
import { remarksOf, saysOf, vary } from '#tests/support/lint.ts'

const speedKey = { id: 'fullSpeed', title: 'Full speed', quantity: 'rotational-speed', unit: '1/min' }

/** The sound chart with a reading in place of its check. */
function withReading(more: Record<string, unknown>, rest: Partial<ChartSketch> = {}): ChartSketch {
  return vary(soundSketch, { nodes: [reading('n2', more)], drop: ['n2.good > ask', 'n2.bad > p2'], edges: ['n2.in > ask', 'n2.low > p2'], more: rest })
}

describe('bands', () => {
  test('cover every value once', () => {
    expect(saysOf(withReading({}))).toEqual([])
    expect(
      saysOf(
        withReading({
          bands: [
            { outcome: 'low', to: 'min' },
            { outcome: 'in', from: 'min' },
          ],
        }),
      ),
    ).toEqual(['bands-gap n2'])
    expect(
      saysOf(
        withReading({
          bands: [
            { outcome: 'low', to: 'min', toIncluded: true },
            { outcome: 'in', from: 'min', fromIncluded: true },
          ],
        }),
      ),
    ).toEqual(['bands-overlap n2'])
  })
  test('a remark names the values and the outcomes that claim them', () => {
    const [remark] = remarksOf(
      withReading({
        bands: [
          { outcome: 'low', to: 'min' },
          { outcome: 'in', from: 10_000, fromIncluded: true },
        ],
      }),
    )
    expect(remark?.message).toContain('A value from 10000 to the lower limit belongs to several outcomes of "Measure n2": "Low" and "In limits"')
  })
  test('a reading may have outcomes without a band, and no band at all', () => {
    expect(saysOf(withReading({ bands: [] }))).toEqual([])
  })
  test('bands that hang on unknown limits are worth a look', () => {
    expect(
      saysOf(
        withReading(
          {
            limits: { spec: 'fullSpeed' },
            bands: [
              { outcome: 'low', to: 'min' },
              { outcome: 'in', from: 9000 },
            ],
          },
          { specKeys: [speedKey] },
        ),
      ),
    ).toEqual(['bands-undecided n2'])
    expect(saysOf(withReading({ limits: undefined }))).toEqual(['bands-undecided n2'])
  })
})

describe('units', () => {
  test('a unit fits its quantity', () => {
    expect(saysOf(withReading({ unit: 'psi' }))).toEqual(['unit-mismatch n2'])
    expect(saysOf(withReading({ quantity: 'pressure', unit: 'psi' }))).toEqual([])
  })
  test('the spec key that gives the limits is of the same quantity; its unit may be another', () => {
    const byKey = (key: Record<string, unknown>) =>
      withReading({ quantity: 'pressure', unit: 'psi', limits: { spec: 'k' } }, { specKeys: [{ id: 'k', title: 'Key', ...key }] })
    expect(saysOf(byKey({ quantity: 'pressure', unit: 'kPa' }))).toEqual([])
    expect(saysOf(byKey({ quantity: 'length', unit: 'mm' }))).toEqual(['unit-mismatch n2'])
    expect(saysOf(byKey({ quantity: 'pressure', unit: 'mm' }))).toEqual(['unit-mismatch'])
  })
  test('figures as printed are in units of the quantity', () => {
    const printed = (unit: string) =>
      withReading({
        quantity: 'length',
        unit: 'mm',
        limits: {
          as: [
            { min: 0.01, unit: 'in' },
            { min: 0.254, unit },
          ],
        },
      })
    expect(saysOf(printed('mm'))).toEqual([])
    expect(saysOf(printed('g'))).toEqual(['unit-mismatch n2'])
  })
  test('a lower limit lies below the upper one', () => {
    expect(saysOf(withReading({ limits: { min: 9, max: 7 } }))).toEqual(['limits-inverted n2'])
    expect(saysOf({ ...soundSketch, specKeys: [{ ...speedKey, general: [{ min: 2, max: 1 }] }] })).toEqual(['limits-inverted'])
  })
})
