import { decimalPlaces, nearestDouble, scaledTo } from '#shared/units/exact'
import { notches } from './marks'
import type { TrackModel, TrackRail } from './trackModel'

/** A pair of notches; lengths in whole parts of a mm. */
export type Position = { toe: number; heel: number; centre: bigint; gap: bigint; offCentre: bigint }

export type ExactTrack = {
  partsPerMm: bigint
  toes: { notch: number; at: bigint; centre: bigint; offCentre: bigint }[]
  /** Heels that may stand with a toe notch. */
  heelsFor: (toe: number) => { notch: number; at: bigint }[]
  soleLength: bigint
  gapMin: bigint
  gapMax: bigint
  centreWindow: bigint
  prefersSpace: boolean
  /** Turns from a turn of the screw to the one that closes a gap; null without a screw. */
  turnsFor: (gap: bigint, fromTurns: number) => number | null
}

const magnitude = (value: bigint) => (value < 0n ? -value : value)

/** A length in mm as the nearest number of its exact value. */
export function millimetres(parts: bigint, partsPerMm: bigint): number {
  return nearestDouble(parts, partsPerMm)
}

/**
 * A model, a sole and an offset in whole parts of a millimetre, fine enough for every decimal among them and for
 * half of the sole.
 */
export function exactTrack(model: TrackModel, soleLengthMm: number, offsetMm: number): ExactTrack {
  const { toe, heel, fineScrew, gapWindowMm, centreWindowMm } = model
  const lengths = [toe.zeroMm, toe.notchMm, heel.zeroMm, heel.notchMm, centreWindowMm, offsetMm]
  const gaps = fineScrew ? [fineScrew.leadMm] : [gapWindowMm.min, gapWindowMm.max]
  const places = Math.max(...[...lengths, ...gaps].map(decimalPlaces))
  const parts = (lengthMm: number) => 2n * scaledTo(lengthMm, places)
  const partsPerMm = 2n * 10n ** BigInt(places)

  const standings = (rail: TrackRail) => {
    const [zero, pitch] = [parts(rail.zeroMm), parts(rail.notchMm)]
    return notches(rail).map((notch) => ({ notch, at: zero + BigInt(notch) * pitch }))
  }
  const soleLength = parts(soleLengthMm)
  const [half, offset] = [soleLength / 2n, parts(offsetMm)]
  const toes = standings(toe).map(({ notch, at }) => {
    const centre = at - half
    return { notch, at, centre, offCentre: magnitude(centre - offset) }
  })
  const heels = standings(heel)
  const screw = fineScrew ? exactScrew(fineScrew, parts(fineScrew.leadMm)) : null
  return {
    partsPerMm,
    toes,
    heelsFor: (notch) => (model.coupled ? heels.filter((each) => each.notch === notch) : heels),
    soleLength,
    gapMin: screw ? -screw.closes : parts(gapWindowMm.min),
    gapMax: screw ? screw.closes : parts(gapWindowMm.max),
    centreWindow: parts(centreWindowMm),
    prefersSpace: model.gapTie === 'loose',
    turnsFor: screw ? screw.turnsFor : () => null,
  }
}

/** The widest gap that the screw closes (cut to whole parts, as gaps are), and its turns as exact fractions. */
function exactScrew({ maxTurns }: { maxTurns: number }, lead: bigint) {
  const places = decimalPlaces(maxTurns)
  return {
    closes: (lead * scaledTo(maxTurns, places)) / 10n ** BigInt(places),
    turnsFor(gap: bigint, fromTurns: number): number {
      const fromPlaces = decimalPlaces(fromTurns)
      const scale = 10n ** BigInt(fromPlaces)
      return nearestDouble(gap * scale - lead * scaledTo(fromTurns, fromPlaces), lead * scale)
    },
  }
}

/** Whether a position goes before another that is equally far from the centre. */
function goesBefore(a: Position, b: Position, prefersSpace: boolean): boolean {
  const [gapA, gapB] = [magnitude(a.gap), magnitude(b.gap)]
  if (gapA !== gapB) return gapA < gapB
  if (a.gap !== b.gap) return prefersSpace ? a.gap > b.gap : a.gap < b.gap
  return a.toe !== b.toe ? a.toe < b.toe : a.heel < b.heel
}

/** The best of the notch pairs whose gap lies in the window, or null. Toes are tried from the centre outwards. */
export function bestPosition(track: ExactTrack): Position | null {
  const { toes, heelsFor, soleLength, gapMin, gapMax, prefersSpace } = track
  const outwards = toes.sort((a, b) => (a.offCentre < b.offCentre ? -1 : a.offCentre > b.offCentre ? 1 : 0))
  let best: Position | null = null
  for (const toe of outwards) {
    if (best && toe.offCentre > best.offCentre) break
    for (const heel of heelsFor(toe.notch)) {
      const gap = toe.at + heel.at - soleLength
      if (gap < gapMin || gap > gapMax) continue
      const { notch, centre, offCentre } = toe
      const position = { toe: notch, heel: heel.notch, centre, gap, offCentre }
      if (!best || goesBefore(position, best, prefersSpace)) best = position
    }
  }
  return best
}
