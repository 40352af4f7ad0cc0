import type { Mass } from '#shared/units/bodySchemas'
import { wholeMass } from '#shared/units/wholeUnits'
import { lightSkier } from './rules'

/** Up to 21 kg (47 lb), as typed: cut down to whole units, as the table does. */
export function isLight(mass: Mass): boolean {
  const { unit, whole } = wholeMass(mass)
  return whole <= lightSkier[unit]
}
