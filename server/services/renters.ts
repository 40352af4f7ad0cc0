import { randomBytes } from 'node:crypto'
import { and, eq, inArray, sql } from 'drizzle-orm'
import type { BodyOf, IdsOf } from '#shared/api/define'
import type { changeContact, changeInputs, requestRow } from '#shared/api/rentals'
import { isChildForValues } from '#shared/fitting/decidedValue'
import {
  ageForTable,
  ageOnFirstDay,
  bornProblems,
  contactProblems,
  typeProblems,
  type FieldProblem,
} from '#shared/renters/formRules'
import type { Contact, ValueSource } from '#shared/schemas/renters'
import { fittingInputs, rentals, renters } from '../db/schema/schema'
import { Problem } from '../errors'
import { personIdOf, type PersonActor } from './actor'
import type { CommandContext, Service } from './commands'
import { doubtFittings } from './doubt'
import { imageFromDataUrl } from './pictures'
import { shopById } from './shops'

type Does<C> = Service<BodyOf<C>, IdsOf<C>, PersonActor>
type Inputs = typeof fittingInputs.$inferSelect
type Renter = typeof renters.$inferSelect
export type InputValues = Omit<
  typeof fittingInputs.$inferInsert,
  'id' | 'shopId' | 'renterId' | 'salt' | 'createdAt' | 'createdBy'
>

/** What a form or a change still lacks, as `field:reason` each; nothing was saved. */
export function refuseUnfinished(problems: FieldProblem[]) {
  if (problems.length === 0) return
  throw new Problem('renters.unfinished', {
    fields: problems.map(({ field, reason }) => `${field}:${reason}`),
  })
}

/** Inputs are added with a salt of their own; the renter's newest are the ones that count. */
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
      salt: randomBytes(32),
      createdBy: personIdOf(context.actor),
    })
    .returning({ id: fittingInputs.id })
  await context.tx
    .update(renters)
    .set({ currentInputsId: row!.id, version: sql`${renters.version} + 1` })
    .where(eq(renters.id, renterId))
  return row!.id
}

/**
 * Rental, renter and inputs together, rental and renter locked; another shop's is answered like an unknown one. The
 * inputs are read once the lock is held: read along with it they would be those from before the wait.
 */
export async function lockRental(context: CommandContext, rentalId: string) {
  const [found] = await context.tx
    .select({ rental: rentals, renter: renters })
    .from(rentals)
    .innerJoin(renters, eq(renters.id, rentals.renterId))
    .where(and(eq(rentals.id, rentalId), eq(rentals.shopId, context.actor.shopId)))
    .for('update')
  if (!found) throw new Problem('rentals.unknown')
  const { currentInputsId } = found.renter
  const [inputs] = currentInputsId
    ? await context.tx.select().from(fittingInputs).where(eq(fittingInputs.id, currentInputsId))
    : []
  return { ...found, inputs: inputs ?? null }
}

/** Name, contact and guardian as the renter's row keeps them. */
export const contactColumns = ({ firstName, lastName, email, phone, locale, guardian }: Contact) => ({
  firstName,
  lastName,
  email: email || null,
  phone: phone || null,
  locale,
  guardianName: guardian?.name ?? null,
  guardianRelation: guardian?.relation ?? null,
  guardianPhone: guardian?.phone || null,
})

/** The database gives the keys of a value back in an order of its own. */
const same = (a: object, b: object) =>
  JSON.stringify(Object.entries(a).sort()) === JSON.stringify(Object.entries(b).sort())

type BodyValues = Pick<InputValues, 'mass' | 'height' | 'age' | 'skierType'>

const sameBody = (a: BodyValues, b: BodyValues) =>
  same(a.mass, b.mass) && same(a.height, b.height) && a.age === b.age && a.skierType === b.skierType

/**
 * Makes these the renter's inputs. A changed value is a new row and puts the renter's fittings in doubt; the same
 * values said by somebody else (now measured, say) stay the same row and void nothing.
 */
export async function replaceInputs(
  context: CommandContext,
  before: Inputs,
  now: InputValues,
): Promise<string> {
  if (!sameBody(before, now) || before.request !== (now.request ?? 0)) {
    const inputsId = await addInputs(context, before.renterId, now)
    await doubtFittings(context, { renterId: before.renterId }, 'renter_data_changed')
    return inputsId
  }
  const { massSource, massBy, heightSource, heightBy } = now
  await context.tx
    .update(fittingInputs)
    .set({ massSource, massBy, heightSource, heightBy })
    .where(eq(fittingInputs.id, before.id))
  return before.id
}

/** Who says a value: whoever measured it before, while it is still theirs, else who says so now. */
export function saidBy(
  context: CommandContext,
  source: ValueSource,
  before: { value: object; by: string | null; now: object } | null = null,
): string | null {
  if (source === 'declared') return null
  return before?.by && same(before.value, before.now) ? before.by : personIdOf(context.actor)
}

const noRequest = { request: 0, requestSignature: null, requestSignedName: null, requestSignedAt: null }

/**
 * The signed request that goes on with these values: as it is while they are the same; with changed ones only for a
 * lower value, a higher one is signed again.
 */
export function carriedRequest(before: Inputs, now: BodyValues) {
  if (!sameBody(before, now) && before.request > 0) return noRequest
  const { request, requestSignature, requestSignedName, requestSignedAt } = before
  return { request, requestSignature, requestSignedName, requestSignedAt }
}

/** The boards hear of every rental of a renter that is not over. */
async function touchRentalsOf(context: CommandContext, renterId: string) {
  const live = await context.tx
    .select({ id: rentals.id })
    .from(rentals)
    .where(and(eq(rentals.renterId, renterId), inArray(rentals.state, ['waiting', 'open', 'out'])))
  for (const { id } of live) context.touchRental(id)
}

/** Who turns out to be a minor needs a guardian before anything else. */
const guardianProblems = (renter: Renter, age: number | null, ageOfMajority: number): FieldProblem[] =>
  age !== null && age < ageOfMajority && !renter.guardianName
    ? [{ field: 'guardianName', reason: 'minor' }]
    : []

export const changeInputsService: Does<typeof changeInputs> = async (context, body) => {
  const { rental, renter, inputs } = await lockRental(context, body.rentalId)
  if (!inputs || inputs.id !== body.seenInputsId) throw new Problem('renters.changed')
  const { ageOfMajority } = await shopById(context.tx, context.actor.shopId)
  const { mass, massSource, height, heightSource, skierType, birthDate } = body
  const age = ageForTable(body, rental)
  refuseUnfinished([
    ...bornProblems(body, rental.startsOn),
    ...typeProblems(skierType, mass),
    ...guardianProblems(renter, ageOnFirstDay(body, rental.startsOn), ageOfMajority),
  ])
  if (age === null) throw new Problem('request.malformed')
  if (birthDate !== renter.birthDate)
    await context.tx.update(renters).set({ birthDate }).where(eq(renters.id, renter.id))
  const massBefore = { value: inputs.mass, by: inputs.massBy, now: mass }
  const heightBefore = { value: inputs.height, by: inputs.heightBy, now: height }
  const inputsId = await replaceInputs(context, inputs, {
    ...carriedRequest(inputs, { mass, height, age, skierType }),
    mass,
    massSource,
    massBy: saidBy(context, massSource, massBefore),
    height,
    heightSource,
    heightBy: saidBy(context, heightSource, heightBefore),
    age,
    skierType,
  })
  await touchRentalsOf(context, renter.id)
  return { inputsId }
}

export const requestRowService: Does<typeof requestRow> = async (context, body) => {
  const { rental, renter, inputs } = await lockRental(context, body.rentalId)
  if (!inputs || inputs.id !== body.seenInputsId) throw new Problem('renters.changed')
  if (body.request === 1 && isChildForValues(inputs)) throw new Problem('renters.request_not_allowed')
  const request =
    body.request === 0 ? noRequest : await signedRequest(context, body, { rental, renter, inputs })
  const { mass, massSource, massBy, height, heightSource, heightBy, age, skierType } = inputs
  const inputsId = await replaceInputs(context, inputs, {
    mass,
    massSource,
    massBy,
    height,
    heightSource,
    heightBy,
    age,
    skierType,
    ...request,
  })
  await touchRentalsOf(context, renter.id)
  return { inputsId }
}

/** The request with its signature; for a minor it is the guardian's. */
async function signedRequest(
  context: CommandContext,
  { request, signature, signedName }: BodyOf<typeof requestRow>,
  { rental, renter, inputs }: { rental: typeof rentals.$inferSelect; renter: Renter; inputs: Inputs },
) {
  if (!signature || !signedName) throw new Problem('renters.unsigned')
  const { ageOfMajority } = await shopById(context.tx, context.actor.shopId)
  const age = ageOnFirstDay({ birthDate: renter.birthDate, age: inputs.age }, rental.startsOn) ?? inputs.age
  if (age < ageOfMajority && signedName !== renter.guardianName) throw new Problem('renters.guardian')
  const { bytes, type } = imageFromDataUrl(signature)
  if (type !== 'image/png') throw new Problem('request.malformed')
  return {
    request,
    requestSignature: bytes,
    requestSignedName: signedName,
    requestSignedAt: context.occurredAt,
  }
}

/** Names and addresses void nothing. */
export const changeContactService: Does<typeof changeContact> = async (
  context,
  { rentalId, version, ...contact },
) => {
  const { rental, renter, inputs } = await lockRental(context, rentalId)
  if (renter.version !== version) throw new Problem('renters.changed')
  const { ageOfMajority } = await shopById(context.tx, context.actor.shopId)
  const age = ageOnFirstDay({ birthDate: renter.birthDate, age: inputs?.age ?? null }, rental.startsOn)
  refuseUnfinished(contactProblems(contact, age, ageOfMajority))
  await context.tx
    .update(renters)
    .set({ ...contactColumns(contact), version: renter.version + 1 })
    .where(eq(renters.id, renter.id))
  await touchRentalsOf(context, renter.id)
  return { renterId: renter.id }
}
