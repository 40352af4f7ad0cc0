import { decimalPlaces, exactSum, nearestDouble, scaledTo } from '#shared/units/exact'
import type { TrackModel } from './trackModel'

export type TargetIndicator =
  | { ok: true; value: number }
  | { ok: false; reason: 'below_scale' | 'above_scale'; value: number; scale: { min: number; max: number } }

/** The largest multiple of a step that is not above a value. */
function multipleBelow(value: number, step: number): number {
  const places = Math.max(decimalPlaces(value), decimalPlaces(step))
  const [parts, size] = [scaledTo(value, places), scaledTo(step, places)]
  const rest = ((parts % size) + size) % size
  return nearestDouble(parts - rest, 10n ** BigInt(places))
}

/** The largest value that can be read on the indicator and is not above the one given. */
function readableBelow(steps: TrackModel['indicatorStep'], value: number): number {
  const readable = steps.flatMap((each) => {
    if ('upTo' in each) return [multipleBelow(Math.min(value, each.upTo), each.step)]
    const multiple = multipleBelow(value, each.step)
    return multiple > each.above ? [multiple] : []
  })
  return readable.length > 0 ? Math.max(...readable) : value
}

/**
 * What a unit's indicator shall show: release value plus the unit's correction from torque tests, rounded down to
 * what the indicator can show. Outside the scale: refused, with the value that would have been needed.
 */
export function targetIndicator(model: TrackModel, releaseValue: number, correction = 0): TargetIndicator {
  const value = readableBelow(model.indicatorStep, exactSum(releaseValue, correction))
  const { min, max } = model.releaseValue
  if (value >= min && value <= max) return { ok: true, value }
  return { ok: false, reason: value < min ? 'below_scale' : 'above_scale', value, scale: { min, max } }
}
