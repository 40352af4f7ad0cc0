import type { TrackModel, TrackUnit } from '#shared/track/trackModel'

/** What of a track is drawn. */
export type RuleTrack = Pick<TrackModel, 'toe' | 'heel' | 'marks' | 'coupled' | 'fineScrew'>
export type RuleSize = 'large' | 'small'

/** One notch on the drawing: where it stands, what is printed there, and whether the drawing has room to print it. */
export interface RuleTick {
  x: number
  notch: number
  mark: string
  printed: boolean
}

/** A drawing in px. Tail on the left, tip on the right; both rails to one scale, the stretch between them shortened. */
export interface RuleGeometry {
  width: number
  height: number
  railTop: number
  railBottom: number
  rails: Record<TrackUnit, { from: number; to: number; ticks: RuleTick[] }>
  middle: number
  cuts: [number, number]
  pin: { width: number; height: number }
  pxPerMm: number
}

const sizes = {
  large: {
    above: 30,
    rail: 38,
    below: 36,
    cut: 22,
    middle: 62,
    end: 15,
    tip: 54,
    pin: { width: 17, height: 26 },
  },
  small: {
    above: 16,
    rail: 16,
    below: 17,
    cut: 12,
    middle: 26,
    end: 8,
    tip: 14,
    pin: { width: 11, height: 13 },
  },
}
const digitWidth = 9
const printGap = 11
const screwRoom = 30

/** Every how many notches a mark is printed, so that marks stand well apart. */
export function printEvery(marks: readonly string[], pitchPx: number): number {
  const widest = Math.max(...marks.map((mark) => mark.length)) * digitWidth
  return [1, 2, 4, 5, 10, 20].find((every) => every * pitchPx >= widest + printGap) ?? marks.length
}

/** The marks that are printed: round numbers where the rail has numbers, otherwise every so many from its start. */
export function printedMarks(marks: readonly string[], every: number): boolean[] {
  const numbers = marks.map(Number)
  const step = (numbers[1] ?? 0) - (numbers[0] ?? 0)
  const round = (number: number) => number % (every * step) === 0
  const byValue = numbers.every(Number.isInteger) && step > 0 && numbers.some(round)
  return byValue ? numbers.map(round) : marks.map((_mark, index) => index % every === 0)
}

/** Lays the rule out in `width` px. */
export function ruleGeometry(track: RuleTrack, width: number, size: RuleSize): RuleGeometry {
  const room = sizes[size]
  const start = size === 'large' ? (track.fineScrew ? screwRoom : 8) : 3
  const lengthMm = (unit: TrackUnit) => (track[unit].last - track[unit].first) * track[unit].notchMm
  const fixed = start + 4 * room.end + 2 * room.cut + room.middle + room.tip
  const pxPerMm = Math.max(0.2, (width - fixed) / (lengthMm('heel') + lengthMm('toe')))

  const heelEnd = start + 2 * room.end + lengthMm('heel') * pxPerMm
  const middle = heelEnd + room.cut + room.middle / 2
  const toeStart = middle + room.middle / 2 + room.cut
  const toeEnd = toeStart + 2 * room.end + lengthMm('toe') * pxPerMm

  const ticks = (unit: TrackUnit): RuleTick[] => {
    const { first, notchMm } = track[unit]
    const marks = track.marks[unit]
    const pitch = notchMm * pxPerMm
    const printed = printedMarks(marks, printEvery(marks, pitch))
    return marks.map((mark, index) => ({
      x: unit === 'heel' ? heelEnd - room.end - index * pitch : toeStart + room.end + index * pitch,
      notch: first + index,
      mark,
      printed: printed[index] ?? false,
    }))
  }

  return {
    width,
    height: room.above + room.rail + room.below,
    railTop: room.above,
    railBottom: room.above + room.rail,
    rails: {
      heel: { from: start, to: heelEnd, ticks: ticks('heel') },
      toe: { from: toeStart, to: toeEnd, ticks: ticks('toe') },
    },
    middle,
    cuts: [heelEnd + room.cut / 2, toeStart - room.cut / 2],
    pin: room.pin,
    pxPerMm,
  }
}

/** Where a notch stands on the drawing, in px from the left; off the rail: null. */
export function notchX(geometry: RuleGeometry, unit: TrackUnit, notch: number): number | null {
  return geometry.rails[unit].ticks.find((tick) => tick.notch === notch)?.x ?? null
}
