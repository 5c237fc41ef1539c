import fc from 'fast-check'
import { expect, test } from 'vitest'
import { canConvert, compareAmounts, convertValue } from './convert.ts'
import { units, unitsOfQuantity } from './quantities.ts'

test('all units of a quantity convert into each other', () => {
  for (const list of Object.values(unitsOfQuantity)) for (const from of list) for (const to of list) expect(canConvert(from, to)).toBe(true)
})

test('units of different quantities do not convert, and nothing is compared', () => {
  expect(convertValue(1, 'mm', 'psi')).toBeNull()
  expect(compareAmounts(1, 'mm', 1, 'psi')).toBeNull()
  expect(compareAmounts(Number.NaN, 'mm', 1, 'mm')).toBeNull()
  expect(convertValue(Number.POSITIVE_INFINITY, 'mm', 'in')).toBeNull()
})

test('amounts are compared as decimals, without the noise of binary fractions', () => {
  expect(compareAmounts(0.1, 'in', 2.54, 'mm')).toBe(0)
  expect(compareAmounts(0.07, 'in', 1.778, 'mm')).toBe(0)
  expect(compareAmounts(0.35, 'bar', 35, 'kPa')).toBe(0)
  expect(compareAmounts(128, 'US fl oz', 1, 'US gal')).toBe(0)
  expect(compareAmounts(98.6, 'degF', 37, 'degC')).toBe(0)
  expect(compareAmounts(-40, 'degF', -40, 'degC')).toBe(0)
  expect(compareAmounts(0.0232, 'in', 0.584, 'mm')).toBe(1)
  expect(compareAmounts(1e-7, 'l', 1e-4, 'ml')).toBe(0)
})

test('there and back is the same number, and order is kept', () => {
  const numbers = fc.double({ noNaN: true, noDefaultInfinity: true, min: -1e9, max: 1e9 })
  const pairs = fc.constantFrom(...units.flatMap((from) => units.filter((to) => canConvert(from, to)).map((to) => [from, to] as const)))
  fc.assert(
    fc.property(numbers, numbers, pairs, (a, b, [from, to]) => {
      const there = convertValue(a, from, to)
      const back = there === null ? null : convertValue(there, to, from)
      expect(back).not.toBeNull()
      expect(Math.abs((back ?? Number.NaN) - a)).toBeLessThanOrEqual(1e-12 * Math.max(1, Math.abs(a)) * 20)
      expect(compareAmounts(a, from, b, from)).toBe(a < b ? -1 : a > b ? 1 : 0)
    }),
  )
})
