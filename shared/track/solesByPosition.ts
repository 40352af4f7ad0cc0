import { trackLimits } from './limits'
import { trackPlan } from './trackPlan'
import type { TrackModel } from './trackModel'

export type SoleRange = { minMm: number; maxMm: number }

/**
 * For every position that some whole sole length leads to, keyed 'toe heel' by notch, the shortest and the longest
 * sole of it. The same as soleRangeAt for each, in one pass over the soles. Offset in mm.
 */
export function solesByPosition(model: TrackModel, offsetMm = 0): ReadonlyMap<string, SoleRange> {
  const first = Math.max(Math.ceil(model.soleLengthMm.min), trackLimits.soleLengthMm.min)
  const last = Math.min(Math.floor(model.soleLengthMm.max), trackLimits.soleLengthMm.max)
  const ranges = new Map<string, SoleRange>()
  for (let soleLengthMm = first; soleLengthMm <= last; soleLengthMm += 1) {
    const plan = trackPlan(model, soleLengthMm, { offsetMm })
    if (!plan.ok) continue
    const position = `${plan.toe} ${plan.heel}`
    ranges.set(position, { minMm: ranges.get(position)?.minMm ?? soleLengthMm, maxMm: soleLengthMm })
  }
  return ranges
}
