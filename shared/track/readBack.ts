import { exactDifference } from '#shared/units/exact'
import { notchOfMark } from './marks'
import type { TrackModel, TrackUnit } from './trackModel'

/** What the technician reads on one ski after the boot is clicked in. Notches; marks are read by readingFromMarks. */
export type Reading = {
  toeValue: number
  heelValue: number
  toe: number
  heel: number
  /** Turns of the fine screw from its neutral mark; null without a screw. */
  turns: number | null
  forwardPressureInWindow: boolean
}

/** What the ski shall show: the plan's notches and turns, and each unit's target indicator. */
export type ReadingTarget = { toe: number; heel: number; turns: number | null }
export type IndicatorTargets = { toeValue: number; heelValue: number }

export type ReadingVerdict =
  | { verdict: 'matches' }
  | { verdict: 'wrong_value'; unit: TrackUnit; target: number; read: number }
  | { verdict: 'window_decides'; part: 'heel' | 'screw'; target: number; read: number }
  | { verdict: 'move_again'; part: 'heel' | 'screw'; because: 'forward_pressure' | 'screw_not_read' }
  | { verdict: 'head_technician'; part: 'toe' | 'heel' | 'screw' | 'both'; because: HeadTechnicianReason }
export type HeadTechnicianReason = 'toe_mark' | 'heel_mark' | 'screw' | 'coupled_track'

/** Turns are read to a quarter (invented): half of that either way is the same turn. */
export const readableTurn = 0.25

/** Turns as people set and read them: the nearest quarter that the screw's travel allows. */
export function readableTurns(turns: number, maxTurns: number): number {
  const most = Math.floor(maxTurns / readableTurn) * readableTurn
  const nearest = Math.round(turns / readableTurn) * readableTurn
  return Math.min(most, Math.max(-most, nearest)) + 0
}

/**
 * Judges a reading, the first that applies:
 * a value that is not its unit's target indicator → wrong_value; on a coupled track any other notch, or (without a
 * screw) forward pressure outside its window → head_technician; another toe mark, a heel mark more than one notch off, a screw
 * more than one turn off or beyond its travel, or both heel and screw off → head_technician; forward pressure
 * outside its window → move_again; heel one notch or screw up to one turn off → window_decides; else matches.
 */
export function judgeReading(
  model: TrackModel,
  plan: ReadingTarget,
  target: IndicatorTargets,
  reading: Reading,
): ReadingVerdict {
  return (
    wrongValue('toe', target.toeValue, reading.toeValue) ??
    wrongValue('heel', target.heelValue, reading.heelValue) ??
    (model.coupled ? coupledVerdict(model, plan, reading) : railVerdict(plan, reading)) ??
    screwVerdict(model, plan, reading)
  )
}

function wrongValue(unit: TrackUnit, target: number, read: number): ReadingVerdict | null {
  return read === target ? null : { verdict: 'wrong_value', unit, target, read }
}

/** No notch of a coupled track may differ; without a screw nothing else can bring the pressure into its window. */
function coupledVerdict(model: TrackModel, plan: ReadingTarget, reading: Reading): ReadingVerdict | null {
  const stands = reading.toe === plan.toe && reading.heel === plan.heel
  if (stands && (reading.forwardPressureInWindow || model.fineScrew)) return null
  return { verdict: 'head_technician', part: 'both', because: 'coupled_track' }
}

function railVerdict(plan: ReadingTarget, reading: Reading): ReadingVerdict | null {
  if (reading.toe !== plan.toe) return { verdict: 'head_technician', part: 'toe', because: 'toe_mark' }
  const heelOff = Math.abs(reading.heel - plan.heel)
  if (!(heelOff <= 1)) return { verdict: 'head_technician', part: 'heel', because: 'heel_mark' }
  return null
}

/** Toe and values are right and the heel is at most one notch off: what is left is the screw and the window. */
function screwVerdict(model: TrackModel, plan: ReadingTarget, reading: Reading): ReadingVerdict {
  const heelOff = reading.heel !== plan.heel
  const adjust = model.fineScrew && !heelOff ? 'screw' : 'heel'
  const screw = model.fineScrew ? screwOff(model.fineScrew.maxTurns, plan.turns ?? 0, reading.turns) : 'right'
  if (screw === 'not_read') return { verdict: 'move_again', part: 'screw', because: 'screw_not_read' }
  if (screw === 'too_far' || (screw === 'off' && heelOff)) {
    return { verdict: 'head_technician', part: 'screw', because: 'screw' }
  }
  if (!reading.forwardPressureInWindow)
    return { verdict: 'move_again', part: adjust, because: 'forward_pressure' }
  if (heelOff) return { verdict: 'window_decides', part: 'heel', target: plan.heel, read: reading.heel }
  if (screw === 'off')
    return { verdict: 'window_decides', part: 'screw', target: plan.turns ?? 0, read: reading.turns ?? 0 }
  return { verdict: 'matches' }
}

function screwOff(
  maxTurns: number,
  target: number,
  read: number | null,
): 'right' | 'off' | 'too_far' | 'not_read' {
  if (read === null || !Number.isFinite(read)) return 'not_read'
  const off = Math.abs(exactDifference(read, target))
  if (Math.abs(read) > maxTurns) return 'too_far'
  if (off <= readableTurn / 2 || read === readableTurns(target, maxTurns)) return 'right'
  return off <= 1 ? 'off' : 'too_far'
}

export type ReadMarks = { toeMark: string; heelMark: string }

/** The notches of the marks that were read; a mark that is not printed on its rail is named. */
export function readingFromMarks(
  model: TrackModel,
  { toeMark, heelMark }: ReadMarks,
):
  | { ok: true; toe: number; heel: number }
  | { ok: false; reason: 'mark_not_on_rail'; unit: TrackUnit; mark: string } {
  const toe = notchOfMark(model, 'toe', toeMark)
  if (toe === null) return { ok: false, reason: 'mark_not_on_rail', unit: 'toe', mark: toeMark }
  const heel = notchOfMark(model, 'heel', heelMark)
  if (heel === null) return { ok: false, reason: 'mark_not_on_rail', unit: 'heel', mark: heelMark }
  return { ok: true, toe, heel }
}
