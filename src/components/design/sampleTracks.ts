import type { RuleTrack } from '../rule/ruleGeometry'

const count = (first: number, last: number, mark: (notch: number) => string) =>
  Array.from({ length: last - first + 1 }, (_each, index) => mark(first + index))

/** Invented tracks of each kind that the rule can draw, for the design page. */
export const ladder: RuleTrack = {
  toe: { zeroMm: 126, notchMm: 4, first: 0, last: 16 },
  heel: { zeroMm: 126, notchMm: 4, first: 0, last: 16 },
  marks: { toe: count(0, 16, String), heel: count(0, 16, String) },
  coupled: false,
  fineScrew: null,
}
export const withScrew: RuleTrack = {
  toe: { zeroMm: 125, notchMm: 5, first: 0, last: 12 },
  heel: { zeroMm: 125, notchMm: 5, first: 0, last: 12 },
  marks: { toe: count(0, 12, String), heel: count(0, 12, String) },
  coupled: false,
  fineScrew: { leadMm: 1.5, maxTurns: 1.34 },
}
const soleMarks = count(0, 21, (notch) => String(260 + notch * 5))
export const oneLever: RuleTrack = {
  toe: { zeroMm: 130, notchMm: 2.5, first: 0, last: 21 },
  heel: { zeroMm: 130, notchMm: 2.5, first: 0, last: 21 },
  marks: { toe: soleMarks, heel: soleMarks },
  coupled: true,
  fineScrew: null,
}
export const junior: RuleTrack = {
  toe: { zeroMm: 96, notchMm: 6, first: 0, last: 9 },
  heel: { zeroMm: 96, notchMm: 3, first: 1, last: 20 },
  marks: { toe: [...'ABCDEFGHIJ'], heel: count(1, 20, String) },
  coupled: false,
  fineScrew: null,
}
