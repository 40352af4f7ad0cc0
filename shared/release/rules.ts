import type { Standing } from './selectionTable'

/** Stored with every fitting; raised with any change of a rule or of a number in the selection table. */
export const RULES_VERSION = '1'

export const skierTypes = ['I-', 'I', 'II', 'III', 'III+'] as const
export type SkierType = (typeof skierTypes)[number]

/** Rows that a skier type moves: negative is up, to a lower value. */
export const typeShift: Readonly<Record<SkierType, number>> = { 'I-': -1, I: 0, II: 1, III: 2, 'III+': 3 }

/** Ages that move one row up. */
export const ageRule = { childUpTo: 9, seniorFrom: 50, shift: -1 } as const

/** Up to these masses nobody is set as type III or III+, and nobody gets a value above the computed one. */
export const lightSkier = { kg: 21, lb: 47 } as const

/** What else a renter's data may be at all (masses and heights: bodyLimits). */
export const inputLimits = {
  age: { min: 0, max: 120 },
  soleLengthMm: { min: 150, max: 400 },
} as const

const threeCharts =
  'chart for ski bindings based on DIN 7881 (1996); handbook of a mountain club; rules text printed with a release-value chart'

/** Where each rule comes from and how sure it is, for the panel that explains a value. */
export const ruleStandings = {
  nearer_top: { kind: 'published', source: `${threeCharts}; article of an encyclopaedia` },
  height: {
    kind: 'decision',
    source:
      'height bands of the selection table; 148 cm and less is row H and takes part like any height (one handbook would use the mass alone)',
  },
  whole_units: {
    kind: 'derived',
    source:
      'no source: mass and height are cut down to the whole unit, the sole length is rounded up, each towards the lower value',
  },
  own_unit: {
    kind: 'derived',
    source: 'computed from the bands: converting moves renters at a band edge to another row',
  },
  type: { kind: 'published', source: threeCharts },
  type_I_minus: {
    kind: 'from memory',
    source: 'the type is named in a court decision and on two pages; one row up is from memory',
  },
  type_III_plus: {
    kind: 'from memory',
    source: 'the type is named in a court decision and on two pages; three rows down is from memory',
  },
  age_from_50: { kind: 'published', source: threeCharts },
  age_up_to_9: {
    kind: 'published',
    source: 'ISO 8061:2004, public excerpt; handbook of a mountain club; trade journal, March 2006',
  },
  request: {
    kind: 'published',
    source: 'ISO 8061:2004, public excerpt; abstract of a 2017 study of self-release',
  },
  light_skier: {
    kind: 'decision',
    source:
      'handbook of a mountain club and skier-type texts of the trade, for children; applied to everybody here',
  },
  clamp: { kind: 'derived', source: 'there is no row above A' },
  row_without_values: {
    kind: 'published',
    source: 'technical manual of an alpine binding maker, 2010s, selection table page',
  },
  sideways: {
    kind: 'published',
    source:
      'rules text printed with a release-value chart; never up or down a row: from memory; to the right of the values a head technician decides',
  },
} as const satisfies Record<string, Standing>
