import { exactDifference } from '#shared/units/exact'
import type { Moves, Preset } from './trackPlan'

/**
 * Signed notches and turns from where the units stand to where they shall stand: target minus current. Turns are
 * null where either is unknown or there is no screw: bring it to the neutral mark first.
 */
export function movesBetween(current: Preset, target: Preset): Moves {
  const known = typeof current.turns === 'number' && typeof target.turns === 'number'
  return {
    toe: target.toe - current.toe,
    heel: target.heel - current.heel,
    turns: known ? exactDifference(target.turns ?? 0, current.turns ?? 0) : null,
  }
}

/** Notches to move on one ski, toe and heel together, for sorting by nearest preset. Unknown preset: null. */
export function notchDistance(preset: Preset | null, target: Preset): number | null {
  if (!preset) return null
  return Math.abs(target.toe - preset.toe) + Math.abs(target.heel - preset.heel)
}
