import { notches } from './marks'
import type { TrackModel, TrackUnit } from './trackModel'

export type TrackModelProblem =
  | { problem: 'mark_count'; unit: TrackUnit; marks: number; notches: number }
  | { problem: 'mark_repeated'; unit: TrackUnit; mark: string }
  | { problem: 'mark_empty'; unit: TrackUnit }
  | { problem: 'marks_differ_on_coupled_track'; notch: number }
  | { problem: 'sole_range' }
  | { problem: 'scale_range' }
  | { problem: 'centre_window' }
  | { problem: 'indicator_steps' }

function markProblems(model: TrackModel, unit: TrackUnit): TrackModelProblem[] {
  const marks = model.marks[unit]
  const expected = notches(model[unit]).length
  const problems: TrackModelProblem[] = []
  if (marks.length !== expected)
    problems.push({ problem: 'mark_count', unit, marks: marks.length, notches: expected })
  const tidy = marks.map((mark) => mark.trim().toUpperCase())
  const repeated = marks.find((_mark, index) => tidy.indexOf(tidy[index] ?? '') !== index)
  if (repeated !== undefined) problems.push({ problem: 'mark_repeated', unit, mark: repeated })
  if (tidy.includes('')) problems.push({ problem: 'mark_empty', unit })
  return problems
}

/** One mark is read for both units of a coupled track, so a shared notch must carry the same mark on both rails. */
function coupledProblems({ coupled, toe, heel, marks }: TrackModel): TrackModelProblem[] {
  if (!coupled) return []
  const notch = notches(toe).find(
    (each) =>
      each >= heel.first &&
      each <= heel.last &&
      marks.toe[each - toe.first] !== marks.heel[each - heel.first],
  )
  return notch === undefined ? [] : [{ problem: 'marks_differ_on_coupled_track', notch }]
}

/** Whether the steps cover the scale without a hole: an open step above where the last closed one ends. */
function stepsCoverScale({ indicatorStep, releaseValue }: TrackModel): boolean {
  const ends = indicatorStep.flatMap((each) => ('upTo' in each ? [each.upTo] : []))
  const starts = indicatorStep.flatMap((each) => ('above' in each ? [each.above] : []))
  const covered = Math.max(Number.NEGATIVE_INFINITY, ...ends)
  const open = Math.min(Number.POSITIVE_INFINITY, ...starts)
  return covered >= releaseValue.max || open < releaseValue.min || open <= covered
}

/**
 * What keeps a well-formed model from being used at the bench: marks that people could not read or type without
 * doubt, ranges the wrong way round, an indicator scale with a hole. Empty: it can be put up for approval.
 */
export function trackModelProblems(model: TrackModel): TrackModelProblem[] {
  const { soleLengthMm, releaseValue, centreWindowMm } = model
  const problems = [...markProblems(model, 'toe'), ...markProblems(model, 'heel'), ...coupledProblems(model)]
  if (soleLengthMm.min > soleLengthMm.max) problems.push({ problem: 'sole_range' })
  if (releaseValue.min > releaseValue.max) problems.push({ problem: 'scale_range' })
  if (centreWindowMm < 0) problems.push({ problem: 'centre_window' })
  if (!stepsCoverScale(model)) problems.push({ problem: 'indicator_steps' })
  return problems
}
