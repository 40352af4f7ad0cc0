import type { Side } from '#shared/schemas/common'
import type { Targets } from '#shared/schemas/fittings'
import type { PartReading, SeenReading } from '#shared/schemas/records'
import { judgeReading, type ReadingVerdict } from '#shared/track/readBack'
import type { TrackModel } from '#shared/track/trackModel'

/** What a fitting asks of both its skis: notches and turns, and the target indicator of each unit. */
export interface BenchTarget {
  model: TrackModel
  track: { toe: number; heel: number; turns: number | null }
  targets: Targets
}

/** A reading that cannot be stored as it is: what differs, in notches, turns or indicator units, and who decides. */
export interface Mismatch {
  what: 'value' | 'mark' | 'screw' | 'forward_pressure'
  part: 'toe' | 'heel' | 'screw' | 'both'
  target: number | null
  read: number | null
  /** `nobody`: it is set again until it is right. */
  decides: 'nobody' | 'head_technician'
}

/** Judges what one ski shows. */
export function judgeSki({ model, track, targets }: BenchTarget, side: Side, seen: SeenReading) {
  const { toe: toeValue, heel: heelValue } = targets[side]
  return judgeReading(
    model,
    track,
    { toeValue, heelValue },
    { ...seen, forwardPressureInWindow: seen.forwardPressure },
  )
}

/** What keeps a reading from being stored; null for one that matches or that the window decides. */
export function mismatchOf(
  verdict: ReadingVerdict,
  { track }: Pick<BenchTarget, 'track'>,
  seen: SeenReading,
): Mismatch | null {
  switch (verdict.verdict) {
    case 'matches':
    case 'window_decides':
      return null
    case 'wrong_value': {
      const { unit, target, read } = verdict
      return { what: 'value', part: unit, target, read, decides: 'nobody' }
    }
    case 'move_again': {
      const { part } = verdict
      if (verdict.because === 'screw_not_read') {
        return { what: 'screw', part, target: track.turns, read: null, decides: 'nobody' }
      }
      return { what: 'forward_pressure', part, target: null, read: null, decides: 'nobody' }
    }
    case 'head_technician': {
      const { part } = verdict
      // Outside its window nothing can be recorded, whoever decides.
      if (!seen.forwardPressure) {
        return { what: 'forward_pressure', part, target: null, read: null, decides: 'nobody' }
      }
      if (part === 'screw')
        return { what: 'screw', part, target: track.turns, read: seen.turns, decides: 'head_technician' }
      const unit = part === 'both' ? (seen.toe === track.toe ? 'heel' : 'toe') : part
      return { what: 'mark', part, target: track[unit], read: seen[unit], decides: 'head_technician' }
    }
  }
}

/** Whether two readings say the same, so that a decision about one is about the other. */
export function sameReading(a: SeenReading, b: PartReading): boolean {
  return (
    a.toe === b.toe &&
    a.heel === b.heel &&
    a.turns === b.turns &&
    a.toeValue === b.toeValue &&
    a.heelValue === b.heelValue &&
    a.forwardPressure === b.forwardPressure
  )
}
