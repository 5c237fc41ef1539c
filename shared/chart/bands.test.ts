import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import type { OutcomeId } from '#shared/lib/ids.ts'
import { bandFaults } from './bands.ts'
import type { Band } from './document.ts'

const band = (outcome: string, ends: Omit<Band, 'outcome'>): Band => ({ outcome: outcome as OutcomeId, ...ends })
const said = (...faults: Parameters<typeof bandFaults>) => bandFaults(...faults)?.map((fault) => `${fault.kind} ${fault.where}`)

const low = band('low', { to: 'min' })
const inside = band('in', { from: 'min', fromIncluded: true, to: 'max', toIncluded: true })
const high = band('high', { from: 'max' })
const spec = { spec: 'fullSpeed' as never }

describe('bands between limits that a spec sheet knows', () => {
  test('low, in and high cover every value once', () => {
    expect(said([low, inside, high], spec, true)).toEqual([])
  })
  test('a lower band and one that is open upwards do so too', () => {
    expect(said([low, band('in', { from: 'min', fromIncluded: true })], spec, true)).toEqual([])
  })
  test('the very limit belongs to one of its neighbours', () => {
    expect(said([low, band('in', { from: 'min' })], spec, true)).toEqual(['gap at the lower limit'])
    expect(said([band('low', { to: 'min', toIncluded: true }), band('in', { from: 'min', fromIncluded: true })], spec, true)).toEqual([
      'overlap at the lower limit',
    ])
  })
  test('what nobody covers is named', () => {
    expect(said([inside], spec, true)).toEqual(['gap below the lower limit', 'gap above the upper limit'])
    expect(said([low, high], spec, true)).toEqual(['gap from the lower limit to the upper limit'])
  })
  test('a band that ends before it begins covers nothing', () => {
    expect(said([low, band('in', { from: 'max', to: 'min' }), high], spec, true)).toEqual(['gap from the lower limit to the upper limit'])
  })
  test('numbers among such limits cannot be judged', () => {
    expect(bandFaults([low, band('in', { from: 100 })], spec, true)).toBeUndefined()
    expect(bandFaults([low, inside, high], undefined, true)).toBeUndefined()
  })
})

describe('bands between numbers', () => {
  const limits = { min: 7, max: 9 }
  test('limits given as numbers stand on one line with numbers in the bands', () => {
    expect(said([band('low', { to: 7 }), inside, high], limits, true)).toEqual([])
    expect(said([band('low', { to: 6 }), inside, high], limits, true)).toEqual(['gap from 6 to the lower limit'])
  })
  test('a limit that the reading does not have lies at infinity', () => {
    expect(said([band('in', { from: 'min', to: 'max', toIncluded: true }), high], { max: 9 }, true)).toEqual([])
  })
  test('nothing lies below zero where nothing can', () => {
    const fromZero = [band('in', { from: 0, fromIncluded: true, to: 9, toIncluded: true }), band('high', { from: 9 })]
    expect(said(fromZero, undefined, true)).toEqual([])
    expect(said(fromZero, undefined, false)).toEqual(['gap below 0'])
  })
  test('figures printed in two units are limits like any other', () => {
    const printed = {
      as: [
        { max: 0.0232, unit: 'in' as const },
        { max: 0.584, unit: 'mm' as const },
      ],
    }
    expect(said([band('in', { to: 'max', toIncluded: true }), high], printed, true)).toEqual([])
    expect(said([band('in', { from: 'min', fromIncluded: true, to: 'max', toIncluded: true }), high], printed, true)).toEqual([])
  })
  test('a reading without bands is judged by hand', () => {
    expect(bandFaults([], limits, true)).toEqual([])
  })
})

describe('by trying values', () => {
  const end = fc.option(fc.integer({ min: 1, max: 5 }), { nil: undefined })
  const bands = fc.array(
    fc
      .record({ from: end, to: end, fromIncluded: fc.boolean(), toIncluded: fc.boolean() })
      .map(({ from, to, fromIncluded, toIncluded }) =>
        band('x', { fromIncluded, toIncluded, ...(from === undefined ? {} : { from }), ...(to === undefined ? {} : { to }) }),
      ),
    { minLength: 1, maxLength: 4 },
  )
  /** Every whole number that an end can be, and a value on each side of it. */
  const values = Array.from({ length: 13 }, (_, index) => index / 2)
  const holds = ({ from, to, fromIncluded, toIncluded }: Band, value: number) =>
    (from === undefined || value > Number(from) || (value === from && fromIncluded === true)) &&
    (to === undefined || value < Number(to) || (value === to && toIncluded === true))

  test('there is a gap exactly where some value has no band, and an overlap where one has several', () => {
    fc.assert(
      fc.property(bands, (list) => {
        const faults = bandFaults(list, undefined, false) ?? []
        const counts = values.map((value) => list.filter((entry) => holds(entry, value)).length)
        expect(faults.some((fault) => fault.kind === 'gap')).toBe(counts.some((count) => count === 0))
        expect(faults.some((fault) => fault.kind === 'overlap')).toBe(counts.some((count) => count > 1))
      }),
      { numRuns: 500 },
    )
  })
})
