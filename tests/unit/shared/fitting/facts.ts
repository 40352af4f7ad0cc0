import type { DecisionFact, FittingFacts, SkiFact, SkiPairFact } from '#shared/schemas/fittingFacts'
import type { TrackModel } from '#shared/track/trackModel'

/** A fitting that nothing stops, all invented; a test changes what it is about. */

export const ladder: TrackModel = {
  id: 'ladder',
  soleLengthMm: { min: 254, max: 380 },
  toe: { zeroMm: 126, notchMm: 4, first: 0, last: 16 },
  heel: { zeroMm: 126, notchMm: 4, first: 0, last: 16 },
  coupled: false,
  fineScrew: null,
  gapWindowMm: { min: -2, max: 2 },
  gapTie: 'loose',
  releaseValue: { min: 3, max: 10 },
  centreWindowMm: 3,
  marks: {
    toe: Array.from({ length: 17 }, (_each, index) => String(index)),
    heel: Array.from({ length: 17 }, (_each, index) => String(index)),
  },
  indicatorStep: [
    { upTo: 3, step: 0.25 },
    { above: 3, step: 0.5 },
  ],
}

export const ids = {
  rental: 'b0000000-0000-4000-8000-000000000001',
  pair: 'b0000000-0000-4000-8000-000000000002',
  boots: 'b0000000-0000-4000-8000-000000000003',
  site: 'b0000000-0000-4000-8000-000000000004',
  other: 'b0000000-0000-4000-8000-000000000005',
}

const ski = (label: string): SkiFact => ({
  id: ids.other,
  label,
  preset: { toe: 5, heel: 5, turns: null },
  presetReadAt: '2027-01-10T08:00:00.000Z',
  presetVersion: 1,
  toeCorrection: 0,
  heelCorrection: 0,
})

export const shopBoots: Extract<NonNullable<FittingFacts['boots']>, { kind: 'shop' }> = {
  kind: 'shop',
  id: ids.boots,
  code: 'B288',
  model: 'Tarn 90',
  state: 'racked',
  siteId: ids.site,
  rackPlace: 'K 4',
  soleLengthMm: 305,
  soleType: 'ISO 5355 A',
  mondo: 265,
}

export const ownBoots: Extract<NonNullable<FittingFacts['boots']>, { kind: 'own' }> = {
  kind: 'own',
  id: ids.boots,
  description: 'red',
  soleLengthMm: 305,
  soleType: 'ISO 5355 A',
  wear: 'sound',
  judgedBy: 'Petra Wolle',
  judgedById: ids.other,
  judgedByHead: false,
  secondLookBy: 'Arvid Lenk',
}

export function pairWith(
  changes: Partial<SkiPairFact> = {},
  binding: Partial<SkiPairFact['binding']> = {},
): SkiPairFact {
  return {
    id: ids.pair,
    code: 'S417',
    state: 'racked',
    siteId: ids.site,
    rackPlace: 'A 12',
    lengthCm: 163,
    model: 'Fellwind 74',
    waistMm: 74,
    offsetMm: 0,
    binding: {
      id: ids.other,
      name: 'ladder',
      track: ladder,
      accepts: ['ISO 5355 A', 'ISO 23223'],
      refuses: ['ISO 9523'],
      brakeMm: 85,
      approved: true,
      blockedReason: null,
      manualDocument: 'manual',
      manualEdition: '4',
      manualPage: '12',
      windowNote: 'between the edges',
      hasWindowPicture: true,
      ...binding,
    },
    skis: { left: ski('S417L'), right: ski('S417R') },
    ...changes,
  }
}

export function factsWith(changes: Partial<FittingFacts> = {}): FittingFacts {
  return {
    rental: {
      id: ids.rental,
      number: 51,
      state: 'open',
      siteId: ids.site,
      startsOn: '2027-01-15',
      endsOn: '2027-01-17',
      ownBoots: false,
    },
    inputs: inputsWith(),
    boots: shopBoots,
    bootsHolder: null,
    skiPair: pairWith(),
    skiPairHolder: null,
    decisions: [],
    openFitting: null,
    edition: 'eight-column',
    approved: false,
    near: { massKg: 2, heightCm: 3 },
    ...changes,
  }
}

export function inputsWith(
  changes: Partial<NonNullable<FittingFacts['inputs']>> = {},
): NonNullable<FittingFacts['inputs']> {
  return {
    id: ids.other,
    mass: { unit: 'kg', value: 72 },
    massSource: 'measured',
    massBy: 'Petra Wolle',
    height: { unit: 'cm', value: 172 },
    heightSource: 'measured',
    heightBy: 'Petra Wolle',
    age: 34,
    skierType: 'II',
    request: 0,
    requestSignedName: null,
    at: '2027-01-15T08:00:00.000Z',
    ...changes,
  }
}

export const decided = (kind: DecisionFact['kind'], changes: Partial<DecisionFact> = {}): DecisionFact => ({
  id: ids.other,
  kind,
  skiPairId: ids.pair,
  bootsId: ids.boots,
  rows: null,
  value: null,
  reason: 'looked at together',
  by: 'Ragna Holm',
  secondBy: null,
  at: '2027-01-15T08:30:00.000Z',
  ...changes,
})
