/**
 * Exact arithmetic for decimals. A number means the shortest decimal that reads back as it (0.1 is one tenth), and
 * is carried as a whole number of equal parts.
 */

const powers = [1, 10, 100, 1e3, 1e4, 1e5, 1e6] as const
const form = /^(-?)(\d+)(?:\.(\d+))?(?:e([+-]\d+))?$/

function written(value: number): { digits: bigint; exponent: number } {
  const parts = form.exec(String(value))
  if (!parts) throw new RangeError(`${value} is not a decimal`)
  const [, sign = '', whole = '', fraction = '', exponent = '0'] = parts
  return { digits: BigInt(sign + whole + fraction), exponent: Number(exponent) - fraction.length }
}

/** Digits after the point of a finite number. */
export function decimalPlaces(value: number): number {
  if (Number.isInteger(value)) return 0
  for (let places = 1; places < powers.length; places++) {
    const power = powers[places] ?? 1
    const scaled = Math.round(value * power)
    if (scaled / power === value && Number.isSafeInteger(scaled)) return places
  }
  return Math.max(0, -written(value).exponent)
}

/** A number as whole parts of 10^-places; `places` at least its decimalPlaces. */
export function scaledTo(value: number, places: number): bigint {
  const power = powers[places]
  if (power !== undefined) {
    const scaled = Math.round(value * power)
    // The product may have been rounded by half a part: only what divides back is the number itself.
    if (Number.isSafeInteger(scaled) && scaled / power === value) return BigInt(scaled)
  }
  const { digits, exponent } = written(value)
  return digits * 10n ** BigInt(exponent + places)
}

const safe = BigInt(Number.MAX_SAFE_INTEGER)
const magnitude = (value: bigint) => (value < 0n ? -value : value)
const bits = (value: bigint) => value.toString(2).length

/** The double nearest to the exact fraction; beyond the largest double, that one. The divisor is positive. */
export function nearestDouble(dividend: bigint, divisor: bigint): number {
  const size = magnitude(dividend)
  if (size <= safe && divisor <= safe) return Number(dividend) / Number(divisor)
  // 66 bits or more of the quotient, the last one set when anything was cut off, so that rounding sees it
  const shift = BigInt(Math.max(0, 66 - bits(size) + bits(divisor)))
  const shifted = size << shift
  const quotient = (shifted / divisor) | (shifted % divisor === 0n ? 0n : 1n)
  const half = shift / 2n
  const double = Number(quotient) / 2 ** Number(half) / 2 ** Number(shift - half)
  const bounded = Number.isFinite(double) ? double : Number.MAX_VALUE
  return dividend < 0n ? -bounded : bounded
}

/** a - b without binary rounding: 0.3 - 0.1 is 0.2. */
export function exactDifference(a: number, b: number): number {
  const places = Math.max(decimalPlaces(a), decimalPlaces(b))
  return nearestDouble(scaledTo(a, places) - scaledTo(b, places), 10n ** BigInt(places))
}

/** a + b without binary rounding. */
export function exactSum(a: number, b: number): number {
  return exactDifference(a, -b)
}
