import { assertNever } from '#shared/lib/assert-never.ts'
import { narrowSpace, noBreakSpace, type NumberFormat } from './number-format.ts'
import type { Unit } from './quantities.ts'

/** What the bench reads for a unit; empty where the value stands alone (a ratio, a count). */
export const unitWords: Readonly<Record<Unit, string>> = {
  '1/min': 'rpm',
  mm: 'mm',
  in: 'in',
  kPa: 'kPa',
  bar: 'bar',
  psi: 'psi',
  inHg: 'inHg',
  s: 's',
  ml: 'ml',
  l: 'l',
  'US fl oz': 'US fl oz',
  'US gal': 'US gal',
  g: 'g',
  kg: 'kg',
  lb: 'lb',
  degC: '°C',
  degF: '°F',
  'N m': 'N m',
  'ft-lbf': 'ft-lbf',
  V: 'V',
  ohm: 'ohm',
  ratio: '',
  count: '',
}

function groupMark(format: NumberFormat): string {
  switch (format.group) {
    case 'space':
      return narrowSpace
    case 'none':
      return ''
    case '.':
    case ',':
    case "'":
      return format.group
    default:
      return assertNever(format.group)
  }
}

/** The shortest decimal of a number, never in powers of ten. */
function plainDecimal(value: number): string {
  const [mantissa = '0', exponentText] = value.toString().split('e')
  if (exponentText === undefined) return mantissa
  const exponent = Number(exponentText)
  const [whole = '0', fraction = ''] = mantissa.split('.')
  if (exponent >= 0) return whole + fraction.padEnd(exponent, '0')
  return `0.${'0'.repeat(-exponent - 1)}${whole}${fraction}`
}

/**
 * A number as the shop writes it, every digit kept: 9850 is "9 850" with a narrow no-break space, 0.0232 stays "0.0232". Fewer digits are
 * the caller's choice (`fractionDigits`, rounded half away from zero). What is not finite gives a dash.
 */
export function formatNumber(value: number, format: NumberFormat, fractionDigits?: number): string {
  if (!Number.isFinite(value)) return '–'
  const digits = plainDecimal(Math.abs(fractionDigits === undefined ? value : roundTo(value, fractionDigits)))
  const [whole = '0', fraction] = digits.split('.')
  const grouped = whole.replace(/\B(?=(\d{3})+(?!\d))/g, groupMark(format))
  const sign = value < 0 && /[1-9]/.test(digits) ? '\u2212' : ''
  return sign + grouped + (fraction === undefined ? '' : format.decimal + fraction)
}

/**
 * Rounds to a number of decimals as decimal digits see it: half away from zero (1.005 to two decimals is 1.01), or always up, or always down,
 * which moves a value that already has so few decimals not at all.
 */
export function roundTo(value: number, fractionDigits: number, direction: 'nearest' | 'up' | 'down' = 'nearest'): number {
  if (!Number.isFinite(value)) return value
  const shifted = shiftPoint(value, fractionDigits)
  const rounded =
    direction === 'up' ? Math.ceil(shifted) : direction === 'down' ? Math.floor(shifted) : Math.sign(shifted) * Math.round(Math.abs(shifted))
  return shiftPoint(rounded, -fractionDigits)
}

/** Moves the decimal point without arithmetic on binary fractions. */
function shiftPoint(value: number, places: number): number {
  const [digits = '0', exponent = '0'] = value.toString().split('e')
  return Number(`${digits}e${Number(exponent) + places}`)
}

/** A number with its unit as the bench reads it, never broken across lines: "9 850 rpm", "0.584 mm", "24" for a count. */
export function formatValue(value: number, unit: Unit, format: NumberFormat, fractionDigits?: number): string {
  const words = unitWords[unit].replaceAll(' ', noBreakSpace)
  const number = formatNumber(value, format, fractionDigits)
  return words === '' ? number : `${number}${noBreakSpace}${words}`
}
