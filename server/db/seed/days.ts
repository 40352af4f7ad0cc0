import { addDays, dayInZone } from '#shared/dates/days'

export const zone = 'Europe/Vienna'
export const minute = 60_000

/** The day before or after today, as the shop counts days. */
export const dayFrom = (now: Date, days: number) => addDays(dayInZone(now, zone), days)
export const ago = (now: Date, minutes: number) => new Date(now.getTime() - minutes * minute)
