import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { addDays, ageOn, birthdayOf, dayInZone, daysBetween, isDay, rentalDays } from '#shared/dates/days'

const anyDay = fc.integer({ min: -40_000, max: 40_000 }).map((days) => addDays('2000-01-01', days))

describe('days', () => {
  it('exist or do not, by the calendar', () => {
    expect(['2024-02-29', '2000-02-29', '2027-12-31'].every(isDay)).toBe(true)
    expect(
      ['2023-02-29', '1900-02-29', '2027-13-01', '2027-00-10', '2027-04-31', '2027-4-1', ''].some(isDay),
    ).toBe(false)
  })

  it('come back when as many are taken off as were added', () => {
    fc.assert(
      fc.property(anyDay, fc.integer({ min: -5000, max: 5000 }), (day, days) => {
        expect(daysBetween(day, addDays(day, days))).toBe(days)
        expect(addDays(addDays(day, days), -days)).toBe(day)
      }),
    )
  })

  it('count in a rental with the first and the last', () => {
    expect(rentalDays('2027-02-27', '2027-02-27')).toBe(1)
    expect(rentalDays('2027-02-15', '2027-03-01')).toBe(15)
  })

  it('are those of the shop, not of the server', () => {
    const instant = new Date('2027-01-31T23:30:00Z')
    expect(dayInZone(instant, 'Europe/Vienna')).toBe('2027-02-01')
    expect(dayInZone(instant, 'America/Denver')).toBe('2027-01-31')
  })
})

describe('age', () => {
  it('goes up by one on the birthday and on no other day', () => {
    fc.assert(
      fc.property(anyDay, fc.integer({ min: 1, max: 100 }), (birth, years) => {
        const birthday = birthdayOf(birth, years)
        expect(ageOn(birth, birthday)).toBe(years)
        expect(ageOn(birth, addDays(birthday, -1))).toBe(years - 1)
      }),
    )
  })

  it('is 0 on the day of birth and below 0 before', () => {
    expect(ageOn('2020-05-05', '2020-05-05')).toBe(0)
    expect(ageOn('2020-05-05', '2020-05-04')).toBe(-1)
  })

  it('cannot be told from a day that does not exist', () => {
    expect(() => ageOn('2023-02-29', '2027-01-01')).toThrow(RangeError)
  })
})
