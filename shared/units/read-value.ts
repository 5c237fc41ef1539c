import { err, ok, type Result } from '#shared/lib/result.ts'
import { unitWords } from './format-value.ts'
import type { NumberFormat } from './number-format.ts'
import { units, type Quantity, type Unit } from './quantities.ts'
import { senselessBecause } from './sensible-range.ts'

/** Codes of the ways in which a typed value cannot be read; never renamed. */
export type TypedValueCode =
  | 'empty'
  | 'not-a-number'
  | 'several-numbers'
  | 'several-marks'
  | 'wrong-mark'
  | 'wrong-grouping'
  | 'other-unit'
  | 'out-of-range'

/** Why a typed value cannot be read, in words for the person who typed it: what is wrong and what to do. */
export interface TypedValueRefusal {
  readonly code: TypedValueCode
  readonly words: string
}

/** How to read what was typed: the shop's number format, and the unit and quantity that the field stands for. */
export interface ReadingRules extends NumberFormat {
  /** The unit chosen for the field; a number with this unit behind it is read, one with another is refused. */
  readonly unit?: Unit
  /** The quantity of the reading; a value that no instrument can show for it is refused. */
  readonly quantity?: Quantity
}

/** Any space that a keyboard or a paste can bring, the ideographic and the narrow no-break one included. */
const anySpace = /[\s\u00a0\u1680\u2000-\u200a\u202f\u205f\u3000]/gu
/** Full-width forms U+FF01 to U+FF5E stand 0xFEE0 above their plain ones. */
const fullWidth = /[\uff01-\uff5e]/gu
const minusSigns = /[\u2212\u2012\u2013]/gu
const apostrophes = /[\u2019\u02bc]/gu

/** Other ways in which people write a unit, lower case and without spaces or dots. */
const unitAliases: Readonly<Record<string, Unit>> = {
  rpm: '1/min',
  'r/min': '1/min',
  'rev/min': '1/min',
  'min-1': '1/min',
  '"': 'in',
  inch: 'in',
  inches: 'in',
  lbs: 'lb',
  sec: 's',
  floz: 'US fl oz',
  gal: 'US gal',
  '°c': 'degC',
  '°f': 'degF',
  c: 'degC',
  f: 'degF',
  nm: 'N m',
  'n·m': 'N m',
  'lbf-ft': 'ft-lbf',
  'ft-lb': 'ft-lbf',
  ftlb: 'ft-lbf',
  volt: 'V',
  volts: 'V',
  ohms: 'ohm',
  'ω': 'ohm',
}

/** A unit that someone wrote, in any usual spelling; `null` when it is none of ours. */
export function readUnit(text: string): Unit | null {
  const plain = text.replaceAll(anySpace, '').replaceAll('.', '').toLowerCase()
  const named = units.find((unit) => unit.replaceAll(' ', '').toLowerCase() === plain || unitWords[unit].replaceAll(' ', '').toLowerCase() === plain)
  if (plain === '') return null
  return named ?? (Object.hasOwn(unitAliases, plain) ? (unitAliases[plain] ?? null) : null)
}

function refuse(code: TypedValueCode, words: string): { readonly ok: false; readonly error: TypedValueRefusal } {
  return err({ code, words })
}

/** Full-width signs, odd minus signs, odd spaces and odd apostrophes made plain; nothing else changes, so a small 2 or a half stays unreadable. */
function plainText(text: string): string {
  return text
    .replaceAll(fullWidth, (sign) => String.fromCodePoint((sign.codePointAt(0) ?? 0xfee0) - 0xfee0))
    .replaceAll(minusSigns, '-')
    .replaceAll(apostrophes, "'")
    .replaceAll(anySpace, ' ')
    .trim()
}

/** The number in front and the unit behind it, if any; `1/min` begins with a digit and so is looked for first. */
function splitUnit(text: string): { number: string; unitText: string } {
  const perMinute = /^(.*\S)\s+(1\/min)$/i.exec(text)
  if (perMinute !== null) return { number: perMinute[1] ?? '', unitText: perMinute[2] ?? '' }
  const [, number = '', unitText = ''] = /^([+-]?[\d.,' ]*)(.*)$/s.exec(text) ?? []
  return { number: number.trim(), unitText: unitText.trim() }
}

function example(format: NumberFormat): string {
  return `7${format.decimal}5`
}

/** Whole and fraction of an unsigned number, thousands joined; a refusal names the mark that stands wrong. */
function joinDigits(text: string, format: NumberFormat): Result<string, TypedValueRefusal> {
  const other = format.decimal === '.' ? ',' : '.'
  const [whole = '', fraction, ...rest] = text.split(format.decimal)
  if (rest.length > 0) return refuse('several-marks', `There is more than one decimal mark in it. Write it with one, for example ${example(format)}.`)
  if (fraction !== undefined && !/^\d+$/.test(fraction)) {
    if (/^\d*$/.test(fraction)) return refuse('not-a-number', `Digits are missing after the decimal mark. Write, for example, ${example(format)}.`)
    return refuse('wrong-grouping', `Behind the decimal mark only digits may stand. Write, for example, ${example(format)}.`)
  }
  if (/^\d*$/.test(whole) && (whole !== '' || fraction !== undefined)) return ok(`${whole === '' ? '0' : whole}.${fraction ?? '0'}`)
  const marks = new Set(whole.replaceAll(/\d/g, ''))
  if (marks.size > 1) return refuse('several-marks', 'There are different marks between its digits. Type the digits alone, with one decimal mark if it has a fraction.')
  if (/^[1-9]\d{0,2}([ .,']\d{3})+$/.test(whole)) return ok(`${whole.replaceAll(/\D/g, '')}.${fraction ?? '0'}`)
  if (marks.has(' ')) return refuse('several-numbers', 'That looks like more than one number. Type one value; a repeat is taken as its own try.')
  if (marks.has(other)) return refuse('wrong-mark', `This shop writes a fraction with ${format.decimal === '.' ? 'a point' : 'a comma'}: ${example(format)}. Type it so, or type the digits alone.`)
  return refuse('wrong-grouping', 'The marks between its digits do not part thousands. Type the digits alone.')
}

/** What is said when a unit stands behind the number that is not the one of the field; `null` when it is. */
function unitRefusal(unitText: string, { unit }: ReadingRules): TypedValueRefusal | null {
  if (unitText === '') return null
  const named = readUnit(unitText)
  if (named === null) return { code: 'not-a-number', words: 'This cannot be read as a number. Type the value alone, in digits.' }
  if (named === unit) return null
  const typed = unitWords[named] === '' ? named : unitWords[named]
  if (unit === undefined) return { code: 'other-unit', words: `Type the value alone, without ${typed}.` }
  const wanted = unitWords[unit] === '' ? 'a plain number' : unitWords[unit]
  return { code: 'other-unit', words: `This field takes ${wanted}, and you typed ${typed}. Choose ${typed} as its unit if it is offered, or type the value in ${wanted}.` }
}

/** What is said of a value that its quantity cannot have; `null` when it can. */
function rangeRefusal(value: number, { unit, quantity }: ReadingRules): TypedValueRefusal | null {
  if (!Number.isFinite(value)) return { code: 'out-of-range', words: 'That number is too large to be a reading. Look at its digits and type it again.' }
  if (quantity === undefined || unit === undefined) return null
  switch (senselessBecause(value, quantity, unit)) {
    case null:
      return null
    case 'below-sense':
      return { code: 'out-of-range', words: 'That is less than the instrument can show. Look at the sign and type it again.' }
    case 'above-sense':
      return { code: 'out-of-range', words: 'That is more than the instrument can show. Look at the decimal mark and type it again.' }
    case 'not-whole':
      return { code: 'out-of-range', words: 'A count is a whole number. Type it without a fraction.' }
    case 'unit-mismatch':
      return { code: 'other-unit', words: 'This unit does not belong to the reading. Choose one of the units that are offered.' }
  }
}

/**
 * Reads a value as fingers typed it, by the shop's number format: with a decimal point "1,275" is 1275 and "1.275" is one and a bit, with a
 * decimal comma the other way round; so the value is shown back before it counts. Thousands may be parted by any space, an apostrophe or
 * the mark that is not the decimal one, always in groups of three. Full-width digits and signs are read; a leading plus or minus is read. The
 * unit of the field may stand behind the number. Everything else is refused in words; nothing unreadable ever becomes a number.
 */
export function readTypedValue(text: string, rules: ReadingRules): Result<number, TypedValueRefusal> {
  const plain = plainText(text)
  if (plain === '') return refuse('empty', 'No value yet. Type what the instrument shows, or choose "No answer".')
  const { number, unitText } = splitUnit(plain)
  const sign = /^[+-]/.exec(number)?.[0] ?? ''
  const unsigned = number.slice(sign.length).trim()
  if (!/\d/.test(unsigned)) return refuse('not-a-number', 'This cannot be read as a number. Type the value in digits.')
  const wrongUnit = unitRefusal(unitText, rules)
  if (wrongUnit !== null) return err(wrongUnit)
  const digits = joinDigits(unsigned, rules)
  if (!digits.ok) return digits
  const size = Number(digits.value)
  const value = sign === '-' && size !== 0 ? -size : size
  const outOfRange = rangeRefusal(value, rules)
  return outOfRange === null ? ok(value) : err(outOfRange)
}
