/** A fraction in lowest terms or not; `den` is never zero and always positive. */
export interface Exact {
  readonly num: bigint
  readonly den: bigint
}

/**
 * The decimal number that was meant: 0.1 becomes exactly 1/10, not the nearest binary fraction. Takes the shortest decimal that names
 * the given number, which is what was typed or printed; `null` for what is not finite.
 */
export function toExact(value: number): Exact | null {
  if (!Number.isFinite(value)) return null
  const [mantissa = '0', exponentText = '0'] = value.toString().split('e')
  const [whole = '0', fraction = ''] = mantissa.split('.')
  const digits = BigInt(whole + fraction)
  const exponent = Number(exponentText) - fraction.length
  return exponent >= 0 ? { num: digits * 10n ** BigInt(exponent), den: 1n } : { num: digits, den: 10n ** BigInt(-exponent) }
}

/** A decimal literal as a fraction, for factors written in code ("4.4482216152605"); the text is trusted. */
export function decimal(text: string): Exact {
  const [whole = '0', fraction = ''] = text.split('.')
  return { num: BigInt(whole + fraction), den: 10n ** BigInt(fraction.length) }
}

/** The sum of two fractions. */
export function add(a: Exact, b: Exact): Exact {
  return { num: a.num * b.den + b.num * a.den, den: a.den * b.den }
}

/** The difference of two fractions. */
export function subtract(a: Exact, b: Exact): Exact {
  return { num: a.num * b.den - b.num * a.den, den: a.den * b.den }
}

/** The product of two fractions. */
export function multiply(a: Exact, b: Exact): Exact {
  return { num: a.num * b.num, den: a.den * b.den }
}

/** The quotient of two fractions; dividing by zero throws, since every divisor here is a factor of a unit or a mix ratio. */
export function divide(a: Exact, b: Exact): Exact {
  if (b.num === 0n) throw new RangeError('Division by zero.')
  return b.num < 0n ? { num: -a.num * b.den, den: a.den * -b.num } : { num: a.num * b.den, den: a.den * b.num }
}

/** Negative, zero or positive, as `a` lies below, on or above `b`; without rounding. */
export function compare(a: Exact, b: Exact): -1 | 0 | 1 {
  const left = a.num * b.den
  const right = b.num * a.den
  return left < right ? -1 : left > right ? 1 : 0
}

/** The nearest number, correct to 17 significant digits. */
export function toNumber({ num, den }: Exact): number {
  const negative = num < 0n
  const size = negative ? -num : num
  if (size === 0n) return 0
  const shift = Math.max(0, 20 + den.toString().length - size.toString().length)
  const quotient = (size * 10n ** BigInt(shift)) / den
  const value = Number(`${quotient}e-${shift}`)
  return negative ? -value : value
}
