import { describe, expect, it } from 'vitest'
import { dayStart, endOfDayAfter } from '#shared/dates/dayStart'

describe('the first instant of a day in a zone', () => {
  it('is midnight by the zone’s own clock', () => {
    // offsets of these zones: IANA time zone database, as Node carries it
    const cases = [
      ['2027-02-14', 'Europe/Vienna', '2027-02-13T23:00:00Z'],
      ['2027-07-14', 'Europe/Vienna', '2027-07-13T22:00:00Z'],
      ['2027-02-14', 'America/Denver', '2027-02-14T07:00:00Z'],
      ['2027-02-14', 'Asia/Kolkata', '2027-02-13T18:30:00Z'],
      ['2027-02-14', 'Pacific/Kiritimati', '2027-02-13T10:00:00Z'],
    ] as const
    for (const [day, zone, at] of cases) expect(dayStart(day, zone), zone).toEqual(new Date(at))
  })

  it('is right on the days on which clocks change, and where midnight itself is left out', () => {
    expect(dayStart('2027-03-28', 'Europe/Vienna')).toEqual(new Date('2027-03-27T23:00:00Z'))
    expect(dayStart('2027-10-31', 'Europe/Vienna')).toEqual(new Date('2027-10-30T22:00:00Z'))
    // Santiago's clocks went from 24:00 to 01:00 on the night to 8 September 2024
    expect(dayStart('2024-09-08', 'America/Santiago')).toEqual(new Date('2024-09-08T04:00:00Z'))
  })
})

describe('the end of the shop’s day', () => {
  it('is the next midnight there, and later ones by days', () => {
    const evening = new Date('2027-02-14T22:30:00Z')
    expect(endOfDayAfter(evening, 'Europe/Vienna')).toEqual(new Date('2027-02-14T23:00:00Z'))
    expect(endOfDayAfter(evening, 'America/Denver', 1)).toEqual(new Date('2027-02-16T07:00:00Z'))
  })
})
