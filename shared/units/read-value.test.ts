import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import { formatNumber } from './format-value.ts'
import type { NumberFormat } from './number-format.ts'
import { readTypedValue, readUnit, type ReadingRules } from './read-value.ts'

const point: NumberFormat = { decimal: '.', group: 'space' }
const comma: NumberFormat = { decimal: ',', group: 'space' }
const rpm: ReadingRules = { ...point, unit: '1/min', quantity: 'rotational-speed' }
const psi: ReadingRules = { ...point, unit: 'psi', quantity: 'pressure' }

function read(text: string, rules: ReadingRules): number | string {
  const result = readTypedValue(text, rules)
  return result.ok ? result.value : result.error.code
}

describe('a typed value is read by the number format of the shop', () => {
  test.each([
    ['1,275', point, 1275],
    ['1.275', point, 1.275],
    ['1,275', comma, 1.275],
    ['1.275', comma, 1275],
    ['1,275.5', point, 1275.5],
    ['1.275,5', comma, 1275.5],
    ['1,275,000', point, 1_275_000],
    ["1'275", point, 1275],
    ['0.0232', point, 0.0232],
    ['0,584', comma, 0.584],
    ['.5', point, 0.5],
    ['007', point, 7],
    ['+7', point, 7],
    ['-7', point, -7],
    ['\u22127', point, -7],
    ['-0', point, 0],
  ])('%s', (text, format, value) => {
    expect(read(text, format)).toBe(value)
  })

  test.each([' ', '\u00a0', '\u2009', '\u202f', '\u3000'])('any space parts thousands: 2%s800', (space) => {
    expect(read(`2${space}800`, point)).toBe(2800)
    expect(read(`1${space}234${space}567${comma.decimal}5`, comma)).toBe(1_234_567.5)
  })

  test('full-width digits and signs are read', () => {
    expect(read('２８００', point)).toBe(2800)
    expect(read('－１，２７５．５', point)).toBe(-1275.5)
  })
})

describe('what cannot be read is never a value', () => {
  test.each([
    ['', 'empty'],
    ['   ', 'empty'],
    ['\u3000', 'empty'],
    ['low', 'not-a-number'],
    ['-', 'not-a-number'],
    ['.', 'not-a-number'],
    ['psi', 'not-a-number'],
    ['1e3', 'not-a-number'],
    ['0x10', 'not-a-number'],
    ['10²', 'not-a-number'],
    ['7½', 'not-a-number'],
    ['NaN', 'not-a-number'],
    ['Infinity', 'not-a-number'],
    ['2700-3100', 'not-a-number'],
    ['~7', 'not-a-number'],
    ['--7', 'not-a-number'],
    ['5.', 'not-a-number'],
    ['7<script>', 'not-a-number'],
    ['1.2.3', 'several-marks'],
    ['1.275.000', 'several-marks'],
    ['1,275 000', 'several-marks'],
    ['7 8', 'several-numbers'],
    ['28 00', 'several-numbers'],
    ['7,5', 'wrong-mark'],
    ['0,584', 'wrong-mark'],
    ['1,27,500', 'wrong-mark'],
    ['1.275 000', 'wrong-grouping'],
    ["1'5", 'wrong-grouping'],
  ])('%j is refused as %s', (text, code) => {
    expect(read(text, point)).toBe(code)
  })

  test('a number too large for any instrument is refused', () => {
    expect(read('9'.repeat(400), point)).toBe('out-of-range')
    expect(read('985000', rpm)).toBe('out-of-range')
    expect(read('-5', rpm)).toBe('out-of-range')
    expect(read('2.5', { ...point, unit: 'count', quantity: 'count' })).toBe('out-of-range')
  })

  test('every refusal says in words what to do', () => {
    for (const text of ['', 'low', '7,5', '1.2.3', '7 8', "1'5", '7 bar', '-9']) {
      const result = readTypedValue(text, { ...rpm, unit: '1/min' })
      expect(result.ok).toBe(false)
      if (!result.ok) expect(result.error.words).toMatch(/[Tt]ype|[Ww]rite|[Cc]hoose/)
    }
  })
})

describe('a unit behind the number', () => {
  test.each([
    ['7 psi', psi, 7],
    ['7psi', psi, 7],
    ['7 PSI', psi, 7],
    ['9850 rpm', rpm, 9850],
    ['9850 1/min', rpm, 9850],
    ['9 850 r/min', rpm, 9850],
    ['2,5 US fl oz', { ...comma, unit: 'US fl oz' }, 2.5],
  ] as const)('%s is read where it is the unit of the field', (text, rules, value) => {
    expect(read(text, rules)).toBe(value)
  })

  test('another unit is refused, and the words name both', () => {
    const result = readTypedValue('48 kPa', psi)
    expect(result.ok ? null : result.error).toMatchObject({ code: 'other-unit', words: expect.stringMatching(/psi.*kPa/) })
  })

  test('where the field has no unit, the number is wanted alone', () => {
    expect(read('7 psi', point)).toBe('other-unit')
  })

  test('no unit is found by the name of something that every object has', () => {
    expect(readUnit('constructor')).toBeNull()
    expect(readUnit('__proto__')).toBeNull()
  })
})

test('a number as the shop writes it is read back as the same number, in every format', () => {
  const formats = fc.constantFrom<NumberFormat>(point, comma, { decimal: '.', group: ',' }, { decimal: ',', group: '.' }, { decimal: '.', group: "'" }, { decimal: '.', group: 'none' })
  const numbers = fc.oneof(fc.integer({ min: -10_000_000, max: 10_000_000 }), fc.double({ noNaN: true, noDefaultInfinity: true, min: -1e15, max: 1e15 }))
  fc.assert(fc.property(numbers, formats, (value, format) => read(formatNumber(value, format), format) === (value === 0 ? 0 : value)))
})
