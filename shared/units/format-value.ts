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

/** Rounds to a number of decimals, half away from zero, as decimal digits see it (1.005 to two decimals is 1.01). */
export function roundTo(value: number, fractionDigits: number): number {
  if (!Number.isFinite(value)) return value
  const [mantissa = '0', exponent = '0'] = Math.abs(value).toString().split('e')
  const shifted = Math.round(Number(`${mantissa}e${Number(exponent) + fractionDigits}`))
  const [digits = '0', power = '0'] = shifted.toString().split('e')
  return Math.sign(value) * Number(`${digits}e${Number(power) - fractionDigits}`)
}

/** A number with its unit as the bench reads it, never broken across lines: "9 850 rpm", "0.584 mm", "24" for a count. */
export function formatValue(value: number, unit: Unit, format: NumberFormat, fractionDigits?: number): string {
  const words = unitWords[unit].replaceAll(' ', noBreakSpace)
  const number = formatNumber(value, format, fractionDigits)
  return words === '' ? number : `${number}${noBreakSpace}${words}`
}
