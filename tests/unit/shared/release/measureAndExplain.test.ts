import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { agesForRental } from '#shared/release/agesForRental'
import { nearRowLimit } from '#shared/release/nearRowLimit'
import { plausibleForAge } from '#shared/release/plausibleForAge'
import type { ReleaseInput } from '#shared/release/releaseInput'
import { releaseSetting } from '#shared/release/releaseSetting'
import { tableSlice } from '#shared/release/tableSlice'
import type { Height, Mass } from '#shared/units/bodySchemas'
import { anyInput } from './arbitraries'

const kg = (value: number): Mass => ({ value, unit: 'kg' })
const cm = (value: number): Height => ({ value, unit: 'cm' })

describe('measure this', () => {
  it('is asked for within 2 kg of a row border, on either side', () => {
    const asked = (value: number) =>
      nearRowLimit({ mass: kg(value), height: cm(172) }).some((side) => side.what === 'mass')
    expect([64.9, 65, 67, 69, 69.1].map(asked)).toEqual([false, true, true, true, false])
  })

  it('is asked for within 3 cm of a row border', () => {
    const asked = (value: number) =>
      nearRowLimit({ mass: kg(72), height: cm(value) }).some((side) => side.what === 'height')
    expect([163.9, 164, 167, 170, 170.1].map(asked)).toEqual([false, true, true, true, false])
  })

  it('says which row is on the other side, and whether the starting row would change', () => {
    expect(nearRowLimit({ mass: kg(66), height: cm(172) })).toEqual([
      { what: 'mass', why: 'near_border', row: 'J', otherRow: 'K', border: 67, unit: 'kg', changesRow: true },
    ])
    expect(nearRowLimit({ mass: kg(80), height: cm(172) })).toEqual([
      {
        what: 'mass',
        why: 'near_border',
        row: 'L',
        otherRow: 'K',
        border: 79,
        unit: 'kg',
        changesRow: false,
      },
    ])
    expect(nearRowLimit({ mass: kg(11), height: cm(90) })[0]).toMatchObject({
      row: 'A',
      otherRow: null,
      changesRow: true,
    })
  })

  it('is asked for where kilograms and pounds give different rows, however small the limits', () => {
    const strict = { massKg: 0, heightCm: 0 }
    // 57.6 kg is 126.99 lb: row I in kg, row J in lb
    expect(nearRowLimit({ mass: kg(57.6), height: cm(172) }, strict)).toEqual([
      {
        what: 'mass',
        why: 'other_units',
        row: 'I',
        otherRow: 'J',
        border: null,
        unit: 'kg',
        changesRow: true,
      },
    ])
    // 5 ft 1.9 in is 157.2 cm: both row I; 157.48 cm is 5 ft 2 in: row I in cm, row J in inches
    expect(nearRowLimit({ mass: kg(72), height: { unit: 'ft-in', feet: 5, inches: 1.9 } }, strict)).toEqual(
      [],
    )
    expect(nearRowLimit({ mass: kg(72), height: cm(157.48) }, strict)[0]).toMatchObject({
      why: 'other_units',
      otherRow: 'J',
    })
  })

  it('counts limits in kg and cm whatever unit was typed', () => {
    const asked = (value: number) => nearRowLimit({ mass: { unit: 'lb', value }, height: cm(172) }).length > 0
    expect([143.5, 143.7, 152.3, 152.5].map(asked)).toEqual([false, true, true, false])
  })
})

describe('plausibility by age', () => {
  it('has nothing to say about usual renters', () => {
    expect(plausibleForAge({ age: 35, mass: kg(78), height: cm(178) })).toEqual([])
    expect(
      plausibleForAge({
        age: 7,
        mass: { unit: 'lb', value: 55 },
        height: { unit: 'ft-in', feet: 4, inches: 1 },
      }),
    ).toEqual([])
  })

  it('warns of a child of 5 with the body of an adult, and of an adult who typed stone as kilograms', () => {
    expect(
      plausibleForAge({ age: 5, mass: kg(70), height: cm(175) }).map(({ what, is }) => [what, is]),
    ).toEqual([
      ['mass', 'more_than_usual'],
      ['height', 'more_than_usual'],
    ])
    expect(plausibleForAge({ age: 40, mass: kg(11), height: cm(175) })).toEqual([
      { what: 'mass', is: 'less_than_usual', age: 40, usual: { min: 36, max: 160, unit: 'kg' } },
    ])
  })
})

describe('the part of the table for the drawing', () => {
  const input: ReleaseInput = { mass: kg(70), height: cm(175), age: 40, skierType: 'III', soleLengthMm: 305 }

  it('shows the cell used with its neighbours', () => {
    const slice = tableSlice(releaseSetting(input), { rows: 1, columns: 1 })
    expect(slice?.rows).toEqual([
      { code: 'L', cells: [7, 6.5, 6] },
      { code: 'M', cells: [8.5, 8, 7] },
      { code: 'N', cells: [10, 9.5, 8.5] },
    ])
    expect(slice?.columns[1]).toEqual({ min: 291, max: 310 })
    expect(slice?.cell).toEqual({ row: 1, column: 1 })
    expect(slice?.sideways).toBeNull()
  })

  it('holds the value of the result, also when it was taken from the side or refused', () => {
    fc.assert(
      fc.property(anyInput, (given) => {
        const result = releaseSetting(given)
        const slice = tableSlice(result, { rows: 0, columns: 0 })
        if (!slice) {
          expect(result.ok).toBe(false)
          return
        }
        const at = slice.sideways ?? slice.cell
        const shown = slice.rows[at.row]?.cells[at.column]
        if (result.ok) expect(shown).toBe(result.value)
        else if (result.reason === 'sole_longer_than_row') expect(shown).toBe(result.sidewaysValue)
        else expect(shown).toBeNull()
      }),
    )
  })

  it('is not there when the computation ended before the table', () => {
    expect(tableSlice(releaseSetting({ ...input, mass: kg(8) }))).toBeNull()
    expect(tableSlice(releaseSetting({ ...input, age: -1 }))).toBeNull()
  })
})

describe('the age for a rental', () => {
  const age = (birthDate: string, firstDay: string, lastDay: string) =>
    agesForRental(birthDate, firstDay, lastDay)

  it('is that of the first day', () => {
    expect(age('1990-02-10', '2027-02-09', '2027-02-12')).toEqual({
      age: 36,
      firstDay: 36,
      lastDay: 37,
      birthday: null,
    })
    expect(age('1990-02-10', '2027-02-10', '2027-02-12').age).toBe(37)
  })

  it('stays 9 when the 10th birthday is on a later day, the last included', () => {
    expect(age('2017-02-12', '2027-02-10', '2027-02-12')).toEqual({
      age: 9,
      firstDay: 9,
      lastDay: 10,
      birthday: { years: 10, on: '2027-02-12' },
    })
    expect(age('2017-02-13', '2027-02-10', '2027-02-12')).toMatchObject({ age: 9, birthday: null })
    expect(age('2017-02-10', '2027-02-10', '2027-02-12')).toMatchObject({ age: 10, birthday: null })
  })

  it('is 50 when the 50th birthday is on a later day, the last included', () => {
    expect(age('1977-02-12', '2027-02-10', '2027-02-12')).toMatchObject({
      age: 50,
      birthday: { years: 50, on: '2027-02-12' },
    })
    expect(age('1977-02-13', '2027-02-10', '2027-02-12')).toMatchObject({ age: 49, birthday: null })
    expect(age('1977-02-10', '2027-02-10', '2027-02-12')).toMatchObject({ age: 50, birthday: null })
  })

  it('counts somebody born on 29 February from 1 March', () => {
    expect(age('2016-02-29', '2026-02-28', '2026-02-28').age).toBe(9)
    expect(age('2016-02-29', '2026-03-01', '2026-03-01').age).toBe(10)
    expect(age('1976-02-29', '2026-02-27', '2026-03-01')).toMatchObject({
      age: 50,
      birthday: { years: 50, on: '2026-03-01' },
    })
    expect(age('1976-02-29', '2026-02-27', '2026-02-28')).toMatchObject({ age: 49, birthday: null })
  })
})
