import { add, compare, decimal, divide, multiply, subtract, toExact, toNumber, type Exact } from './exact.ts'
import type { Unit } from './quantities.ts'

/** What a unit measures: units of one dimension convert into each other. Pressure and vacuum share theirs. */
type Dimension = 'rotation' | 'length' | 'pressure' | 'time' | 'volume' | 'mass' | 'temperature' | 'torque' | 'voltage' | 'resistance' | 'ratio' | 'count'

/** One unit in terms of its dimension's base: base = value x factor + offset. */
interface UnitFact {
  readonly dimension: Dimension
  readonly factor: Exact
  readonly offset?: Exact
}

const one = decimal('1')
const inchInMm = decimal('25.4')
const poundInG = decimal('453.59237')
/** 1 lbf = 0.45359237 kg x 9.80665 m/s2, exactly. */
const poundForceInN = multiply(decimal('0.45359237'), decimal('9.80665'))
const squareInchInSquareMm = multiply(inchInMm, inchInMm)
/** 1 US gal = 231 in3, exactly. */
const gallonInMl = divide(multiply(decimal('231'), multiply(inchInMm, squareInchInSquareMm)), decimal('1000'))

/**
 * Factors of NIST Special Publication 811 (2008), appendix B.8. Those that it prints in bold are exact; psi, US gal, US fl oz and ft-lbf
 * are built here from their exact definitions, so that 128 US fl oz are 1 US gal, and agree with every digit that it prints
 * (psi 6.894 757 E+03 Pa, gal 3.785 412 E-03 m3, fl oz 2.957 353 E-05 m3, ft-lbf 1.355 818 N m). The inch of mercury is the conventional one,
 * 3.386 389 E+03 Pa as printed. Bases: 1/min, mm, kPa, s, ml, g, degC, N m, V, ohm.
 */
const facts: Readonly<Record<Unit, UnitFact>> = {
  '1/min': { dimension: 'rotation', factor: one },
  mm: { dimension: 'length', factor: one },
  in: { dimension: 'length', factor: inchInMm },
  kPa: { dimension: 'pressure', factor: one },
  bar: { dimension: 'pressure', factor: decimal('100') },
  // N/mm2 = 1000 kPa
  psi: { dimension: 'pressure', factor: multiply(divide(poundForceInN, squareInchInSquareMm), decimal('1000')) },
  inHg: { dimension: 'pressure', factor: decimal('3.386389') },
  s: { dimension: 'time', factor: one },
  ml: { dimension: 'volume', factor: one },
  l: { dimension: 'volume', factor: decimal('1000') },
  'US fl oz': { dimension: 'volume', factor: divide(gallonInMl, decimal('128')) },
  'US gal': { dimension: 'volume', factor: gallonInMl },
  g: { dimension: 'mass', factor: one },
  kg: { dimension: 'mass', factor: decimal('1000') },
  lb: { dimension: 'mass', factor: poundInG },
  degC: { dimension: 'temperature', factor: one },
  // degC = (degF - 32) / 1.8
  degF: { dimension: 'temperature', factor: divide(one, decimal('1.8')), offset: divide(decimal('-32'), decimal('1.8')) },
  'N m': { dimension: 'torque', factor: one },
  'ft-lbf': { dimension: 'torque', factor: divide(multiply(poundForceInN, multiply(decimal('12'), inchInMm)), decimal('1000')) },
  V: { dimension: 'voltage', factor: one },
  ohm: { dimension: 'resistance', factor: one },
  ratio: { dimension: 'ratio', factor: one },
  count: { dimension: 'count', factor: one },
}

const zero = decimal('0')

/** Whether values of the two units can be converted into each other. */
export function canConvert(from: Unit, to: Unit): boolean {
  return facts[from].dimension === facts[to].dimension
}

function toBase(value: Exact, unit: Unit): Exact {
  const { factor, offset = zero } = facts[unit]
  return add(multiply(value, factor), offset)
}

/**
 * A value in another unit of the same dimension, computed without rounding and given as the nearest number; `null` when the units do
 * not fit each other or the value is not finite. Temperatures are points of a scale, not differences.
 */
export function convertValue(value: number, from: Unit, to: Unit): number | null {
  const exact = toExact(value)
  if (exact === null || !canConvert(from, to)) return null
  if (from === to) return value
  const { factor, offset = zero } = facts[to]
  return toNumber(divide(subtract(toBase(exact, from), offset), factor))
}

/**
 * Negative, zero or positive, as the first amount lies below, on or above the second; both are taken as the decimals that were typed or
 * printed and compared without rounding (0.5 in is 12.7 mm, 0.0232 in is more than 0.584 mm). `null` when the units do not fit each
 * other or a value is not finite.
 */
export function compareAmounts(value: number, unit: Unit, other: number, otherUnit: Unit): -1 | 0 | 1 | null {
  const left = toExact(value)
  const right = toExact(other)
  if (left === null || right === null || !canConvert(unit, otherUnit)) return null
  return compare(toBase(left, unit), toBase(right, otherUnit))
}
