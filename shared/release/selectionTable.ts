/**
 * The selection table of the trade: which skier code (row) belongs to a mass and a height, which release value to
 * a row and a sole length, and which torques a row stands for.
 *
 * No bought standard was read for it. Every row and edition names where its numbers come from and how sure they
 * are; a shop compares them with the standard that it owns before it approves an edition.
 */

export const rowCodes = [
  'A',
  'B',
  'C',
  'D',
  'E',
  'F',
  'G',
  'H',
  'I',
  'J',
  'K',
  'L',
  'M',
  'N',
  'O',
  'P',
] as const
export type RowCode = (typeof rowCodes)[number]

/** Whole units, both ends inside; null is open. */
export type Band = { readonly min: number | null; readonly max: number | null }

export type Standing = {
  readonly kind:
    'published' | 'inferred' | 'derived' | 'common practice' | 'from memory' | 'decision' | 'invented'
  readonly source: string
}

export type SelectionRow = {
  readonly code: RowCode
  readonly massKg: Band | null
  readonly massLb: Band | null
  readonly heightCm: Band | null
  /** Height in whole inches: 5'2" is 62. */
  readonly heightIn: Band | null
  readonly twistNm: number
  readonly forwardLeanNm: number
  readonly bandsFrom: Standing
  readonly torquesFrom: Standing
}

const tablePage: Standing = {
  kind: 'published',
  source: 'technical manual of an alpine binding maker, 2010s, selection table page',
}
const torquesOfRow: Standing = {
  kind: 'inferred',
  source: `${tablePage.source}; which pair of torques belongs to which row is inferred from its layout`,
}

type Pair = readonly [min: number | null, max: number | null]
const band = (pair: Pair | null): Band | null => (pair ? { min: pair[0], max: pair[1] } : null)
const ft = (feet: number, inches: number) => 12 * feet + inches

function row(
  code: RowCode,
  torquesNm: readonly [twist: number, forwardLean: number],
  massKg: Pair | null = null,
  massLb: Pair | null = null,
  heightCm: Pair | null = null,
  heightIn: Pair | null = null,
): SelectionRow {
  return {
    code,
    massKg: band(massKg),
    massLb: band(massLb),
    heightCm: band(heightCm),
    heightIn: band(heightIn),
    twistNm: torquesNm[0],
    forwardLeanNm: torquesNm[1],
    bandsFrom: tablePage,
    torquesFrom: torquesOfRow,
  }
}

/** Rows from the top (A, lowest torque) to the bottom (P). N, O and P are reached by shifts only. */
export const selectionRows: readonly SelectionRow[] = [
  row('A', [5, 18], [10, 13], [22, 29]),
  row('B', [8, 29], [14, 17], [30, 38]),
  row('C', [11, 40], [18, 21], [39, 47]),
  row('D', [14, 52], [22, 25], [48, 56]),
  row('E', [17, 64], [26, 30], [57, 66]),
  row('F', [20, 75], [31, 35], [67, 78]),
  row('G', [23, 87], [36, 41], [79, 91]),
  row('H', [27, 102], [42, 48], [92, 107], [null, 148], [null, ft(4, 10)]),
  row('I', [31, 120], [49, 57], [108, 125], [149, 157], [ft(4, 11), ft(5, 1)]),
  row('J', [37, 141], [58, 66], [126, 147], [158, 166], [ft(5, 2), ft(5, 5)]),
  row('K', [43, 165], [67, 78], [148, 174], [167, 178], [ft(5, 6), ft(5, 10)]),
  row('L', [50, 194], [79, 94], [175, 209], [179, 194], [ft(5, 11), ft(6, 4)]),
  row('M', [58, 229], [95, null], [210, null], [195, null], [ft(6, 5), null]),
  row('N', [67, 271]),
  row('O', [78, 320]),
  row('P', [91, 380]),
]

export const editionNames = ['eight-column', 'six-column'] as const
export type EditionName = (typeof editionNames)[number]

export type Edition = {
  readonly name: EditionName
  /** Sole lengths in whole mm, one band per column. */
  readonly columns: readonly Band[]
  /** Indicator values of rows A to O, one per column; null is an empty cell. Row P has torques only. */
  readonly values: Readonly<Record<RowCode, readonly (number | null)[]>>
  readonly standing: Standing
  /** Cells that stand on something else than the edition does. */
  readonly exceptions: readonly { row: RowCode; column: number; standing: Standing }[]
}

const noValues = (columns: number) => Array<null>(columns).fill(null)

const oneFurtherSource: Standing = {
  kind: 'published',
  source: 'one further printed chart only; medium confidence',
}

export const editions: Readonly<Record<EditionName, Edition>> = {
  'eight-column': {
    name: 'eight-column',
    columns: [
      { min: null, max: 230 },
      { min: 231, max: 250 },
      { min: 251, max: 270 },
      { min: 271, max: 290 },
      { min: 291, max: 310 },
      { min: 311, max: 330 },
      { min: 331, max: 350 },
      { min: 351, max: null },
    ],
    values: {
      A: [0.75, 0.75, 0.75, null, null, null, null, null],
      B: [1, 0.75, 0.75, 0.75, null, null, null, null],
      C: [1.5, 1.25, 1.25, 1, null, null, null, null],
      D: [2, 1.75, 1.5, 1.5, 1.25, null, null, null],
      E: [2.5, 2.25, 2, 1.75, 1.5, 1.5, null, null],
      F: [3, 2.75, 2.5, 2.25, 2, 1.75, 1.75, null],
      G: [null, 3.5, 3, 2.75, 2.5, 2.25, 2, null],
      H: [null, null, 3.5, 3, 3, 2.75, 2.5, null],
      I: [null, null, 4.5, 4, 3.5, 3.5, 3, null],
      J: [null, null, 5.5, 5, 4.5, 4, 3.5, 3],
      K: [null, null, 6.5, 6, 5.5, 5, 4.5, 4],
      L: [null, null, 7.5, 7, 6.5, 6, 5.5, 5],
      M: [null, null, null, 8.5, 8, 7, 6.5, 6],
      N: [null, null, null, 10, 9.5, 8.5, 8, 7.5],
      O: [null, null, null, 11.5, 11, 10, 9.5, 9],
      P: noValues(8),
    },
    standing: tablePage,
    exceptions: [
      { row: 'A', column: 2, standing: oneFurtherSource },
      { row: 'B', column: 3, standing: oneFurtherSource },
    ],
  },
  'six-column': {
    name: 'six-column',
    columns: [
      { min: null, max: 250 },
      { min: 251, max: 270 },
      { min: 271, max: 290 },
      { min: 291, max: 310 },
      { min: 311, max: 330 },
      { min: 331, max: null },
    ],
    values: {
      A: [0.75, 0.75, null, null, null, null],
      B: [1, 1, 0.75, null, null, null],
      C: [1.5, 1.25, 1, null, null, null],
      D: [1.75, 1.5, 1.5, 1.25, null, null],
      E: [2.25, 2, 1.75, 1.5, 1.5, null],
      F: [2.75, 2.5, 2.25, 2, 1.75, 1.75],
      G: [3.5, 3, 2.75, 2.5, 2.25, 2],
      H: [null, 3.5, 3, 3, 2.75, 2.5],
      I: [null, 4.5, 4, 3.5, 3.5, 3],
      J: [null, 5.5, 5, 4.5, 4, 3.5],
      K: [null, 6.5, 6, 5.5, 5, 4.5],
      L: [null, 7.5, 7, 6.5, 6, 5.5],
      M: [null, null, 8.5, 8, 7, 6.5],
      N: [null, null, 10, 9.5, 8.5, 8],
      O: [null, null, 11.5, 11, 10, 9.5],
      P: noValues(6),
    },
    standing: {
      kind: 'from memory',
      source: 'an earlier edition of the table; rows A to D partly seen in a travel magazine',
    },
    exceptions: [],
  },
}
