import { bodyLimits } from '#shared/units/bodyLimits'
import type { Height, Mass } from '#shared/units/bodySchemas'
import type { ReleaseInput } from './releaseInput'
import { inputLimits, typeShift } from './rules'
import { editions } from './selectionTable'

type Limits = { min: number; max: number }
const within = (value: number, { min, max }: Limits) => value >= min && value <= max
const wholeWithin = (value: number, limits: Limits) => Number.isInteger(value) && within(value, limits)

function massIsWellFormed(mass: Mass): boolean {
  if (mass.unit === 'kg') return within(mass.value, bodyLimits.massKg)
  if (mass.unit === 'lb') return within(mass.value, bodyLimits.massLb)
  const { min, max } = bodyLimits.massLb
  const { stone, pounds } = mass
  return (
    Number.isInteger(stone) &&
    pounds >= 0 &&
    pounds < 14 &&
    pounds >= min - 14 * stone &&
    pounds <= max - 14 * stone
  )
}

function heightIsWellFormed(height: Height): boolean {
  if (height.unit === 'cm') return within(height.value, bodyLimits.heightCm)
  return wholeWithin(height.feet, bodyLimits.heightFeet) && height.inches >= 0 && height.inches < 12
}

/**
 * The field of a typed input that is out of its limits or not a number, or null. The same limits as
 * releaseInputSchema, without the schema library: a half-filled form must not reach the table as NaN.
 */
export function malformedField(input: ReleaseInput): keyof ReleaseInput | null {
  if (!massIsWellFormed(input.mass)) return 'mass'
  if (!heightIsWellFormed(input.height)) return 'height'
  if (!wholeWithin(input.age, inputLimits.age)) return 'age'
  if (!Object.hasOwn(typeShift, input.skierType)) return 'skierType'
  if (!within(input.soleLengthMm, inputLimits.soleLengthMm)) return 'soleLengthMm'
  if (input.edition !== undefined && !Object.hasOwn(editions, input.edition)) return 'edition'
  if (input.request !== undefined && ![-1, 0, 1].includes(input.request)) return 'request'
  return null
}
