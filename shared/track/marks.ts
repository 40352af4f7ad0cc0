import type { TrackModel, TrackRail, TrackUnit } from './trackModel'

/** The notches of a rail in order. */
export function notches({ first, last }: TrackRail): number[] {
  return Array.from({ length: last - first + 1 }, (_each, index) => first + index)
}

export function isOnRail(rail: TrackRail, notch: number): boolean {
  return Number.isInteger(notch) && notch >= rail.first && notch <= rail.last
}

/** What is printed at a notch: what people read and write. Off the rail: null. */
export function markOf(model: TrackModel, unit: TrackUnit, notch: number): string | null {
  if (!isOnRail(model[unit], notch)) return null
  return model.marks[unit][notch - model[unit].first] ?? null
}

/** The notch at which a mark is printed; capitals and spaces around do not matter. Not on the rail: null. */
export function notchOfMark(model: TrackModel, unit: TrackUnit, mark: string): number | null {
  const wanted = mark.trim().toUpperCase()
  const index = model.marks[unit].findIndex((each) => each.trim().toUpperCase() === wanted)
  const notch = model[unit].first + index
  return index < 0 || !isOnRail(model[unit], notch) ? null : notch
}
