import { describe, expect, it } from 'vitest'
import { brakeFit } from '#shared/compatibility/brakeFit'
import { scaleFit } from '#shared/compatibility/scaleFit'
import { knownSoleTypes, soleFit, soleTypes } from '#shared/compatibility/soleFit'

describe('a sole in a binding', () => {
  const sheet = { accepts: ['ISO 5355 A', 'ISO 23223'], refuses: ['ISO 9523'] }

  it('is accepted, refused, or unknown where the sheet does not name it or nobody could read it', () => {
    expect(soleTypes.map((type) => [type, soleFit(type, sheet)])).toEqual([
      ['ISO 5355 A', 'accepted'],
      ['ISO 5355 C', 'unknown'],
      ['ISO 9523', 'refused'],
      ['ISO 23223', 'accepted'],
      ['unknown', 'unknown'],
    ])
  })

  it('that a sheet both accepts and refuses is refused', () => {
    expect(soleFit('ISO 9523', { accepts: ['ISO 9523'], refuses: ['ISO 9523'] })).toBe('refused')
  })

  it('that nobody could read stays unknown, even where a sheet lists the word', () => {
    expect(soleFit('unknown', { accepts: ['unknown'], refuses: [] })).toBe('unknown')
    expect(knownSoleTypes).not.toContain('unknown')
  })
})

describe('a value on the scale', () => {
  it('is inside with both ends, and says its third', () => {
    const third = (value: number) => scaleFit(value, { min: 3, max: 12 }).third
    expect([2.75, 3, 5.75, 6, 7.5, 9, 9.25, 12, 12.5].map(third)).toEqual([
      null,
      'lower',
      'lower',
      'middle',
      'middle',
      'middle',
      'upper',
      'upper',
      null,
    ])
    expect(scaleFit(3, { min: 3, max: 12 }).inScale).toBe(true)
    expect(scaleFit(Number.NaN, { min: 3, max: 12 })).toEqual({ inScale: false, third: null })
  })
})

describe('a brake', () => {
  it('is as wide as the ski and at most 15 mm wider', () => {
    expect([74, 75, 90, 91].map((brake) => brakeFit(brake, 75))).toEqual([
      'narrower_than_ski',
      'fits',
      'fits',
      'wider_than_usual',
    ])
    expect(brakeFit(null, 75)).toBe('unknown')
  })
})
