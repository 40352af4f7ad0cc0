import { judgeSki, mismatchOf, type BenchTarget, type Mismatch } from '#shared/fitting/readBack'
import type { Side } from '#shared/schemas/common'
import type { SeenReading } from '#shared/schemas/records'
import { markOf, notchOfMark } from '#shared/track/marks'
import { readableTurn, readableTurns } from '#shared/track/readBack'
import type { TrackModel, TrackUnit } from '#shared/track/trackModel'

/** What is read at a ski. On a coupled track one mark (`lever`) stands for both units. */
export type ReadStep = 'lever' | 'heel' | 'heelValue' | 'toe' | 'toeValue' | 'turns'
export const checkSteps = ['soleClearance', 'forwardPressure', 'brake', 'function'] as const
export type CheckStep = (typeof checkSteps)[number]
/** `done`: everything was read and checked, and may be taken. */
export type TicketStep = ReadStep | CheckStep | 'done'

/** What of one ski was read and checked so far; null and false are open. Marks as notches. */
export interface SideDraft {
  toe: number | null
  heel: number | null
  turns: number | null
  toeValue: number | null
  heelValue: number | null
  soleClearance: boolean
  forwardPressure: 'in' | 'out' | null
  brake: boolean
  function: boolean
  /** A difference that a head technician is asked about at the end. */
  deferred: boolean
}

export const emptyDraft = (): SideDraft => ({
  toe: null,
  heel: null,
  turns: null,
  toeValue: null,
  heelValue: null,
  soleClearance: false,
  forwardPressure: null,
  brake: false,
  function: false,
  deferred: false,
})

export function readSteps(model: TrackModel): ReadStep[] {
  const units: ReadStep[] = model.coupled
    ? ['lever', 'heelValue', 'toeValue']
    : ['heel', 'heelValue', 'toe', 'toeValue']
  return model.fineScrew ? [...units, 'turns'] : units
}

export const unitOf = (step: ReadStep): TrackUnit =>
  step === 'heel' || step === 'heelValue' ? 'heel' : 'toe'
export const isMarkStep = (step: ReadStep) => step === 'heel' || step === 'toe' || step === 'lever'

export function isRead(draft: SideDraft, step: ReadStep): boolean {
  return step === 'lever' ? draft.toe !== null && draft.heel !== null : draft[step] !== null
}

export function isChecked(draft: SideDraft, step: CheckStep): boolean {
  return step === 'forwardPressure' ? draft.forwardPressure === 'in' : draft[step]
}

/** The first thing that is still open, in the order in which hands reach for it. */
export function nextStep(model: TrackModel, draft: SideDraft): TicketStep {
  return (
    readSteps(model).find((step) => !isRead(draft, step)) ??
    checkSteps.find((step) => !isChecked(draft, step)) ??
    'done'
  )
}

/** The draft with one thing read. What was read before and after it stays. */
export function withRead(draft: SideDraft, step: ReadStep, read: number | null): SideDraft {
  return step === 'lever' ? { ...draft, toe: read, heel: read } : { ...draft, [step]: read }
}

/** The whole reading; null while something is open. */
export function seenOf(model: TrackModel, draft: SideDraft): SeenReading | null {
  const { toe, heel, toeValue, heelValue, turns } = draft
  if (nextStep(model, draft) !== 'done') return null
  if (toe === null || heel === null || toeValue === null || heelValue === null) return null
  return {
    toe,
    heel,
    turns: model.fineScrew ? turns : null,
    toeValue,
    heelValue,
    soleClearance: true,
    forwardPressure: true,
    brake: true,
    function: true,
  }
}

/** Judges what was read so far as if the rest were right. Forward pressure counts once it was looked at. */
export function judgeSoFar(target: BenchTarget, side: Side, draft: SideDraft) {
  const { track, targets, model } = target
  const seen: SeenReading = {
    toe: draft.toe ?? track.toe,
    heel: draft.heel ?? track.heel,
    turns: draft.turns ?? (model.fineScrew ? (track.turns ?? 0) : null),
    toeValue: draft.toeValue ?? targets[side].toe,
    heelValue: draft.heelValue ?? targets[side].heel,
    soleClearance: true,
    forwardPressure: draft.forwardPressure !== 'out',
    brake: true,
    function: true,
  }
  const verdict = judgeSki(target, side, seen)
  return { verdict, mismatch: mismatchOf(verdict, target, seen) }
}

/** The read step at which a mismatch was read. */
export function stepOf(model: TrackModel, { what, part }: Mismatch): ReadStep | 'forwardPressure' {
  if (what === 'forward_pressure') return 'forwardPressure'
  if (what === 'screw') return 'turns'
  if (what === 'value') return part === 'heel' ? 'heelValue' : 'toeValue'
  if (model.coupled) return 'lever'
  return part === 'heel' ? 'heel' : 'toe'
}

/** What was typed as the thing that this step reads; null when it is no such thing. */
export function parsedRead(model: TrackModel, step: ReadStep, typed: string): number | null {
  if (isMarkStep(step)) return notchOfMark(model, unitOf(step), typed)
  const value = Number(typed.replace(',', '.'))
  if (typed === '' || !Number.isFinite(value)) return null
  return step === 'turns' || (value > 0 && value <= 30) ? value : null
}

/** Whether the marks of a unit can be typed on number keys. */
export const marksAreNumbers = (model: TrackModel, unit: TrackUnit) =>
  model.marks[unit].every((mark) => /^\d+$/.test(mark))

/** Every turn of the screw that people can read, from loosest to tightest. */
export function readableTurnsOf(maxTurns: number): number[] {
  const most = readableTurns(maxTurns, maxTurns)
  const count = Math.round((2 * most) / readableTurn)
  return Array.from({ length: count + 1 }, (_each, index) => -most + index * readableTurn + 0)
}

/** Where the ski's units stand as far as it was read or believed. */
export function standsAt(
  preset: { toe: number; heel: number; turns: number | null } | null,
  { toe, heel, turns }: SideDraft,
): { toe: number; heel: number; turns: number | null } | null {
  const [toeAt, heelAt] = [toe ?? preset?.toe, heel ?? preset?.heel]
  if (toeAt === undefined || heelAt === undefined) return null
  return { toe: toeAt, heel: heelAt, turns: turns ?? preset?.turns ?? null }
}

export const markWord = (model: TrackModel, unit: TrackUnit, notch: number) =>
  markOf(model, unit, notch) ?? '?'
