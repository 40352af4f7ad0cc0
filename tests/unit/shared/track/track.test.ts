import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { answerTrack } from '#shared/calc/answers'
import { markOf, notches, notchOfMark } from '#shared/track/marks'
import { movesBetween, notchDistance } from '#shared/track/moves'
import { solesByPosition } from '#shared/track/solesByPosition'
import { targetIndicator } from '#shared/track/targetIndicator'
import { trackModelSchema, type TrackModel } from '#shared/track/trackModel'
import { trackModelProblems } from '#shared/track/trackModelProblems'
import { solesAt, soleRangeAt, trackPlan } from '#shared/track/trackPlan'
import { demoTrackModels } from '../../../../server/db/seed/trackModels'

const models: TrackModel[] = Object.values(demoTrackModels)
const ladder: TrackModel = demoTrackModels['ladder-16']
const screw: TrackModel = demoTrackModels['ladder-12-s']
const coupled: TrackModel = demoTrackModels['twinrow-21']
const junior: TrackModel = demoTrackModels['pebble-20']

describe('moves', () => {
  const preset = (model: TrackModel) =>
    fc.record({
      toe: fc.integer({ min: model.toe.first, max: model.toe.last }),
      heel: fc.integer({ min: model.heel.first, max: model.heel.last }),
    })

  it('lead from the preset to the target, and the moves back undo them', () => {
    for (const model of models) {
      fc.assert(
        fc.property(preset(model), preset(model), (from, to) => {
          const there = movesBetween(from, to)
          const back = movesBetween(to, from)
          expect({ toe: from.toe + there.toe, heel: from.heel + there.heel }).toEqual(to)
          expect([there.toe + back.toe, there.heel + back.heel]).toEqual([0, 0])
          expect(notchDistance(from, to)).toBe(notchDistance(to, from))
        }),
      )
    }
  })

  it('of the plan end at the plan, from wherever the units stand', () => {
    for (const model of models) {
      fc.assert(
        fc.property(preset(model), fc.integer({ min: 200, max: 370 }), (current, sole) => {
          const plan = trackPlan(model, sole, { current })
          if (!plan.ok) return
          expect(current.toe + (plan.moves?.toe ?? 0)).toBe(plan.toe)
          expect(current.heel + (plan.moves?.heel ?? 0)).toBe(plan.heel)
        }),
      )
    }
  })

  it('of the screw undo as well, in quarters of a turn', () => {
    fc.assert(
      fc.property(fc.integer({ min: -5, max: 5 }), fc.integer({ min: -5, max: 5 }), (a, b) => {
        const [from, to] = [
          { toe: 1, heel: 1, turns: a / 4 },
          { toe: 1, heel: 1, turns: b / 4 },
        ]
        expect((movesBetween(from, to).turns ?? NaN) + (movesBetween(to, from).turns ?? NaN)).toBe(0)
        expect(from.turns + (movesBetween(from, to).turns ?? NaN)).toBe(to.turns)
      }),
    )
  })

  it('of a screw whose turn is unknown are unknown', () => {
    expect(movesBetween({ toe: 1, heel: 2 }, { toe: 3, heel: 1, turns: 0.5 })).toEqual({
      toe: 2,
      heel: -1,
      turns: null,
    })
    expect(trackPlan(screw, 312, { current: { toe: 5, heel: 5, turns: null } })).toMatchObject({
      moves: { turns: null },
    })
  })

  it('are not counted for a ski whose preset is unknown', () => {
    expect(notchDistance(null, { toe: 3, heel: 3 })).toBeNull()
    expect(notchDistance({ toe: 1, heel: 6 }, { toe: 3, heel: 3 })).toBe(5)
  })
})

describe('marks', () => {
  it('are what people read: a letter, a number, a sole length', () => {
    expect([markOf(junior, 'toe', 0), markOf(junior, 'heel', 1), markOf(coupled, 'toe', 9)]).toEqual([
      'A',
      '1',
      '305',
    ])
    expect(notchOfMark(junior, 'toe', ' j ')).toBe(9)
  })

  it('and notches name each other on every rail', () => {
    for (const model of models) {
      for (const unit of ['toe', 'heel'] as const) {
        for (const notch of notches(model[unit])) {
          expect(notchOfMark(model, unit, markOf(model, unit, notch) ?? '')).toBe(notch)
        }
        expect(markOf(model, unit, model[unit].last + 1)).toBeNull()
        expect(markOf(model, unit, model[unit].first - 1)).toBeNull()
      }
    }
    expect(notchOfMark(ladder, 'heel', '17')).toBeNull()
  })
})

describe('a preset', () => {
  it('is the plan for the sole lengths of its range and for no other', () => {
    for (const model of models) {
      const soles = Array.from({ length: 251 }, (_each, index) => 150 + index)
      for (const sole of soles) {
        const plan = trackPlan(model, sole)
        if (!plan.ok) continue
        const range = soleRangeAt(model, plan.toe, plan.heel)
        const same = soles.filter((each) => {
          const other = trackPlan(model, each)
          return other.ok && other.toe === plan.toe && other.heel === plan.heel
        })
        expect(range).toEqual({ minMm: same[0], maxMm: same.at(-1) })
        // no other preset lies in between
        expect(same.length).toBe((range?.maxMm ?? 0) - (range?.minMm ?? 0) + 1)
      }
    }
  })

  it('is the same where all ranges are made in one pass', () => {
    for (const model of models) {
      const ranges = solesByPosition(model)
      for (const [position, range] of ranges) {
        const [toe = 0, heel = 0] = position.split(' ').map(Number)
        expect(range).toEqual(soleRangeAt(model, toe, heel))
      }
    }
  })

  it('to which no sole leads has no range', () => {
    expect(soleRangeAt(ladder, 0, 16)).toBeNull()
    expect(solesAt(ladder, 7, 6)).toContain(305)
  })
})

describe('the target indicator', () => {
  it('is the release value plus the correction of the unit, rounded down to what the scale shows', () => {
    const shown = (value: number, correction = 0) => targetIndicator(ladder, value, correction).value
    expect([shown(5.5), shown(5.5, 0.25), shown(5.5, -0.25), shown(5.5, 0.5)]).toEqual([5.5, 5.5, 5, 6])
    expect([shown(3), shown(3, 0.25), shown(3.4, 0.05)]).toEqual([3, 3, 3])
    expect([0.75, 1.25, 2.75].map((value) => targetIndicator(junior, value).value)).toEqual([
      0.75, 1.25, 2.75,
    ])
    expect(targetIndicator(junior, 2.5, 0.3).value).toBe(2.75)
    expect(targetIndicator(junior, 0.7, 0.1).value).toBe(0.75)
  })

  it('outside the scale of the unit is refused with the value that it would be', () => {
    expect(targetIndicator(ladder, 3, -0.25)).toEqual({
      ok: false,
      reason: 'below_scale',
      value: 2.75,
      scale: { min: 3, max: 10 },
    })
    expect(targetIndicator(ladder, 10, 0.5)).toMatchObject({ ok: false, reason: 'above_scale', value: 10.5 })
    expect(targetIndicator(ladder, 10, 0.25)).toEqual({ ok: true, value: 10 })
    expect(targetIndicator(junior, 4.5)).toEqual({ ok: true, value: 4.5 })
  })

  it('is never above release value plus correction', () => {
    const quarters = (min: number, max: number) =>
      fc.integer({ min: min * 4, max: max * 4 }).map((each) => each / 4)
    fc.assert(
      fc.property(
        fc.constantFrom(...models),
        quarters(0, 12),
        quarters(-2, 2),
        (model, value, correction) => {
          const target = targetIndicator(model, value, correction)
          expect(target.value).toBeLessThanOrEqual(value + correction)
          expect(target.value).toBeGreaterThan(value + correction - 0.5)
        },
      ),
    )
  })
})

describe('a track model', () => {
  it('of the demo shop is well formed and has no problem', () => {
    for (const model of models) {
      expect(trackModelSchema.parse(model)).toEqual(model)
      expect(trackModelProblems(model)).toEqual([])
    }
  })

  it('with marks that people could not read without doubt is not put up for approval', () => {
    const marks = (toe: string[], heel = ladder.marks.heel) =>
      trackModelProblems({ ...ladder, marks: { toe, heel } })
    expect(marks(ladder.marks.toe.slice(1))).toEqual([
      { problem: 'mark_count', unit: 'toe', marks: 16, notches: 17 },
    ])
    expect(marks(['a', 'A', ...ladder.marks.toe.slice(2)])).toEqual([
      { problem: 'mark_repeated', unit: 'toe', mark: 'A' },
    ])
    expect(marks([' ', ...ladder.marks.toe.slice(1)])).toEqual([{ problem: 'mark_empty', unit: 'toe' }])
    const shifted = coupled.marks.heel.map((mark) => `${mark}x`)
    expect(trackModelProblems({ ...coupled, marks: { ...coupled.marks, heel: shifted } })).toEqual([
      { problem: 'marks_differ_on_coupled_track', notch: 0 },
    ])
  })

  it('with ranges the wrong way round or a scale with a hole is not put up for approval', () => {
    const problems = (change: Partial<TrackModel>) =>
      trackModelProblems({ ...ladder, ...change }).map((each) => each.problem)
    expect(problems({ soleLengthMm: { min: 300, max: 200 } })).toEqual(['sole_range'])
    expect(problems({ centreWindowMm: -1 })).toEqual(['centre_window'])
    expect(problems({ indicatorStep: [] })).toEqual(['indicator_steps'])
    expect(
      problems({
        indicatorStep: [
          { upTo: 5, step: 0.5 },
          { above: 6, step: 1 },
        ],
      }),
    ).toEqual(['indicator_steps'])
    expect(problems({ indicatorStep: [{ above: 0, step: 0.5 }] })).toEqual([])
  })
})

describe('a track calculation that is not well formed', () => {
  const good = { model: ladder, soleLengthMm: 305 }
  const bad: [string, unknown, (string | number)[]][] = [
    ['an unknown key', { ...good, sole: 3 }, ['sole']],
    ['an unknown key in the model', { ...good, model: { ...ladder, for: 'adult' } }, ['model', 'for']],
    ['a missing key in the model', { ...good, model: { ...ladder, marks: undefined } }, ['model', 'marks']],
    ['a model by its name', { ...good, model: 'ladder-16' }, ['model']],
    ['null for an optional key', { ...good, offsetMm: null }, ['offsetMm']],
    [
      'null for unknown turns',
      { ...good, model: screw, current: { toe: 1, heel: 1, turns: null } },
      ['current', 'turns'],
    ],
    ['half a millimetre of sole', { ...good, soleLengthMm: 305.5 }, ['soleLengthMm']],
    ['a sole of 401 mm', { ...good, soleLengthMm: 401 }, ['soleLengthMm']],
    ['an offset of 101 mm', { ...good, offsetMm: -101 }, ['offsetMm']],
    ['a toe off its rail', { ...good, current: { toe: 17, heel: 1 } }, ['current', 'toe']],
    ['a heel off its rail', { ...good, model: junior, current: { toe: 1, heel: 0 } }, ['current', 'heel']],
    ['turns without a screw', { ...good, current: { toe: 1, heel: 1, turns: 0 } }, ['current', 'turns']],
    [
      'turns beyond the travel',
      { ...good, model: screw, current: { toe: 1, heel: 1, turns: 1.35 } },
      ['current', 'turns'],
    ],
    ['201 notches', { ...good, model: { ...ladder, toe: { ...ladder.toe, last: 200 } } }, ['model', 'toe']],
    [
      'a rail backwards',
      { ...good, model: { ...ladder, heel: { ...ladder.heel, first: 17 } } },
      ['model', 'heel'],
    ],
    [
      'a pitch of 0',
      { ...good, model: { ...ladder, toe: { ...ladder.toe, notchMm: 0 } } },
      ['model', 'toe', 'notchMm'],
    ],
    [
      'a window backwards',
      { ...good, model: { ...ladder, gapWindowMm: { min: 2, max: 1 } } },
      ['model', 'gapWindowMm'],
    ],
  ]
  for (const [what, input, path] of bad) {
    it(`is refused: ${what}`, () => {
      expect(answerTrack(input)).toMatchObject({ ok: false, reason: 'invalid_input', path })
    })
  }

  it('is refused in the same way when it does not come through JSON', () => {
    expect(trackPlan(ladder, Number.NaN)).toMatchObject({ reason: 'invalid_input', path: ['soleLengthMm'] })
    expect(trackPlan(ladder, 305, { offsetMm: Number.NaN })).toMatchObject({
      reason: 'invalid_input',
      path: ['offsetMm'],
    })
  })
})

describe('numbers of any size', () => {
  it('give an answer and never infinity', () => {
    const huge: TrackModel = {
      ...ladder,
      toe: { zeroMm: 1.7e308, notchMm: 1e308, first: 0, last: 199 },
      heel: { zeroMm: -1.7e308, notchMm: 5e-324, first: 0, last: 1 },
      gapWindowMm: { min: -1.7e308, max: 1.7e308 },
    }
    const plan = trackPlan(huge, 305)
    expect(plan).toMatchObject({ ok: false, reason: 'off_centre', nearest: { toe: 0 } })
    expect(JSON.parse(JSON.stringify(plan))).toEqual(plan)
  })

  it('are exact in tenths: a gap of three times 0.1 mm is inside a window of 0.3 mm', () => {
    const fine: TrackModel = {
      ...ladder,
      toe: { zeroMm: 150, notchMm: 0.1, first: 3, last: 3 },
      heel: { zeroMm: 150, notchMm: 1, first: 0, last: 0 },
      gapWindowMm: { min: 0, max: 0.3 },
      centreWindowMm: 0.3,
    }
    expect(trackPlan(fine, 300)).toMatchObject({ ok: true, toe: 3, centreShiftMm: 0.3, gapMm: 0.3 })
  })
})
