import type { RentalDetail } from '#shared/api/rentals'
import type { FormDraft } from '#shared/renters/draft'
import { typedHeight, typedMass, type DecimalMark } from '#shared/units/typed'

/** What the shop knows of a rental, as the texts of the form's fields. */
export function draftOfRental(
  { renter, inputs, ...rental }: RentalDetail,
  mark: DecimalMark,
): Partial<FormDraft> {
  return {
    firstName: renter.firstName,
    lastName: renter.lastName,
    email: renter.email ?? '',
    phone: renter.phone ?? '',
    bornBy: renter.birthDate ? 'date' : 'age',
    birthDate: renter.birthDate ?? '',
    age: inputs ? String(inputs.age) : '',
    guardianName: renter.guardianName ?? '',
    guardianRelation: renter.guardianRelation ?? '',
    guardianPhone: renter.guardianPhone ?? '',
    ...(inputs ? { ...massTexts(inputs.mass, mark), ...heightTexts(inputs.height, mark) } : {}),
    skierType: inputs?.skierType ?? '',
    boots: rental.ownBootsWanted ? 'own' : 'hire',
    startsOn: rental.startsOn,
    endsOn: rental.endsOn,
  }
}

function massTexts(mass: NonNullable<RentalDetail['inputs']>['mass'], mark: DecimalMark): Partial<FormDraft> {
  const typed = typedMass(mass, mark)
  return typed.unit === 'st-lb'
    ? { massUnit: typed.unit, stone: typed.stone, pounds: typed.pounds }
    : { massUnit: typed.unit, mass: typed.value }
}

function heightTexts(
  height: NonNullable<RentalDetail['inputs']>['height'],
  mark: DecimalMark,
): Partial<FormDraft> {
  const typed = typedHeight(height, mark)
  return typed.unit === 'ft-in'
    ? { heightUnit: typed.unit, feet: typed.feet, inches: typed.inches }
    : { heightUnit: typed.unit, height: typed.value }
}
