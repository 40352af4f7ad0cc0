import type { Height, Mass } from '#shared/units/bodySchemas'
import { cmOf, kgOf } from '#shared/units/convert'

export type AgeBand = {
  fromAge: number
  heightCm: { min: number; max: number }
  massKg: { min: number; max: number }
}

/** What is usual at an age, drawn wide. Invented: it catches slips and swapped units, and judges nobody. */
export const usualByAge: readonly AgeBand[] = [
  { fromAge: 0, heightCm: { min: 50, max: 95 }, massKg: { min: 3, max: 17 } },
  { fromAge: 2, heightCm: { min: 75, max: 118 }, massKg: { min: 8, max: 26 } },
  { fromAge: 4, heightCm: { min: 90, max: 132 }, massKg: { min: 11, max: 35 } },
  { fromAge: 6, heightCm: { min: 100, max: 148 }, massKg: { min: 14, max: 48 } },
  { fromAge: 8, heightCm: { min: 110, max: 162 }, massKg: { min: 17, max: 65 } },
  { fromAge: 10, heightCm: { min: 118, max: 182 }, massKg: { min: 20, max: 90 } },
  { fromAge: 13, heightCm: { min: 132, max: 202 }, massKg: { min: 28, max: 125 } },
  { fromAge: 16, heightCm: { min: 140, max: 212 }, massKg: { min: 36, max: 160 } },
]

export type AgeWarning = {
  what: 'mass' | 'height'
  is: 'less_than_usual' | 'more_than_usual'
  age: number
  usual: { min: number; max: number; unit: 'kg' | 'cm' }
}

function warning(
  what: 'mass' | 'height',
  age: number,
  value: number,
  usual: { min: number; max: number },
  unit: 'kg' | 'cm',
): AgeWarning[] {
  if (value >= usual.min && value <= usual.max) return []
  return [
    { what, is: value < usual.min ? 'less_than_usual' : 'more_than_usual', age, usual: { ...usual, unit } },
  ]
}

/** What is unusual at this age; asks for a second look, never stops. Empty: nothing to say. */
export function plausibleForAge({
  age,
  mass,
  height,
}: {
  age: number
  mass: Mass
  height: Height
}): AgeWarning[] {
  const band = usualByAge.findLast((each) => age >= each.fromAge)
  if (!band) return []
  return [
    ...warning('mass', age, kgOf(mass), band.massKg, 'kg'),
    ...warning('height', age, cmOf(height), band.heightCm, 'cm'),
  ]
}
