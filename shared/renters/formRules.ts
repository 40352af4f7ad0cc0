import { addDays, ageOn, type Day } from '#shared/dates/days'
import { agesForRental } from '#shared/release/agesForRental'
import { isLight } from '#shared/release/isLight'
import { inputLimits, type SkierType } from '#shared/release/rules'
import type { Born, Contact, Period, RenterForm } from '#shared/schemas/renters'
import type { Mass } from '#shared/units/bodySchemas'

/** The fields of a form in the order in which they are asked for. */
export const formFields = [
  'firstName',
  'lastName',
  'birthDate',
  'age',
  'guardianName',
  'guardianRelation',
  'guardianPhone',
  'phone',
  'email',
  'mass',
  'height',
  'skierType',
  'ownBoots',
  'shoe',
  'wishes',
  'startsOn',
  'endsOn',
] as const
export type FormField = (typeof formFields)[number]

/** One thing that stands between a form and being sent. The client words it by field and reason. */
export interface FieldProblem {
  field: FormField
  reason: string
  limits?: { min: number; max: number }
}

/** What of the shop a form is judged with. `today` is the shop's own day. */
export interface FormFacts {
  today: Day
  ageOfMajority: number
}

/** A rental is for a year at most. Invented; beyond it a date is a slip. */
const longestDays = 365

/** Whole years that the selection table is read with, on the rental's days; null while a birth date is ahead. */
export function ageForTable({ birthDate, age }: Born, { startsOn, endsOn }: Period): number | null {
  if (birthDate === null) return age
  return birthDate > startsOn ? null : agesForRental(birthDate, startsOn, endsOn).age
}

/** Whole years on the first day: this decides who signs. */
export function ageOnFirstDay({ birthDate, age }: Born, startsOn: Day): number | null {
  if (birthDate === null) return age
  return birthDate > startsOn ? null : ageOn(birthDate, startsOn)
}

/** A birth date, or an age that was said, and one that a person can have. The date counts where both are there. */
export function bornProblems({ birthDate, age }: Born, startsOn: Day): FieldProblem[] {
  if (birthDate === null) return age === null ? [{ field: 'birthDate', reason: 'empty' }] : []
  if (birthDate > startsOn) return [{ field: 'birthDate', reason: 'ahead' }]
  return ageOn(birthDate, startsOn) > inputLimits.age.max ? [{ field: 'birthDate', reason: 'too_old' }] : []
}

/** A minor needs a guardian, and somebody has to be reachable. */
export function contactProblems(
  { phone, email, guardian }: Pick<Contact, 'phone' | 'email' | 'guardian'>,
  firstDayAge: number | null,
  ageOfMajority: number,
): FieldProblem[] {
  const problems: FieldProblem[] = []
  if (!phone && !email && !guardian?.phone) problems.push({ field: 'phone', reason: 'nobody_reachable' })
  if (firstDayAge !== null && firstDayAge < ageOfMajority && !guardian) {
    problems.push({ field: 'guardianName', reason: 'minor' })
  }
  return problems
}

export function periodProblems({ startsOn, endsOn }: Period, earliest: Day | null): FieldProblem[] {
  if (earliest && startsOn < earliest) return [{ field: 'startsOn', reason: 'past' }]
  if (endsOn < startsOn) return [{ field: 'endsOn', reason: 'before_first_day' }]
  return endsOn > addDays(startsOn, longestDays) ? [{ field: 'endsOn', reason: 'too_long' }] : []
}

/** The two ways of skiing that hold longest are not for anybody up to 21 kg. */
export function typeProblems(skierType: SkierType, mass: Mass): FieldProblem[] {
  const holdsLong = skierType === 'III' || skierType === 'III+'
  return holdsLong && isLight(mass) ? [{ field: 'skierType', reason: 'light' }] : []
}

/** Everything that a well-formed form still lacks, in the order of its fields. Empty: it can be sent. */
export function formProblems(form: RenterForm, { today, ageOfMajority }: FormFacts): FieldProblem[] {
  const born = bornProblems(form, form.startsOn)
  const firstDayAge = born.length > 0 ? null : ageOnFirstDay(form, form.startsOn)
  const found = [
    ...contactProblems(form, firstDayAge, ageOfMajority),
    ...born,
    ...typeProblems(form.skierType, form.mass),
    ...periodProblems(form, today),
  ]
  return found.sort((a, b) => formFields.indexOf(a.field) - formFields.indexOf(b.field))
}
