import type { SpecLimit } from '#shared/units/limits.ts'
import { convertValue } from '#shared/units/convert.ts'
import { formatNumber, formatValue, roundTo } from '#shared/units/format-value.ts'
import type { NumberFormat } from '#shared/units/number-format.ts'
import type { Unit } from '#shared/units/quantities.ts'
import type { MarkState } from '#src/components/ui/state-mark.tsx'

type LimitsBarProps = {
  readonly limits: SpecLimit
  readonly unit: Unit
  readonly value: number | null
  /** How the value was judged; `null` while it is not. */
  readonly state: MarkState | null
  readonly format: NumberFormat
}

type Ends = { readonly min: number | null; readonly max: number | null }

const markerColours: Readonly<Record<MarkState, string>> = { good: 'text-good', bad: 'text-bad', care: 'text-care', info: 'text-info', open: 'text-ink' }

/** The limits in the unit that is being typed: as printed for it, else converted for looking at; the judgement never uses these. */
function toEnds(limits: SpecLimit, unit: Unit): Ends {
  const range = 'as' in limits ? limits.as.find((printed) => printed.unit === unit) : limits
  const toUnit = (end: number | undefined): number | null => {
    if (end === undefined || range === undefined) return null
    const converted = convertValue(end, range.unit, unit)
    return converted === null ? null : range.unit === unit ? end : roundTo(converted, 3)
  }
  return { min: toUnit(range?.min), max: toUnit(range?.max) }
}

/** Where the scale begins and ends: the limits with room on both sides, more where the value wants it. One that is far off stands at the end. */
function toScale({ min, max }: Ends, value: number | null): { readonly low: number; readonly high: number } {
  const from = min ?? 0
  const to = max ?? (min === null ? 1 : min * 1.4)
  const width = Math.abs(to - from) || Math.abs(to) || 1
  const low = min === null ? Math.min(0, to - width) : from - width * 0.9
  const high = max === null ? to + width * 0.2 : to + width * 0.6
  if (value === null) return { low, high }
  return { low: Math.min(low, Math.max(value - width * 0.3, from - width * 4)), high: Math.max(high, Math.min(value + width * 0.3, to + width * 4)) }
}

/** A value on the line of its limits: where it lies, before any word is read. The words beside it say the same. */
export function LimitsBar({ limits, unit, value, state, format }: LimitsBarProps) {
  const ends = toEnds(limits, unit)
  if (ends.min === null && ends.max === null) return null
  const { low, high } = toScale(ends, value)
  const toShare = (point: number): number => Math.min(1, Math.max(0, (point - low) / (high - low)))
  const from = ends.min === null ? 0 : toShare(ends.min)
  const to = ends.max === null ? 1 : toShare(ends.max)
  const at = value === null ? null : toShare(value)
  const tone = state === null ? 'text-ink-2' : markerColours[state]
  return (
    <div aria-hidden="true" className="pt-0.5">
      <div className="relative h-6">
        <span className="absolute inset-x-0 top-1/2 border-t-2 border-rule" />
        <span className="absolute top-1/2 h-3 -translate-y-1/2 border-2 border-good bg-good-wash" style={{ left: toPercent(from), right: toPercent(1 - to) }} />
        {at !== null && (
          <svg viewBox="0 0 16 16" className={`absolute top-1/2 size-4 -translate-1/2 ${tone}`} style={{ left: toPercent(at) }}>
            <path d="M8 0l8 8-8 8-8-8z" fill="currentColor" />
          </svg>
        )}
      </div>
      <div className="figures relative h-5 text-small leading-5">
        {ends.min !== null && <BarLabel at={from}>{ends.max === null ? formatValue(ends.min, unit, format) : formatNumber(ends.min, format)}</BarLabel>}
        {ends.max !== null && <BarLabel at={to}>{ends.min === null ? formatValue(ends.max, unit, format) : formatNumber(ends.max, format)}</BarLabel>}
        {at !== null && value !== null && isClear(at, from, to) && (
          <BarLabel at={at} className={tone}>
            {formatNumber(value, format)}
          </BarLabel>
        )}
      </div>
    </div>
  )
}

/** The value's own label only where it does not run into those of the limits. */
function isClear(at: number, from: number, to: number): boolean {
  return Math.abs(at - from) > 0.2 && Math.abs(at - to) > 0.2
}

function toPercent(share: number): string {
  return `${share * 100}%`
}

function BarLabel({ at, className = '', children }: { readonly at: number; readonly className?: string; readonly children: string }) {
  const shift = at < 0.1 ? '' : at > 0.9 ? '-translate-x-full' : '-translate-x-1/2'
  return (
    <span className={`absolute whitespace-nowrap ${shift} ${className}`} style={{ left: toPercent(at) }}>
      {children}
    </span>
  )
}
