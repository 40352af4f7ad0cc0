/** A calendar day without a clock or a zone: '2027-02-14'. */
export type Day = string

const form = /^(\d{4})-(\d{2})-(\d{2})$/
const msPerDay = 86_400_000

export type DayParts = { year: number; month: number; day: number }

const isLeap = (year: number) => (year % 4 === 0 && year % 100 !== 0) || year % 400 === 0
const lengths = [31, 28, 31, 30, 31, 30, 31, 31, 30, 31, 30, 31]

/** Parts of a day that exists in the calendar, or null. */
export function dayParts(text: string): DayParts | null {
  const match = form.exec(text)
  if (!match) return null
  const [year, month, day] = [Number(match[1]), Number(match[2]), Number(match[3])]
  const last = month === 2 && isLeap(year) ? 29 : (lengths[month - 1] ?? 0)
  return day >= 1 && day <= last ? { year, month, day } : null
}

export const isDay = (text: string): text is Day => dayParts(text) !== null

function known(day: Day): DayParts {
  const parts = dayParts(day)
  if (!parts) throw new RangeError(`${day} is no day of the calendar`)
  return parts
}

const twoDigits = (value: number) => String(value).padStart(2, '0')

export function dayOf({ year, month, day }: DayParts): Day {
  return `${String(year).padStart(4, '0')}-${twoDigits(month)}-${twoDigits(day)}`
}

function dayNumber(day: Day): number {
  known(day)
  return Date.parse(`${day}T00:00:00Z`) / msPerDay
}

export function addDays(day: Day, days: number): Day {
  return new Date((dayNumber(day) + days) * msPerDay).toISOString().slice(0, 10)
}

/** Days from one day to another; negative when the second is earlier. */
export function daysBetween(from: Day, to: Day): number {
  return dayNumber(to) - dayNumber(from)
}

/** Days of a rental, first and last included. */
export function rentalDays(firstDay: Day, lastDay: Day): number {
  return daysBetween(firstDay, lastDay) + 1
}

/** The calendar day of an instant in a zone ('Europe/Vienna'). */
export function dayInZone(instant: Date, timeZone: string): Day {
  const parts = new Intl.DateTimeFormat('en-CA', {
    timeZone,
    year: 'numeric',
    month: '2-digit',
    day: '2-digit',
  }).formatToParts(instant)
  const part = (type: string) => Number(parts.find((each) => each.type === type)?.value)
  return dayOf({ year: part('year'), month: part('month'), day: part('day') })
}

/** The day on which somebody turns so many years old; born on 29 February: 1 March where the year has no 29th. */
export function birthdayOf(birthDate: Day, years: number): Day {
  const { year, month, day } = known(birthDate)
  if (month === 2 && day === 29 && !isLeap(year + years))
    return dayOf({ year: year + years, month: 3, day: 1 })
  return dayOf({ year: year + years, month, day })
}

/** Whole years on a day; negative before birth. */
export function ageOn(birthDate: Day, day: Day): number {
  const years = known(day).year - known(birthDate).year
  return birthdayOf(birthDate, years) <= day ? years : years - 1
}
