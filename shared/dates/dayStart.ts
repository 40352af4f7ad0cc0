import { addDays, dayInZone, type Day } from './days'

const hour = 3_600_000

/** How far a zone is ahead of UTC at an instant, in milliseconds. */
function offsetAt(instant: number, timeZone: string): number {
  const parts = new Intl.DateTimeFormat('en-CA', {
    timeZone,
    hourCycle: 'h23',
    year: 'numeric',
    month: '2-digit',
    day: '2-digit',
    hour: '2-digit',
    minute: '2-digit',
    second: '2-digit',
  }).formatToParts(new Date(instant))
  const part = (type: string) => Number(parts.find((each) => each.type === type)?.value)
  const wall = Date.UTC(
    part('year'),
    part('month') - 1,
    part('day'),
    part('hour'),
    part('minute'),
    part('second'),
  )
  return wall - Math.floor(instant / 1000) * 1000
}

/** The first instant of a calendar day in a zone, also where clocks are changed that night. */
export function dayStart(day: Day, timeZone: string): Date {
  const midnight = Date.parse(`${day}T00:00:00Z`)
  const candidates = [
    midnight - offsetAt(midnight - 26 * hour, timeZone),
    midnight - offsetAt(midnight + 26 * hour, timeZone),
  ]
  const first = candidates.sort((a, b) => a - b).find((at) => dayInZone(new Date(at), timeZone) === day)
  return new Date(first ?? midnight - offsetAt(midnight, timeZone))
}

/** The instant at which the day that it now is in a zone is over. */
export function endOfDayAfter(now: Date, timeZone: string, days = 0): Date {
  return dayStart(addDays(dayInZone(now, timeZone), days + 1), timeZone)
}
