import type { Height, Mass } from './bodySchemas'

/** Pounds are cut down before they are added to the stone: 13.999… stays 13. */
export function wholeMass(mass: Mass): { unit: 'kg' | 'lb'; whole: number } {
  if (mass.unit === 'st-lb') return { unit: 'lb', whole: 14 * mass.stone + Math.floor(mass.pounds) }
  return { unit: mass.unit, whole: Math.floor(mass.value) }
}

/** Whole cm, or whole inches with the feet as inches. */
export function wholeHeight(height: Height): { unit: 'cm' | 'in'; whole: number } {
  if (height.unit === 'ft-in') return { unit: 'in', whole: 12 * height.feet + Math.floor(height.inches) }
  return { unit: 'cm', whole: Math.floor(height.value) }
}
