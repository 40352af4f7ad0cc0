import type { TrackModel } from '#shared/track/trackModel'

const indicatorStep = [
  { upTo: 3, step: 0.25 },
  { above: 3, step: 0.5 },
]
const numbered = (from: number, to: number, step = 1) =>
  Array.from({ length: (to - from) / step + 1 }, (_each, index) => String(from + step * index))

/**
 * The four track models of the demo shop. Every number is invented, within what is common practice for notches
 * (toe 3 to 6 mm, heel 2 to 5 mm, no source); no maker's geometry is copied.
 */
export const demoTrackModels = {
  // adult, two rails
  'ladder-16': {
    id: 'ladder-16',
    soleLengthMm: { min: 254, max: 380 },
    toe: { zeroMm: 126, notchMm: 4, first: 0, last: 16 },
    heel: { zeroMm: 126, notchMm: 4, first: 0, last: 16 },
    coupled: false,
    fineScrew: null,
    gapWindowMm: { min: -2, max: 2 },
    gapTie: 'loose',
    releaseValue: { min: 3, max: 10 },
    centreWindowMm: 3,
    marks: { toe: numbered(0, 16), heel: numbered(0, 16) },
    indicatorStep,
  },
  // adult, two rails and a heel screw
  'ladder-12-s': {
    id: 'ladder-12-s',
    soleLengthMm: { min: 252, max: 372 },
    toe: { zeroMm: 125, notchMm: 5, first: 0, last: 12 },
    heel: { zeroMm: 125, notchMm: 5, first: 0, last: 12 },
    coupled: false,
    fineScrew: { leadMm: 1.5, maxTurns: 1.34 },
    gapWindowMm: { min: -1, max: 1 },
    gapTie: 'loose',
    releaseValue: { min: 3, max: 11 },
    centreWindowMm: 3,
    marks: { toe: numbered(0, 12), heel: numbered(0, 12) },
    indicatorStep,
  },
  // adult, one central lever moves both units
  'twinrow-21': {
    id: 'twinrow-21',
    soleLengthMm: { min: 260, max: 365 },
    toe: { zeroMm: 130, notchMm: 2.5, first: 0, last: 21 },
    heel: { zeroMm: 130, notchMm: 2.5, first: 0, last: 21 },
    coupled: true,
    fineScrew: null,
    gapWindowMm: { min: -2.5, max: 2.5 },
    gapTie: 'loose',
    releaseValue: { min: 3, max: 10 },
    centreWindowMm: 2,
    marks: { toe: numbered(260, 365, 5), heel: numbered(260, 365, 5) },
    indicatorStep,
  },
  // junior, two rails, fine heel
  'pebble-20': {
    id: 'pebble-20',
    soleLengthMm: { min: 195, max: 305 },
    toe: { zeroMm: 96, notchMm: 6, first: 0, last: 9 },
    heel: { zeroMm: 96, notchMm: 3, first: 1, last: 20 },
    coupled: false,
    fineScrew: null,
    gapWindowMm: { min: -1.5, max: 1.5 },
    gapTie: 'loose',
    releaseValue: { min: 0.75, max: 4.5 },
    centreWindowMm: 3.5,
    marks: { toe: [...'ABCDEFGHIJ'], heel: numbered(1, 20) },
    indicatorStep,
  },
} satisfies Record<string, TrackModel>
