import { describe, expect, it } from 'vitest'
import { judgeReading, readableTurns, readingFromMarks, type Reading } from '#shared/track/readBack'
import type { TrackModel } from '#shared/track/trackModel'
import { demoTrackModels } from '../../../../server/db/seed/trackModels'

const ladder: TrackModel = demoTrackModels['ladder-16']
const screw: TrackModel = demoTrackModels['ladder-12-s']
const coupled: TrackModel = demoTrackModels['twinrow-21']
const junior: TrackModel = demoTrackModels['pebble-20']

const values = { toeValue: 5.5, heelValue: 6 }
const plan = { toe: 7, heel: 6, turns: null }
const right: Reading = { ...values, toe: 7, heel: 6, turns: null, forwardPressureInWindow: true }
const judge = (changes: Partial<Reading>) => judgeReading(ladder, plan, values, { ...right, ...changes })

describe('a reading on a track with two rails', () => {
  it('matches when values, marks and forward pressure are right', () => {
    expect(judge({})).toEqual({ verdict: 'matches' })
  })

  it('with a value that is not its unit’s target indicator is wrong, whatever else it says', () => {
    expect(judge({ toeValue: 6 })).toEqual({ verdict: 'wrong_value', unit: 'toe', target: 5.5, read: 6 })
    expect(judge({ heelValue: 5.5, toe: 3 })).toEqual({
      verdict: 'wrong_value',
      unit: 'heel',
      target: 6,
      read: 5.5,
    })
    expect(judge({ heelValue: Number.NaN })).toMatchObject({ verdict: 'wrong_value', unit: 'heel' })
  })

  it('with the heel one notch off is decided by the window', () => {
    expect(judge({ heel: 5 })).toEqual({ verdict: 'window_decides', part: 'heel', target: 6, read: 5 })
    expect(judge({ heel: 7 })).toEqual({ verdict: 'window_decides', part: 'heel', target: 6, read: 7 })
  })

  it('with forward pressure outside its window is moved again', () => {
    expect(judge({ forwardPressureInWindow: false })).toMatchObject({ verdict: 'move_again', part: 'heel' })
    expect(judge({ heel: 5, forwardPressureInWindow: false })).toMatchObject({
      verdict: 'move_again',
      part: 'heel',
    })
  })

  it('with another toe mark or the heel two notches off goes to a head technician', () => {
    expect(judge({ toe: 6 })).toMatchObject({ verdict: 'head_technician', part: 'toe', because: 'toe_mark' })
    expect(judge({ heel: 8 })).toMatchObject({
      verdict: 'head_technician',
      part: 'heel',
      because: 'heel_mark',
    })
    expect(judge({ heel: Number.NaN })).toMatchObject({ verdict: 'head_technician' })
  })
})

describe('a reading on a track with a heel screw', () => {
  const target = { toe: 5, heel: 5, turns: 2 / 3 }
  const judgeScrew = (changes: Partial<Reading>) =>
    judgeReading(screw, target, values, { ...right, toe: 5, heel: 5, turns: 0.75, ...changes })

  it('matches at the quarter turn nearest to the target', () => {
    expect(judgeScrew({})).toEqual({ verdict: 'matches' })
    expect(judgeScrew({ turns: 0.5 })).toMatchObject({ verdict: 'window_decides', part: 'screw' })
  })

  it('up to one turn off is decided by the window, beyond one turn by a head technician', () => {
    expect(judgeScrew({ turns: 1.25 })).toMatchObject({
      verdict: 'window_decides',
      part: 'screw',
      read: 1.25,
    })
    expect(judgeScrew({ turns: -0.25 })).toMatchObject({ verdict: 'window_decides', part: 'screw' })
    expect(judgeScrew({ turns: -0.5 })).toMatchObject({ verdict: 'head_technician', because: 'screw' })
    expect(judgeScrew({ turns: 1.5 })).toMatchObject({ verdict: 'head_technician', because: 'screw' })
  })

  it('with heel and screw both off goes to a head technician; one of them may differ', () => {
    expect(judgeScrew({ heel: 4 })).toMatchObject({ verdict: 'window_decides', part: 'heel' })
    expect(judgeScrew({ heel: 4, turns: 0 })).toMatchObject({ verdict: 'head_technician', because: 'screw' })
  })

  it('with the screw not read is not finished', () => {
    expect(judgeScrew({ turns: null })).toMatchObject({ verdict: 'move_again', because: 'screw_not_read' })
  })

  it('with forward pressure outside its window is turned again', () => {
    expect(judgeScrew({ forwardPressureInWindow: false })).toMatchObject({
      verdict: 'move_again',
      part: 'screw',
    })
  })

  it('shows turns in quarters inside the travel', () => {
    expect([2 / 3, -4 / 3, 1.34, 0.1, -0.1].map((turns) => readableTurns(turns, 1.34))).toEqual([
      0.75, -1.25, 1.25, 0, 0,
    ])
    expect(judgeScrew({}).verdict).toBe('matches')
    expect(
      judgeReading(screw, { ...target, turns: -4 / 3 }, values, { ...right, toe: 5, heel: 5, turns: -1.25 }),
    ).toEqual({
      verdict: 'matches',
    })
  })
})

describe('a reading on a coupled track', () => {
  const target = { toe: 9, heel: 9, turns: null }
  const judgeCoupled = (changes: Partial<Reading>) =>
    judgeReading(coupled, target, values, { ...right, toe: 9, heel: 9, ...changes })

  it('matches only at its own mark, with forward pressure in the window', () => {
    expect(judgeCoupled({})).toEqual({ verdict: 'matches' })
    for (const change of [{ toe: 10, heel: 10 }, { heel: 10 }, { forwardPressureInWindow: false }]) {
      expect(judgeCoupled(change)).toEqual({
        verdict: 'head_technician',
        part: 'both',
        because: 'coupled_track',
      })
    }
  })
})

describe('marks read at the bench', () => {
  it('become notches, or the one that is not on its rail is named', () => {
    expect(readingFromMarks(junior, { toeMark: 'f', heelMark: '11' })).toEqual({ ok: true, toe: 5, heel: 11 })
    expect(readingFromMarks(junior, { toeMark: '5', heelMark: '11' })).toEqual({
      ok: false,
      reason: 'mark_not_on_rail',
      unit: 'toe',
      mark: '5',
    })
    expect(readingFromMarks(coupled, { toeMark: '305', heelMark: '306' })).toMatchObject({
      unit: 'heel',
      mark: '306',
    })
  })
})
