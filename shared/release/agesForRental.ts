import { ageOn, birthdayOf, type Day } from '#shared/dates/days'
import { ageRule } from './rules'

export type AgesForRental = {
  /** The age that the release value is computed with. */
  age: number
  firstDay: number
  lastDay: number
  /** A birthday inside the rental that moves the row, the day after the first to the last day included. */
  birthday: { years: number; on: Day } | null
}

/**
 * Age for a rental, from a birth date: whole years on the first day. Where somebody turns 10 or 50 on a later day
 * of the rental, the age that gives the lower value: 9 stays 9, 49 counts as 50. Days are the shop's own; the last
 * day is not before the first, and the birth date not after it.
 */
export function agesForRental(birthDate: Day, firstDay: Day, lastDay: Day): AgesForRental {
  const [onFirst, onLast] = [ageOn(birthDate, firstDay), ageOn(birthDate, lastDay)]
  const turned = [ageRule.childUpTo + 1, ageRule.seniorFrom].find(
    (years) => onFirst < years && onLast >= years,
  )
  return {
    age: turned === ageRule.seniorFrom ? ageRule.seniorFrom : onFirst,
    firstDay: onFirst,
    lastDay: onLast,
    birthday: turned === undefined ? null : { years: turned, on: birthdayOf(birthDate, turned) },
  }
}
