import type { Height, Mass } from './bodySchemas'
import { decimalPlaces, nearestDouble, scaledTo } from './exact'

/** International pound and inch, exact by definition: 0.45359237 kg and 2.54 cm. */
const kgPerLb = { parts: 45359237n, of: 100000000n }
const cmPerIn = { parts: 254n, of: 100n }

type Fraction = { parts: bigint; of: bigint }

function fraction(value: number): Fraction {
  const places = decimalPlaces(value)
  return { parts: scaledTo(value, places), of: 10n ** BigInt(places) }
}
const times = (a: Fraction, b: Fraction): Fraction => ({ parts: a.parts * b.parts, of: a.of * b.of })
const per = (a: Fraction, b: Fraction): Fraction => ({ parts: a.parts * b.of, of: a.of * b.parts })
const plus = (a: Fraction, whole: number): Fraction => ({ parts: a.parts + BigInt(whole) * a.of, of: a.of })
const double = ({ parts, of }: Fraction) => nearestDouble(parts, of)

/** Nearest whole number of tenths or units; a half goes up. */
function rounded({ parts, of }: Fraction, perUnit: bigint): number {
  return Number((2n * parts * perUnit + of) / (2n * of)) / Number(perUnit)
}

function pounds(mass: Mass): Fraction {
  if (mass.unit === 'kg') return per(fraction(mass.value), kgPerLb)
  return mass.unit === 'lb' ? fraction(mass.value) : plus(fraction(mass.pounds), 14 * mass.stone)
}
const kilograms = (mass: Mass) => (mass.unit === 'kg' ? fraction(mass.value) : times(pounds(mass), kgPerLb))

function inches(height: Height): Fraction {
  if (height.unit === 'cm') return per(fraction(height.value), cmPerIn)
  return plus(fraction(height.inches), 12 * height.feet)
}
const centimetres = (height: Height) =>
  height.unit === 'cm' ? fraction(height.value) : times(inches(height), cmPerIn)

/** Mass in kg, unrounded. For showing and comparing, never for finding the row. */
export const kgOf = (mass: Mass): number => double(kilograms(mass))
/** Mass in lb, unrounded. */
export const lbOf = (mass: Mass): number => double(pounds(mass))
/** Height in cm, unrounded. */
export const cmOf = (height: Height): number => double(centimetres(height))

/** The same mass or height in the other system of units, unrounded. */
export function inOtherSystem(body: Mass): Mass
export function inOtherSystem(body: Height): Height
export function inOtherSystem(body: Mass | Height): Mass | Height {
  switch (body.unit) {
    case 'kg':
      return { unit: 'lb', value: lbOf(body) }
    case 'lb':
    case 'st-lb':
      return { unit: 'kg', value: kgOf(body) }
    case 'cm': {
      const total = inches(body)
      const feet = total.parts / (12n * total.of)
      return { unit: 'ft-in', feet: Number(feet), inches: double(plus(total, -12 * Number(feet))) }
    }
    case 'ft-in':
      return { unit: 'cm', value: cmOf(body) }
  }
}

/** A mass in another unit, rounded for showing: kg to a tenth, pounds to a whole one. In its own unit: unchanged. */
export function massShownIn(mass: Mass, unit: Mass['unit']): Mass {
  if (unit === mass.unit) return mass
  if (unit === 'kg') return { unit, value: rounded(kilograms(mass), 10n) }
  const whole = rounded(pounds(mass), 1n)
  return unit === 'lb' ? { unit, value: whole } : { unit, stone: Math.floor(whole / 14), pounds: whole % 14 }
}

/** A height in another unit, rounded for showing: whole cm, whole inches. In its own unit: unchanged. */
export function heightShownIn(height: Height, unit: Height['unit']): Height {
  if (unit === height.unit) return height
  if (unit === 'cm') return { unit, value: rounded(centimetres(height), 1n) }
  const whole = rounded(inches(height), 1n)
  return { unit, feet: Math.floor(whole / 12), inches: whole % 12 }
}

export const massUnits = ['kg', 'lb', 'st-lb'] as const satisfies readonly Mass['unit'][]
export const heightUnits = ['cm', 'ft-in'] as const satisfies readonly Height['unit'][]

/** The mass in every unit but its own, for showing back beside what was typed. */
export function massShownBack(mass: Mass): Mass[] {
  return massUnits.filter((unit) => unit !== mass.unit).map((unit) => massShownIn(mass, unit))
}

/** The height in every unit but its own. */
export function heightShownBack(height: Height): Height[] {
  return heightUnits.filter((unit) => unit !== height.unit).map((unit) => heightShownIn(height, unit))
}
