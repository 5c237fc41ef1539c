import { expect, test } from 'vitest'
import { formatNumber, formatValue, roundTo } from './format-value.ts'
import { defaultNumberFormat, numberFormatSchema } from './number-format.ts'

test('a speed is grouped by a narrow space that does not break, and read in rpm', () => {
  expect(formatValue(9850, '1/min', defaultNumberFormat)).toBe('9\u202f850\u00a0rpm')
  expect(formatValue(12_400, '1/min', { decimal: ',', group: '.' })).toBe('12.400\u00a0rpm')
  expect(formatValue(2.56, 'US fl oz', defaultNumberFormat)).toBe('2.56\u00a0US\u00a0fl\u00a0oz')
  expect(formatValue(50, 'ratio', defaultNumberFormat)).toBe('50')
})

test('every digit is kept unless fewer are asked for', () => {
  expect(formatNumber(0.0232, defaultNumberFormat)).toBe('0.0232')
  expect(formatNumber(0.0000001, defaultNumberFormat)).toBe('0.0000001')
  expect(formatNumber(1.5e21, { decimal: '.', group: 'none' })).toBe('1500000000000000000000')
  expect(formatNumber(48.26330105, defaultNumberFormat, 2)).toBe('48.26')
  expect(formatNumber(-0.001, defaultNumberFormat, 2)).toBe('0')
  expect(formatNumber(Number.NaN, defaultNumberFormat)).toBe('–')
})

test('rounding sees decimals, not binary fractions', () => {
  expect(roundTo(1.005, 2)).toBe(1.01)
  expect(roundTo(-2.5, 0)).toBe(-3)
  expect(roundTo(48.263, 2, 'up')).toBe(48.27)
  expect(roundTo(12.7, 2, 'up')).toBe(12.7)
  expect(roundTo(-1.21, 1, 'down')).toBe(-1.3)
})

test('one sign cannot both part thousands and begin the fraction', () => {
  expect(numberFormatSchema.safeParse({ decimal: ',', group: ',' }).success).toBe(false)
})
