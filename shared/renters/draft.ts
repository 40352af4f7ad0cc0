import { isDay, type Day } from '#shared/dates/days'
import { skierTypes, type SkierType } from '#shared/release/rules'
import type { Guardian, RenterForm, RenterLocale } from '#shared/schemas/renters'
import { parseDecimal, parseHeight, parseMass, type ParsedHeight, type ParsedMass } from '#shared/units/typed'
import { formFields, formProblems, type FieldProblem, type FormFacts } from './formRules'
import { guardianRelations, type GuardianRelation } from './guardian'
import { footLimitsCm, shoeLimits, shoeSystems, type Shoe, type ShoeSystem } from './shoe'

/** A form as it is being typed: texts only, each as it was typed. It is kept so, and read anew each time. */
export const emptyDraft = {
  firstName: '',
  lastName: '',
  email: '',
  phone: '',
  bornBy: 'date',
  birthDate: '',
  age: '',
  guardianName: '',
  guardianRelation: '',
  guardianPhone: '',
  massUnit: 'kg',
  mass: '',
  stone: '',
  pounds: '',
  heightUnit: 'cm',
  height: '',
  feet: '',
  inches: '',
  skierType: '',
  boots: '',
  shoeSystem: 'eu',
  shoe: '',
  wishes: '',
  startsOn: '',
  endsOn: '',
}
export type FormDraft = typeof emptyDraft

/** What was kept of a draft, with everything that it lacks as it is at first. */
export function draftFrom(kept: Readonly<Record<string, string>>, first: Partial<FormDraft> = {}): FormDraft {
  const draft = { ...emptyDraft, ...first }
  for (const key of Object.keys(draft) as (keyof FormDraft)[]) draft[key] = kept[key] ?? draft[key]
  return draft
}

/** The mass that was typed, in the unit chosen. */
export function typedMassOf({ massUnit, mass, stone, pounds }: FormDraft): ParsedMass {
  return massUnit === 'st-lb'
    ? parseMass({ unit: 'st-lb', stone, pounds })
    : parseMass({ unit: massUnit === 'lb' ? 'lb' : 'kg', value: mass })
}

/** The height that was typed, in the unit chosen. */
export function typedHeightOf({ heightUnit, height, feet, inches }: FormDraft): ParsedHeight {
  return heightUnit === 'ft-in'
    ? parseHeight({ unit: 'ft-in', feet, inches })
    : parseHeight({ unit: 'cm', value: height })
}

type Read<Value> = { value: Value } | { problem: FieldProblem }

const readMass = (draft: FormDraft): Read<RenterForm['mass']> => {
  const read = typedMassOf(draft)
  return read.ok
    ? { value: read.mass }
    : { problem: { field: 'mass', reason: read.reason, limits: read.limits } }
}

const readHeight = (draft: FormDraft): Read<RenterForm['height']> => {
  const read = typedHeightOf(draft)
  return read.ok
    ? { value: read.height }
    : { problem: { field: 'height', reason: read.reason, limits: read.limits } }
}

const ageLimits = { min: 0, max: 120 }

/** Birth date or age, whichever the renter chose to give; nothing: both null. */
export function typedBornOf({ bornBy, birthDate, age }: FormDraft): Read<{
  birthDate: Day | null
  age: number | null
}> {
  if (bornBy === 'date') {
    if (birthDate === '') return { problem: { field: 'birthDate', reason: 'empty' } }
    return isDay(birthDate)
      ? { value: { birthDate, age: null } }
      : { problem: { field: 'birthDate', reason: 'not_a_day' } }
  }
  if (age.trim() === '') return { problem: { field: 'age', reason: 'empty' } }
  const years = parseDecimal(age)
  if (years === null) return { problem: { field: 'age', reason: 'not_a_number' } }
  if (!Number.isInteger(years)) return { problem: { field: 'age', reason: 'not_whole' } }
  return years <= ageLimits.max
    ? { value: { birthDate: null, age: years } }
    : { problem: { field: 'age', reason: 'out_of_limits', limits: ageLimits } }
}

function readShoe({ boots, shoeSystem, shoe }: FormDraft): Read<Shoe | null> {
  if (boots === 'own' || shoe.trim() === '') return { value: null }
  const number = parseDecimal(shoe)
  if (number === null) return { problem: { field: 'shoe', reason: 'not_a_number' } }
  if (shoeSystem === 'foot') {
    const within = number >= footLimitsCm.min && number <= footLimitsCm.max
    return within
      ? { value: { footMm: Math.round(number * 10) } }
      : { problem: { field: 'shoe', reason: 'out_of_limits', limits: footLimitsCm } }
  }
  const system = shoeSystems.includes(shoeSystem as ShoeSystem) ? (shoeSystem as ShoeSystem) : 'eu'
  const limits = shoeLimits[system]
  return number >= limits.min && number <= limits.max
    ? { value: { system, size: shoe.trim() } }
    : { problem: { field: 'shoe', reason: 'out_of_limits', limits } }
}

/** Only where a name was typed is there a guardian; a relation is asked for with it. */
function readGuardian(draft: FormDraft): Read<Guardian | null> {
  const name = draft.guardianName.trim()
  if (!name) return { value: null }
  const relation = draft.guardianRelation as GuardianRelation
  if (!guardianRelations.includes(relation))
    return { problem: { field: 'guardianRelation', reason: 'empty' } }
  return { value: { name, relation, phone: draft.guardianPhone.trim() } }
}

/** Something before and after one @, and a dot after it. The mail itself proves the rest. */
const address = /^[A-Za-z0-9_'+\-.]+@(?:[A-Za-z0-9][A-Za-z0-9-]*\.)+[A-Za-z]{2,}$/

function namesAndAddress({ firstName, lastName, email }: FormDraft): FieldProblem[] {
  const problems: FieldProblem[] = []
  if (!firstName.trim()) problems.push({ field: 'firstName', reason: 'empty' })
  if (!lastName.trim()) problems.push({ field: 'lastName', reason: 'empty' })
  if (email.trim() && !address.test(email.trim())) problems.push({ field: 'email', reason: 'no_address' })
  return problems
}

function choices({ skierType, boots, startsOn, endsOn }: FormDraft): FieldProblem[] {
  const problems: FieldProblem[] = []
  if (!skierTypes.includes(skierType as SkierType)) problems.push({ field: 'skierType', reason: 'empty' })
  if (boots !== 'own' && boots !== 'hire') problems.push({ field: 'ownBoots', reason: 'empty' })
  if (!isDay(startsOn)) problems.push({ field: 'startsOn', reason: startsOn ? 'not_a_day' : 'empty' })
  if (!isDay(endsOn)) problems.push({ field: 'endsOn', reason: endsOn ? 'not_a_day' : 'empty' })
  return problems
}

export type ReadDraft = { ok: true; form: RenterForm } | { ok: false; problems: FieldProblem[] }

/**
 * The form that a draft amounts to, or everything that it lacks, in the order of the fields. What cannot be read is
 * left out of the rules that need it, so that one slip is one message.
 */
export function readDraft(draft: FormDraft, locale: RenterLocale, facts: FormFacts): ReadDraft {
  const mass = readMass(draft)
  const height = readHeight(draft)
  const born = typedBornOf(draft)
  const shoe = readShoe(draft)
  const guardian = readGuardian(draft)
  const slips = [
    ...namesAndAddress(draft),
    ...choices(draft),
    ...[mass, height, born, shoe, guardian].flatMap((read) => ('problem' in read ? [read.problem] : [])),
  ]
  const unread = new Set(slips.map(({ field }) => field))
  const form: RenterForm = {
    firstName: draft.firstName.trim(),
    lastName: draft.lastName.trim(),
    email: unread.has('email') ? '' : draft.email.trim(),
    phone: draft.phone.trim(),
    locale,
    ...('value' in born ? born.value : { birthDate: null, age: null }),
    guardian: 'value' in guardian ? guardian.value : null,
    mass: 'value' in mass ? mass.value : { unit: 'kg', value: 75 },
    height: 'value' in height ? height.value : { unit: 'cm', value: 175 },
    skierType: unread.has('skierType') ? 'I' : (draft.skierType as SkierType),
    shoe: 'value' in shoe ? shoe.value : null,
    ownBoots: draft.boots === 'own',
    wishes: draft.wishes.trim(),
    startsOn: unread.has('startsOn') ? facts.today : draft.startsOn,
    endsOn: unread.has('endsOn') ? (unread.has('startsOn') ? facts.today : draft.startsOn) : draft.endsOn,
  }
  // A guardian whose relation is missing was named all the same, and an age that cannot be read is no missing one.
  const covered = (problem: FieldProblem) =>
    (problem.reason === 'minor' && unread.has('guardianRelation')) ||
    (problem.field === 'birthDate' && (unread.has('birthDate') || unread.has('age'))) ||
    (problem.reason === 'nobody_reachable' && unread.has('email')) ||
    unread.has(problem.field)
  const problems = [...slips, ...formProblems(form, facts).filter((problem) => !covered(problem))]
  if (problems.length === 0) return { ok: true, form }
  return {
    ok: false,
    problems: problems.sort((a, b) => formFields.indexOf(a.field) - formFields.indexOf(b.field)),
  }
}
