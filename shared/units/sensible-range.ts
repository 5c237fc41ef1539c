import { compareAmounts } from './convert.ts'
import type { Quantity, Unit } from './quantities.ts'

interface SensibleRange {
  readonly min: number
  readonly max: number
  readonly unit: Unit
  readonly whole?: boolean
}

/**
 * What any instrument of a small repair shop could show, very wide: a value outside is a slip of the finger, not a finding. Own choice, no
 * maker's figure. Vacuum ends at a perfect one (1 atm = 101.325 kPa, NIST SP 811 B.8), rounded up for gauges that read over.
 */
const ranges: Readonly<Record<Quantity, SensibleRange>> = {
  'rotational-speed': { min: 0, max: 100_000, unit: '1/min' },
  length: { min: 0, max: 100_000, unit: 'mm' },
  pressure: { min: -110, max: 100_000, unit: 'kPa' },
  vacuum: { min: 0, max: 110, unit: 'kPa' },
  time: { min: 0, max: 86_400, unit: 's' },
  volume: { min: 0, max: 1_000, unit: 'l' },
  mass: { min: 0, max: 1_000, unit: 'kg' },
  temperature: { min: -90, max: 2_000, unit: 'degC' },
  torque: { min: 0, max: 10_000, unit: 'N m' },
  voltage: { min: -100_000, max: 100_000, unit: 'V' },
  resistance: { min: 0, max: 1e12, unit: 'ohm' },
  ratio: { min: 0, max: 1e6, unit: 'ratio' },
  count: { min: 0, max: 1e6, unit: 'count', whole: true },
}

/** Why a value cannot be a reading of its quantity, or `null` when it can. Ends are included. */
export function senselessBecause(value: number, quantity: Quantity, unit: Unit): 'below-sense' | 'above-sense' | 'not-whole' | 'unit-mismatch' | null {
  const range = ranges[quantity]
  const low = compareAmounts(value, unit, range.min, range.unit)
  const high = compareAmounts(value, unit, range.max, range.unit)
  if (low === null || high === null) return 'unit-mismatch'
  if (low < 0) return 'below-sense'
  if (high > 0) return 'above-sense'
  return range.whole === true && !Number.isInteger(value) ? 'not-whole' : null
}
