import { changeContact, changeInputs, changePeriod, type RentalDetail } from '#shared/api/rentals'
import type { RenterForm, ValueSource } from '#shared/schemas/renters'
import { sendCommand } from '../../api/commands'

type Sources = { massSource: ValueSource; heightSource: ValueSource }

const same = (a: unknown, b: unknown) => {
  const canonical = (value: unknown) =>
    typeof value === 'object' && value !== null ? Object.entries(value).sort() : value
  return JSON.stringify(canonical(a)) === JSON.stringify(canonical(b))
}

/** Which of the three kinds of data a form changes, against what the shop knows. */
export function changesOf({ renter, inputs, ...rental }: RentalDetail, form: RenterForm, sources: Sources) {
  const guardian = renter.guardianName
    ? { name: renter.guardianName, relation: renter.guardianRelation, phone: renter.guardianPhone ?? '' }
    : null
  const contact =
    form.firstName !== renter.firstName ||
    form.lastName !== renter.lastName ||
    form.email !== (renter.email ?? '') ||
    form.phone !== (renter.phone ?? '') ||
    !same(form.guardian, guardian)
  const values =
    !same(form.mass, inputs?.mass) ||
    !same(form.height, inputs?.height) ||
    form.skierType !== inputs?.skierType ||
    form.birthDate !== renter.birthDate ||
    (form.age !== null && form.age !== inputs?.age)
  const said = sources.massSource !== inputs?.massSource || sources.heightSource !== inputs?.heightSource
  const period = form.startsOn !== rental.startsOn || form.endsOn !== rental.endsOn
  return { contact, values, said, period }
}

/** Sends what changed, one command each: a guardian first, since a minor's other data need one. */
export async function sendChanges(rental: RentalDetail, form: RenterForm, sources: Sources): Promise<void> {
  const { contact, values, said, period } = changesOf(rental, form, sources)
  const { id: rentalId, renter, inputs } = rental
  if (contact) {
    const { firstName, lastName, email, phone, guardian } = form
    const { locale, version } = renter
    await sendCommand(changeContact, {
      rentalId,
      version,
      locale,
      firstName,
      lastName,
      email,
      phone,
      guardian,
    })
  }
  if ((values || said) && inputs) {
    const { birthDate, age, mass, height, skierType } = form
    await sendCommand(changeInputs, {
      rentalId,
      seenInputsId: inputs.id,
      ...sources,
      birthDate,
      age,
      mass,
      height,
      skierType,
      skierTypeByRenter: true,
    })
  }
  if (period) await sendCommand(changePeriod, { rentalId, startsOn: form.startsOn, endsOn: form.endsOn })
}
