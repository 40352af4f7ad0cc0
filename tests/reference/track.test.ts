import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { answerTrack } from '#shared/calc/answers'
import type { TrackModel } from '#shared/track/trackModel'
import { trackPlan } from '#shared/track/trackPlan'
import { demoTrackModels } from '../../server/db/seed/trackModels'
import examples from './fixtures/calc-track.json'
import vectors from './fixtures/track-vectors.json'

const models: Record<string, TrackModel> = demoTrackModels
const modelOf = (id: string): TrackModel => {
  const model = models[id]
  if (!model) throw new Error(`no model ${id}`)
  return model
}

type Candidate = { toe: number; heel: number; centre: number; gap: number; off: number }

/**
 * Every pair of notches, one after another, in whole hundredths of a millimetre (half a sole of whole mm is whole
 * too). Written for this test from the words of the contract; shares nothing with the program.
 */
function bruteForce(model: TrackModel, sole: number, offset = 0) {
  if (sole < model.soleLengthMm.min) return { ok: false, reason: 'sole_shorter_than_track' }
  if (sole > model.soleLengthMm.max) return { ok: false, reason: 'sole_longer_than_track' }
  const h = (mm: number) => Math.round(mm * 100)
  const all: Candidate[] = []
  for (let toe = model.toe.first; toe <= model.toe.last; toe++) {
    for (let heel = model.heel.first; heel <= model.heel.last; heel++) {
      if (model.coupled && toe !== heel) continue
      const t = h(model.toe.zeroMm) + toe * h(model.toe.notchMm)
      const gap = t + h(model.heel.zeroMm) + heel * h(model.heel.notchMm) - h(sole)
      const centre = t - h(sole) / 2
      const screw = model.fineScrew
      const fits = screw
        ? Math.abs(gap) * 100 <= h(screw.leadMm) * h(screw.maxTurns)
        : gap >= h(model.gapWindowMm.min) && gap <= h(model.gapWindowMm.max)
      if (fits) all.push({ toe, heel, centre, gap, off: Math.abs(centre - h(offset)) })
    }
  }
  const wrongSide = ({ gap }: Candidate) => ((model.gapTie === 'loose' ? gap >= 0 : gap <= 0) ? 0 : 1)
  const order = (a: Candidate, b: Candidate) =>
    a.off - b.off ||
    Math.abs(a.gap) - Math.abs(b.gap) ||
    wrongSide(a) - wrongSide(b) ||
    a.toe - b.toe ||
    a.heel - b.heel
  const [best] = all.sort(order)
  if (!best) return { ok: false, reason: 'no_position_in_window' }
  const { toe, heel, centre, gap, off } = best
  const position = { toe, heel, centreShiftMm: centre / 100, gapMm: gap / 100 }
  if (off > h(model.centreWindowMm)) return { ok: false, reason: 'off_centre', nearest: position }
  return {
    ok: true,
    ...position,
    turns: model.fineScrew ? gap / h(model.fineScrew.leadMm) : null,
    moves: null,
  }
}

describe('positions on the demo tracks', () => {
  // see the fixture: given with the invented models
  for (const { model, soleLengthMm, ...expected } of vectors.vectors) {
    it(`${model}, sole ${soleLengthMm} mm: ${expected.reason ?? `toe ${expected.toe}, heel ${expected.heel}`}`, () => {
      expect(trackPlan(modelOf(model), soleLengthMm)).toMatchObject(expected)
    })
  }

  for (const [id, model] of Object.entries(models)) {
    it(`${id}: every whole sole length stands where a search through all notch pairs puts it`, () => {
      for (let sole = 150; sole <= 400; sole++) {
        for (const offsetMm of [0, -3.5, 2, 10, -40]) {
          expect({ sole, plan: trackPlan(model, sole, { offsetMm }) }).toEqual({
            sole,
            plan: bruteForce(model, sole, offsetMm),
          })
        }
      }
    })
  }
})

describe('worked lines of the calculation', () => {
  // computed with an independent program, see the fixture
  examples.lines.forEach(({ in: given, out }, index) => {
    it(`line ${index + 1}: ${given.model}, sole ${given.soleLengthMm} mm`, () => {
      expect(answerTrack({ ...given, model: modelOf(given.model) })).toEqual(out)
    })
  })
})

describe('any track', () => {
  const tenths = (min: number, max: number) =>
    fc.integer({ min: min * 10, max: max * 10 }).map((value) => value / 10)
  const rail = fc
    .record({
      zeroMm: tenths(60, 140),
      notchMm: tenths(1, 7),
      first: fc.integer({ min: -3, max: 4 }),
      length: fc.integer({ min: 0, max: 25 }),
    })
    .map(({ length, ...each }) => ({ ...each, last: each.first + length }))
  const anyModel: fc.Arbitrary<TrackModel> = fc
    .record({
      toe: rail,
      heel: rail,
      coupled: fc.boolean(),
      fineScrew: fc.option(fc.record({ leadMm: tenths(1, 2), maxTurns: tenths(0, 3) })),
      window: fc.tuple(tenths(-4, 4), tenths(-4, 4)),
      gapTie: fc.constantFrom('loose' as const, 'tight' as const),
      centreWindowMm: tenths(0, 8),
    })
    .map(({ window, ...each }) => ({
      ...each,
      id: 'any',
      soleLengthMm: { min: 160, max: 390 },
      gapWindowMm: { min: Math.min(...window), max: Math.max(...window) },
      releaseValue: { min: 3, max: 10 },
      marks: { toe: [], heel: [] },
      indicatorStep: [],
    }))

  it('stands where a search through all notch pairs puts it', () => {
    const reached = new Set<string>()
    fc.assert(
      fc.property(anyModel, fc.integer({ min: 150, max: 400 }), tenths(-12, 12), (model, sole, offsetMm) => {
        const plan = trackPlan(model, sole, { offsetMm })
        expect(plan).toEqual(bruteForce(model, sole, offsetMm))
        reached.add(plan.ok ? 'ok' : plan.reason)
      }),
      { numRuns: 3000 },
    )
    expect([...reached].sort()).toEqual(
      [
        'no_position_in_window',
        'off_centre',
        'ok',
        'sole_longer_than_track',
        'sole_shorter_than_track',
      ].sort(),
    )
  })
})
