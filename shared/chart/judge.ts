import type { OutcomeId } from '#shared/lib/ids.ts'
import { compareAmounts, convertValue } from '#shared/units/convert.ts'
import { formatNumber, formatValue, roundTo } from '#shared/units/format-value.ts'
import type { SpecLimit, SpecLimits } from '#shared/units/limits.ts'
import type { NumberFormat } from '#shared/units/number-format.ts'
import { unitsOfQuantity, type Quantity, type Unit } from '#shared/units/quantities.ts'
import type { Band, ReadingNode, SpecKey } from './document.ts'
import { generalLimit, type MachineKind } from './spec-limits.ts'

/** A range in one unit; a missing end is open. */
interface Range {
  readonly min?: number | undefined
  readonly max?: number | undefined
  readonly unit: Unit
}

/** Whether readings of a quantity may be given in a unit. */
export function isUnitOf(quantity: Quantity, unit: Unit): boolean {
  return (unitsOfQuantity[quantity] as readonly Unit[]).includes(unit)
}

/**
 * The limits of a reading: those written on the node, or the machine's own for its spec key, or the key's general ones that fit the machine.
 * `null` when nobody knows them: then the person picks the outcome. Without a machine only general values that hold for every machine count.
 */
export function limitsOf(
  node: ReadingNode,
  specLimits: SpecLimits,
  specKeys: readonly SpecKey[],
  machine?: MachineKind,
): SpecLimit | null {
  const { limits } = node
  if (limits === undefined) return null
  if ('as' in limits) return { as: limits.as }
  if (!('spec' in limits)) return { ...limits, unit: node.unit }
  const { spec } = limits
  if (Object.hasOwn(specLimits, spec)) return specLimits[spec] ?? null
  const key = specKeys.find(({ id }) => id === spec)
  return key === undefined ? null : generalLimit(key, machine)
}

/** The one range that speaks for a typed unit: as printed for that unit, never converted; else the only range there is. */
function rangeFor(limits: SpecLimit | null, unit: Unit): Range | null {
  if (limits === null) return null
  const range = 'as' in limits ? limits.as.find((printed) => printed.unit === unit) : limits
  return range === undefined || (range.min === undefined && range.max === undefined) ? null : range
}

/** Where a value lies against one end of a band; `unknown` when the end is a limit that nobody knows. */
function comparedWith(
  end: number | 'min' | 'max',
  value: number,
  unit: Unit,
  nodeUnit: Unit,
  range: Range | null,
): -1 | 0 | 1 | 'unknown' {
  if (typeof end === 'number') return compareAmounts(value, unit, end, nodeUnit) ?? 'unknown'
  if (range === null) return 'unknown'
  const limit = range[end]
  if (limit === undefined) return end === 'min' ? 1 : -1
  return compareAmounts(value, unit, limit, range.unit) ?? 'unknown'
}

/** Whether a value lies in a band; `unknown` as soon as one of its ends is. */
function isInBand(band: Band, value: number, unit: Unit, nodeUnit: Unit, range: Range | null): boolean | 'unknown' {
  const low = band.from === undefined ? 1 : comparedWith(band.from, value, unit, nodeUnit, range)
  const high = band.to === undefined ? -1 : comparedWith(band.to, value, unit, nodeUnit, range)
  if (low === 'unknown' || high === 'unknown') return 'unknown'
  return (low > 0 || (low === 0 && band.fromIncluded === true)) && (high < 0 || (high === 0 && band.toIncluded === true))
}

/**
 * The outcome whose band holds a value, or `null` when the person must pick: no limits known for a band that needs them, a unit in which the
 * figure was not printed, no band or more than one that fits, a value that is no number. Nothing passes by itself.
 * Values are compared as the decimals that were typed and printed, exact between units of one quantity; a value on an end belongs to the
 * band whose end is included. A limit that is missing on one side is open: nothing lies below a missing `min`.
 */
export function judgeReading(node: ReadingNode, limits: SpecLimit | null, value: number, unit: Unit): OutcomeId | null {
  if (!Number.isFinite(value) || !isUnitOf(node.quantity, unit)) return null
  const range = rangeFor(limits, unit)
  const verdicts = (node.bands ?? []).map((band) => ({ outcome: band.outcome, holds: isInBand(band, value, unit, node.unit, range) }))
  if (verdicts.some(({ holds }) => holds === 'unknown')) return null
  const fitting = new Set(verdicts.filter(({ holds }) => holds === true).map(({ outcome }) => outcome))
  const [outcome] = fitting
  return fitting.size === 1 && outcome !== undefined && node.outcomes.some(({ id }) => id === outcome) ? outcome : null
}

/** Decimals that keep at least four significant digits of a converted limit. */
function decimalsOf(value: number): number {
  return value === 0 ? 0 : Math.max(0, 3 - Math.floor(Math.log10(Math.abs(value))))
}

/**
 * A range in another unit, for reading only; the judgement never uses it. Ends are rounded into the range, so that a value equal to an end
 * that is shown always passes (7 psi is shown as at least 48.27 kPa, since 48.26 kPa is a little less).
 */
function inUnit(range: Range, unit: Unit): Range | null {
  if (range.unit === unit) return range
  const convert = (end: number | undefined, direction: 'up' | 'down' | 'nearest'): number | null | undefined => {
    if (end === undefined) return undefined
    const converted = convertValue(end, range.unit, unit)
    return converted === null ? null : roundTo(converted, decimalsOf(converted), direction)
  }
  const isPoint = range.min === range.max
  const min = convert(range.min, isPoint ? 'nearest' : 'up')
  const max = convert(range.max, isPoint ? 'nearest' : 'down')
  return min === null || max === null ? null : { min, max, unit }
}

/**
 * Limits in words, in the unit in which the value is being typed: "11 000 to 13 500 rpm", "at least 7 psi", "at most 0.584 mm". A figure that
 * was printed in several units is given as printed for that unit, or in all its units when that unit is not among them. Converted
 * limits show four significant digits, rounded into the range. Empty when neither end is known.
 */
export function limitWords(limits: SpecLimit, unit: Unit, format: NumberFormat): string {
  if ('as' in limits) {
    const printed = limits.as.find((figure) => figure.unit === unit)
    return printed ? rangeWords(printed, format) : limits.as.map((figure) => rangeWords(figure, format)).join(', ')
  }
  return rangeWords(inUnit(limits, unit) ?? limits, format)
}

function rangeWords({ min, max, unit }: Range, format: NumberFormat): string {
  if (min !== undefined && max !== undefined) {
    return min === max ? formatValue(min, unit, format) : `${formatNumber(min, format)} to ${formatValue(max, unit, format)}`
  }
  if (min !== undefined) return `at least ${formatValue(min, unit, format)}`
  return max === undefined ? '' : `at most ${formatValue(max, unit, format)}`
}
