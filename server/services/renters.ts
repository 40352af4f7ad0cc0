import { randomBytes } from 'node:crypto'
import { and, eq, sql } from 'drizzle-orm'
import type { changeContact, changeInputs, requestRow } from '#shared/api/rentals'
import type { BodyOf, IdsOf } from '#shared/api/define'
import { ageRule, lightSkier } from '#shared/release/rules'
import { agesForRental } from '#shared/release/agesForRental'
import type { RenterForm } from '#shared/schemas/renters'
import { fittingInputs, rentals, renters } from '../db/schema/schema'
import { Problem } from '../errors'
import { personIdOf, type PersonActor } from './actor'
import type { CommandContext, Service } from './commands'
import { doubtFittings } from './doubt'
import { imageFromDataUrl } from './pictures'
import { shopById } from './shops'

type Does<C> = Service<BodyOf<C>, IdsOf<C>, PersonActor>
type Inputs = typeof fittingInputs.$inferSelect
export type InputValues = Omit<
  typeof fittingInputs.$inferInsert,
  'id' | 'shopId' | 'renterId' | 'salt' | 'createdAt' | 'createdBy'
>

/** Inputs are added, never changed; the renter's newest are the ones that count. */
export async function addInputs(
  context: CommandContext,
  renterId: string,
  values: InputValues,
): Promise<string> {
  const [row] = await context.tx
    .insert(fittingInputs)
    .values({
      ...values,
      shopId: context.actor.shopId,
      renterId,
      salt: randomBytes(16),
      createdBy: personIdOf(context.actor),
      createdAt: context.occurredAt,
    })
    .returning({ id: fittingInputs.id })
  await context.tx
    .update(renters)
    .set({ currentInputsId: row!.id, version: sql`${renters.version} + 1` })
    .where(eq(renters.id, renterId))
  return row!.id
}

/** The age that the table is read with: from the birth date on the rental's days, or as it was said. */
export function tableAge({
  birthDate,
  age,
  startsOn,
  endsOn,
}: Pick<RenterForm, 'birthDate' | 'age' | 'startsOn' | 'endsOn'>): number {
  return birthDate ? agesForRental(birthDate, startsOn, endsOn).age : (age ?? 0)
}

/** Rental, renter and inputs together, the rental locked. */
export async function lockRental(context: CommandContext, rentalId: string) {
  const [found] = await context.tx
    .select({ rental: rentals, renter: renters, inputs: fittingInputs })
    .from(rentals)
    .innerJoin(renters, eq(renters.id, rentals.renterId))
    .innerJoin(fittingInputs, eq(fittingInputs.id, renters.currentInputsId))
    .where(and(eq(rentals.id, rentalId), eq(rentals.shopId, context.actor.shopId)))
    .for('update', { of: rentals })
  if (!found) throw new Problem('items.unknown')
  return found
}

/** What of the inputs a fitting depends on differs: then it is a new row, and fittings of the old one are void. */
export async function replaceInputs(
  context: CommandContext,
  before: Inputs,
  values: InputValues,
): Promise<string> {
  const counts = ({ mass, height, age, skierType, request }: InputValues | Inputs) =>
    JSON.stringify([mass, height, age, skierType, request])
  const said = ({ massSource, heightSource }: InputValues | Inputs) => massSource + heightSource
  if (counts(before) === counts(values) && said(before) === said(values)) return before.id
  const inputsId = await addInputs(context, before.renterId, values)
  await doubtFittings(context, { renterId: before.renterId }, 'renter_data_changed')
  return inputsId
}

const carried = ({ request, requestSignature, requestSignedName, requestSignedAt }: Inputs) => ({
  request,
  requestSignature,
  requestSignedName,
  requestSignedAt,
})

export const changeInputsService: Does<typeof changeInputs> = async (context, body) => {
  const { rental, renter, inputs } = await lockRental(context, body.rentalId)
  if (inputs.id !== body.seenInputsId) throw new Problem('renters.changed')
  const { mass, massSource, height, heightSource, skierType, birthDate } = body
  if (birthDate !== renter.birthDate)
    await context.tx.update(renters).set({ birthDate }).where(eq(renters.id, renter.id))
  const by = personIdOf(context.actor)
  const inputsId = await replaceInputs(context, inputs, {
    ...carried(inputs),
    mass,
    massSource,
    massBy: massSource === 'measured' ? by : null,
    height,
    heightSource,
    heightBy: heightSource === 'measured' ? by : null,
    age: tableAge({ ...body, startsOn: rental.startsOn, endsOn: rental.endsOn }),
    skierType,
  })
  context.touchRental(rental.id)
  return { inputsId }
}

/** Whether nobody may ask for more: 9 and under, or up to 21 kg (47 lb), as cut to whole units. */
export function isChildForValues({ age, mass }: Pick<Inputs, 'age' | 'mass'>): boolean {
  const light =
    mass.unit === 'kg'
      ? Math.floor(mass.value) <= lightSkier.kg
      : Math.floor(mass.unit === 'lb' ? mass.value : mass.stone * 14 + mass.pounds) <= lightSkier.lb
  return age <= ageRule.childUpTo || light
}

export const requestRowService: Does<typeof requestRow> = async (context, body) => {
  const { rental, renter, inputs } = await lockRental(context, body.rentalId)
  if (inputs.id !== body.seenInputsId) throw new Problem('renters.changed')
  if (body.request === 1 && isChildForValues(inputs)) throw new Problem('renters.request_not_allowed')
  if (body.request !== 0 && (!body.signature || !body.signedName)) throw new Problem('renters.unsigned')
  const shop = await shopById(context.tx, context.actor.shopId)
  if (body.request !== 0 && inputs.age < shop.ageOfMajority && body.signedName !== renter.guardianName) {
    throw new Problem('renters.guardian', { name: renter.guardianName ?? '' })
  }
  const signed = body.request !== 0 && body.signature ? imageFromDataUrl(body.signature).bytes : null
  const inputsId = await replaceInputs(context, inputs, {
    ...inputs,
    request: body.request,
    requestSignature: signed,
    requestSignedName: signed ? body.signedName : null,
    requestSignedAt: signed ? context.occurredAt : null,
  })
  context.touchRental(rental.id)
  return { inputsId }
}

/** Names and addresses void nothing. */
export const changeContactService: Does<typeof changeContact> = async (context, body) => {
  const { renter, inputs } = await lockRental(context, body.rentalId)
  if (renter.version !== body.version) throw new Problem('renters.changed')
  const shop = await shopById(context.tx, context.actor.shopId)
  if (inputs.age < shop.ageOfMajority && !body.guardian) throw new Problem('renters.guardian')
  await context.tx
    .update(renters)
    .set({
      firstName: body.firstName,
      lastName: body.lastName,
      email: body.email || null,
      phone: body.phone || null,
      guardianName: body.guardian?.name ?? null,
      guardianRelation: body.guardian?.relation ?? null,
      guardianPhone: body.guardian?.phone || null,
      version: renter.version + 1,
    })
    .where(eq(renters.id, renter.id))
  return { renterId: renter.id }
}
