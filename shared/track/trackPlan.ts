import { invalidInput, type InvalidInput } from '#shared/calc/invalidInput'
import { bestPosition, exactTrack, millimetres, type Position } from './exactTrack'
import { isOnRail } from './marks'
import { trackLimits } from './limits'
import type { TrackModel } from './trackModel'

/** Where the units of one ski stand; turns of the fine screw, where there is one and its turn is known. */
export type Preset = { toe: number; heel: number; turns?: number | null }

/** Signed notches and turns from the preset to the target. Turns null: no screw, or its turn is unknown. */
export type Moves = { toe: number; heel: number; turns: number | null }

export type TrackPosition = { toe: number; heel: number; centreShiftMm: number; gapMm: number }

export type TrackTarget = TrackPosition & { turns: number | null }

export type TrackPlan =
  | (TrackTarget & { ok: true; moves: Moves | null })
  | { ok: false; reason: 'sole_shorter_than_track' | 'sole_longer_than_track' | 'no_position_in_window' }
  | { ok: false; reason: 'off_centre'; nearest: TrackPosition }
  | InvalidInput
export type TrackRefusalReason = Extract<TrackPlan, { ok: false }>['reason']

export type TrackOptions = {
  /** Where the middle of the sole shall sit from the mounting mark, in mm, positive forward. */
  offsetMm?: number
  current?: Preset
}

function malformed(
  model: TrackModel,
  soleLengthMm: number,
  offsetMm: number,
  current?: Preset,
): InvalidInput | null {
  const { soleLengthMm: sole, offsetMm: offset } = trackLimits
  if (!Number.isInteger(soleLengthMm) || soleLengthMm < sole.min || soleLengthMm > sole.max) {
    return invalidInput(['soleLengthMm'], `expected whole mm from ${sole.min} to ${sole.max}`)
  }
  if (!(offsetMm >= offset.min && offsetMm <= offset.max)) {
    return invalidInput(['offsetMm'], `expected ${offset.min} to ${offset.max} mm`)
  }
  return current ? malformedPreset(model, current) : null
}

/** Why a preset cannot be one of this model, or null. */
export function malformedPreset(model: TrackModel, { toe, heel, turns }: Preset): InvalidInput | null {
  if (!isOnRail(model.toe, toe)) return invalidInput(['current', 'toe'], 'expected a notch of the toe rail')
  if (!isOnRail(model.heel, heel))
    return invalidInput(['current', 'heel'], 'expected a notch of the heel rail')
  if (turns === undefined || turns === null) return null
  if (!model.fineScrew) return invalidInput(['current', 'turns'], 'this track has no fine screw')
  return Math.abs(turns) <= model.fineScrew.maxTurns
    ? null
    : invalidInput(['current', 'turns'], 'expected turns within the travel of the screw')
}

/**
 * The notches of toe and heel that centre a boot on the mounting mark within the track's forward-pressure window,
 * and the moves from where the units stand now. Lengths in mm, the sole in whole ones. Of the positions in the
 * window the nearest to the centre, then the smallest gap, then the side of gapTie, then the smaller notches.
 * Cannot be placed: `{ ok: false, reason }`. Geometry: trackModelSchema. Decimals are exact.
 */
export function trackPlan(model: TrackModel, soleLengthMm: number, options: TrackOptions = {}): TrackPlan {
  const { offsetMm = 0, current } = options
  const refused = malformed(model, soleLengthMm, offsetMm, current)
  if (refused) return refused
  if (soleLengthMm < model.soleLengthMm.min) return { ok: false, reason: 'sole_shorter_than_track' }
  if (soleLengthMm > model.soleLengthMm.max) return { ok: false, reason: 'sole_longer_than_track' }

  const track = exactTrack(model, soleLengthMm, offsetMm)
  const best = bestPosition(track)
  if (!best) return { ok: false, reason: 'no_position_in_window' }

  const position = readable(best, track.partsPerMm)
  if (best.offCentre > track.centreWindow) return { ok: false, reason: 'off_centre', nearest: position }
  const turns = track.turnsFor(best.gap, 0)
  if (!current) return { ok: true, ...position, turns, moves: null }
  const turnsMove = typeof current.turns === 'number' ? track.turnsFor(best.gap, current.turns) : null
  const moves = { toe: best.toe - current.toe, heel: best.heel - current.heel, turns: turnsMove }
  return { ok: true, ...position, turns, moves }
}

function readable({ toe, heel, centre, gap }: Position, partsPerMm: bigint): TrackPosition {
  return { toe, heel, centreShiftMm: millimetres(centre, partsPerMm), gapMm: millimetres(gap, partsPerMm) }
}

/** The sole lengths, in whole mm, for which the plan is exactly these notches. */
export function solesAt(model: TrackModel, toe: number, heel: number, offsetMm = 0): number[] {
  const first = Math.max(Math.ceil(model.soleLengthMm.min), trackLimits.soleLengthMm.min)
  const last = Math.min(Math.floor(model.soleLengthMm.max), trackLimits.soleLengthMm.max)
  return Array.from({ length: Math.max(0, last - first + 1) }, (_each, index) => first + index).filter(
    (soleLengthMm) => {
      const plan = trackPlan(model, soleLengthMm, { offsetMm })
      return plan.ok && plan.toe === toe && plan.heel === heel
    },
  )
}

/** Shortest and longest sole for which the plan is exactly these notches; null where no sole leads to them. */
export function soleRangeAt(
  model: TrackModel,
  toe: number,
  heel: number,
  offsetMm = 0,
): { minMm: number; maxMm: number } | null {
  const soles = solesAt(model, toe, heel, offsetMm)
  const [minMm, maxMm] = [soles[0], soles.at(-1)]
  return minMm === undefined || maxMm === undefined ? null : { minMm, maxMm }
}
