import { describe, expect, it } from 'vitest'
import type { BenchTarget } from '#shared/fitting/readBack'
import { demoTrackModels } from '../../../../../server/db/seed/trackModels'
import {
  emptyDraft,
  judgeSoFar,
  marksAreNumbers,
  nextStep,
  parsedRead,
  readableTurnsOf,
  readSteps,
  seenOf,
  standsAt,
  stepOf,
  withRead,
  type SideDraft,
} from '../../../../../src/components/bench/readDraft'

const ladder = demoTrackModels['ladder-16']
const screw = demoTrackModels['ladder-12-s']
const lever = demoTrackModels['twinrow-21']
const junior = demoTrackModels['pebble-20']
const values = { toe: 6.5, heel: 6.5 }
const target: BenchTarget = {
  model: ladder,
  track: { toe: 7, heel: 6, turns: null },
  targets: { left: values, right: values },
}
const read: SideDraft = { ...emptyDraft(), heel: 6, heelValue: 6.5, toe: 7, toeValue: 6.5 }
const checked: SideDraft = {
  ...read,
  soleClearance: true,
  forwardPressure: 'in',
  brake: true,
  function: true,
}

describe('what is read at a ski, one after the other', () => {
  it('is empty at first: nothing is filled in for anybody', () => {
    expect(Object.values(emptyDraft()).filter((each) => each !== null && each !== false)).toEqual([])
  })

  it('is heel mark and value, toe mark and value, then the checks with the boot in', () => {
    expect(readSteps(ladder)).toEqual(['heel', 'heelValue', 'toe', 'toeValue'])
    expect(nextStep(ladder, emptyDraft())).toBe('heel')
    expect(nextStep(ladder, read)).toBe('soleClearance')
    expect(nextStep(ladder, { ...checked, forwardPressure: 'out' })).toBe('forwardPressure')
    expect(nextStep(ladder, checked)).toBe('done')
  })

  it('has a fifth read where there is a screw, and one mark for both units where there is a lever', () => {
    expect(readSteps(screw).at(-1)).toBe('turns')
    expect(readSteps(lever)).toEqual(['lever', 'heelValue', 'toeValue'])
    expect(withRead(emptyDraft(), 'lever', 9)).toMatchObject({ toe: 9, heel: 9 })
  })

  it('is a whole reading only when everything was read and confirmed', () => {
    expect(seenOf(ladder, read)).toBeNull()
    expect(seenOf(ladder, checked)).toMatchObject({ toe: 7, heel: 6, turns: null, forwardPressure: true })
    expect(seenOf(screw, checked)).toBeNull()
  })
})

describe('what a read is judged as, as soon as it is taken', () => {
  const judge = (differs: Partial<SideDraft>) => judgeSoFar(target, 'left', { ...emptyDraft(), ...differs })

  it('a heel one notch off goes on to the window, two notches stop', () => {
    expect(judge({ heel: 7 })).toMatchObject({
      mismatch: null,
      verdict: { verdict: 'window_decides', part: 'heel' },
    })
    expect(judge({ heel: 8 }).mismatch).toMatchObject({
      what: 'mark',
      part: 'heel',
      decides: 'head_technician',
    })
  })

  it("a wrong value is nobody's to decide, another toe mark a head technician's", () => {
    const value = judge({ heelValue: 6 }).mismatch
    expect(value).toMatchObject({ what: 'value', part: 'heel', target: 6.5, read: 6, decides: 'nobody' })
    expect(stepOf(ladder, value!)).toBe('heelValue')
    const mark = judge({ toe: 6 }).mismatch
    expect(mark).toMatchObject({ what: 'mark', part: 'toe', decides: 'head_technician' })
    expect(stepOf(ladder, mark!)).toBe('toe')
  })

  it('nothing that was not read yet is held against the reader', () => {
    expect(judge({}).mismatch).toBeNull()
  })
})

describe('what was typed', () => {
  it('is a mark that is printed on the rail, in letters where the rail has letters, or mm of sole length', () => {
    expect(parsedRead(ladder, 'heel', '6')).toBe(6)
    expect(parsedRead(ladder, 'heel', '17')).toBeNull()
    expect(marksAreNumbers(junior, 'toe')).toBe(false)
    expect(parsedRead(junior, 'toe', 'E')).toBe(4)
    // The first notch of this heel rail is 1 and carries the mark 1.
    expect(parsedRead(junior, 'heel', '1')).toBe(1)
    // 260 mm is notch 0, each notch 5 mm more
    expect(parsedRead(lever, 'lever', '305')).toBe(9)
    expect(parsedRead(lever, 'lever', '306')).toBeNull()
  })

  it('is a value with comma or point, and nothing else', () => {
    expect(parsedRead(ladder, 'heelValue', '6,5')).toBe(6.5)
    expect(parsedRead(ladder, 'heelValue', '6.5')).toBe(6.5)
    expect(parsedRead(ladder, 'heelValue', '')).toBeNull()
    expect(parsedRead(ladder, 'heelValue', '65')).toBeNull()
  })

  it('is a quarter turn within the travel of the screw', () => {
    // 1.34 turns either way: 1.25 is the last quarter that can be read
    expect(readableTurnsOf(1.34)).toEqual([-1.25, -1, -0.75, -0.5, -0.25, 0, 0.25, 0.5, 0.75, 1, 1.25])
  })
})

describe('where the ski stands on the drawing', () => {
  it('is where it was read, and where nobody read yet, where it was believed to stand', () => {
    const preset = { toe: 4, heel: 3, turns: null }
    expect(standsAt(preset, emptyDraft())).toEqual(preset)
    expect(standsAt(preset, { ...emptyDraft(), heel: 6 })).toEqual({ toe: 4, heel: 6, turns: null })
    expect(standsAt(null, { ...emptyDraft(), heel: 6 })).toBeNull()
  })
})
