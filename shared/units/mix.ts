import { divide, toExact, toNumber } from './exact.ts'

/** How far a mix may lie from its ratio and still count as right: oil is sold and measured in rounded figures (2.6 US fl oz to a gallon is 49.2:1). */
export const mixToleranceShare = 0.03

/**
 * Oil for an amount of fuel at a ratio such as 50 (for 50:1), in the unit of the fuel: oil = fuel / ratio (arithmetic). `null` when an argument is
 * negative, not finite, or the ratio is zero.
 */
export function oilFor(fuel: number, ratio: number): number | null {
  const amount = toExact(fuel)
  const divisor = toExact(ratio)
  if (amount === null || divisor === null || fuel < 0 || ratio <= 0) return null
  return toNumber(divide(amount, divisor))
}

/** The ratio that a mix really has: fuel over oil, both in one unit; `null` when there is no oil or an argument is negative or not finite. */
export function mixRatio(fuel: number, oil: number): number | null {
  const amount = toExact(fuel)
  const divisor = toExact(oil)
  if (amount === null || divisor === null || fuel < 0 || oil <= 0) return null
  return toNumber(divide(amount, divisor))
}

/** Whether the oil in a mix is right for the ratio within a share of it (3 % unless told), ends included. */
export function isMixRight(fuel: number, oil: number, ratio: number, toleranceShare: number = mixToleranceShare): boolean {
  const wanted = oilFor(fuel, ratio)
  if (wanted === null || !(oil >= 0)) return false
  const difference = Math.abs(oil - wanted)
  return difference <= wanted * toleranceShare * (1 + Number.EPSILON * 4)
}
