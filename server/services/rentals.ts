import { and, desc, eq, inArray, sql } from 'drizzle-orm'
import type {
  cancelRental,
  changePeriod,
  createRental,
  readOwnBoots,
  secondLook,
  takeRental,
} from '#shared/api/rentals'
import type { BodyOf, IdsOf } from '#shared/api/define'
import { may } from '#shared/permissions'
import type { RenterForm } from '#shared/schemas/renters'
import { dayNumbers, fittings, ownBoots, people, rentals, renters, sites } from '../db/schema/schema'
import { Problem } from '../errors'
import { personIdOf, type PersonActor } from './actor'
import type { CommandContext, Service } from './commands'
import { doubtFittings, endFitting } from './doubt'
import { addInputs, lockRental, replaceInputs, tableAge, type InputValues } from './renters'
import { shopById, shopDay } from './shops'

type Does<C> = Service<BodyOf<C>, IdsOf<C>, PersonActor>

type Sources = Pick<InputValues, 'massSource' | 'massBy' | 'heightSource' | 'heightBy'>

/** Renter, inputs and rental from a form, whoever typed it. */
export async function addRental(
  context: CommandContext,
  form: RenterForm,
  { siteId, state, sources }: { siteId: string; state: 'waiting' | 'open'; sources: Sources },
) {
  const { tx, actor, occurredAt } = context
  const shop = await shopById(tx, actor.shopId)
  if (!(await tx.$count(sites, and(eq(sites.id, siteId), eq(sites.shopId, shop.id)))))
    throw new Problem('items.unknown')
  const age = tableAge(form)
  if (age < shop.ageOfMajority && !form.guardian) throw new Problem('renters.guardian')
  const [renter] = await tx
    .insert(renters)
    .values({
      shopId: shop.id,
      firstName: form.firstName,
      lastName: form.lastName,
      email: form.email || null,
      phone: form.phone || null,
      locale: form.locale,
      birthDate: form.birthDate,
      guardianName: form.guardian?.name,
      guardianRelation: form.guardian?.relation,
      guardianPhone: form.guardian?.phone || null,
    })
    .returning({ id: renters.id })
  const renterId = renter!.id
  await addInputs(context, renterId, {
    ...sources,
    mass: form.mass,
    height: form.height,
    age,
    skierType: form.skierType,
  })
  const day = shopDay(shop, occurredAt)
  const taken = state === 'open'
  const [rental] = await tx
    .insert(rentals)
    .values({
      shopId: shop.id,
      siteId,
      renterId,
      day,
      number: await nextDayNumber(context, day),
      state,
      startsOn: form.startsOn,
      endsOn: form.endsOn,
      ownBoots: form.ownBoots,
      shoe: form.shoe,
      wishes: form.wishes,
      arrivedAt: occurredAt,
      promisedAt: new Date(occurredAt.getTime() + shop.promiseMinutes * 60_000),
      takenBy: taken ? personIdOf(actor) : null,
      takenAt: taken ? occurredAt : null,
    })
    .returning({ id: rentals.id })
  context.touchRental(rental!.id)
  return { rentalId: rental!.id, renterId }
}

/** The next short number of the day. */
async function nextDayNumber(context: CommandContext, day: string): Promise<number> {
  const [row] = await context.tx
    .insert(dayNumbers)
    .values({ shopId: context.actor.shopId, day, last: 1 })
    .onConflictDoUpdate({
      target: [dayNumbers.shopId, dayNumbers.day],
      set: { last: sql`${dayNumbers.last} + 1` },
    })
    .returning({ last: dayNumbers.last })
  return row!.last
}

export const createRentalService: Does<typeof createRental> = async (
  context,
  { siteId, form, massSource, heightSource },
) => {
  const by = personIdOf(context.actor)
  const sources = {
    massSource,
    massBy: massSource === 'measured' ? by : null,
    heightSource,
    heightBy: heightSource === 'measured' ? by : null,
  }
  return addRental(context, form, { siteId, state: 'open', sources })
}

/** The desk takes somebody who filled in the form; a second clerk is told who was faster. */
export const takeRentalService: Does<typeof takeRental> = async (context, { rentalId }) => {
  const { rental } = await lockRental(context, rentalId)
  if (rental.state !== 'waiting') {
    const [by] = rental.takenBy
      ? await context.tx.select({ name: people.name }).from(people).where(eq(people.id, rental.takenBy))
      : []
    throw new Problem('rentals.taken', {
      by: by?.name ?? '',
      since: rental.takenAt?.toISOString() ?? '',
      state: rental.state,
    })
  }
  await context.tx
    .update(rentals)
    .set({
      state: 'open',
      takenBy: context.actor.personId,
      takenAt: context.occurredAt,
      version: rental.version + 1,
    })
    .where(eq(rentals.id, rentalId))
  context.touchRental(rentalId)
  return { rentalId }
}

/** Somebody does not come, or goes: open fittings are given back. */
export const cancelRentalService: Does<typeof cancelRental> = async (context, { rentalId }) => {
  const { rental } = await lockRental(context, rentalId)
  if (rental.state !== 'waiting' && rental.state !== 'open')
    throw new Problem('rentals.state', { state: rental.state })
  const open = await context.tx
    .select()
    .from(fittings)
    .where(and(eq(fittings.rentalId, rentalId), inArray(fittings.state, ['claimed', 'prepared'])))
    .for('update')
  for (const fitting of open) await endFitting(context, fitting, { state: 'given_back', reason: 'no_show' })
  await context.tx
    .update(rentals)
    .set({ state: 'cancelled', version: rental.version + 1 })
    .where(eq(rentals.id, rentalId))
  context.touchRental(rentalId)
  return { rentalId }
}

/** Other days may mean another age for the table. */
export const changePeriodService: Does<typeof changePeriod> = async (
  context,
  { rentalId, startsOn, endsOn },
) => {
  if (endsOn < startsOn) throw new Problem('request.malformed')
  const { rental, renter, inputs } = await lockRental(context, rentalId)
  await context.tx
    .update(rentals)
    .set({ startsOn, endsOn, version: rental.version + 1 })
    .where(eq(rentals.id, rentalId))
  const age = tableAge({ birthDate: renter.birthDate, age: inputs.age, startsOn, endsOn })
  await replaceInputs(context, inputs, { ...inputs, age })
  context.touchRental(rentalId)
  return { rentalId }
}

/** The renter's own boots, as somebody read and judged them now. A head technician's judgement needs no second look. */
export const readOwnBootsService: Does<typeof readOwnBoots> = async (context, body) => {
  const { rental } = await lockRental(context, body.rentalId)
  const [before] = await context.tx
    .select()
    .from(ownBoots)
    .where(eq(ownBoots.rentalId, rental.id))
    .orderBy(desc(ownBoots.recordedAt))
    .limit(1)
  const [row] = await context.tx
    .insert(ownBoots)
    .values({
      ...body,
      shopId: context.actor.shopId,
      judgedBy: context.actor.personId,
      occurredAt: context.occurredAt,
    })
    .returning({ id: ownBoots.id })
  const same =
    before &&
    before.soleLengthMm === body.soleLengthMm &&
    before.soleType === body.soleType &&
    before.wear === body.wear
  if (before && !same) await doubtFittings(context, { renterId: rental.renterId }, 'sole_changed')
  context.touchRental(rental.id)
  return { ownBootsId: row!.id }
}

export const secondLookService: Does<typeof secondLook> = async (context, { ownBootsId }) => {
  const [row] = await context.tx
    .select()
    .from(ownBoots)
    .where(and(eq(ownBoots.id, ownBootsId), eq(ownBoots.shopId, context.actor.shopId)))
    .for('update')
  if (!row) throw new Problem('items.unknown')
  if (row.judgedBy === context.actor.personId) throw new Problem('ownBoots.same_person')
  await context.tx
    .update(ownBoots)
    .set({ secondLookBy: context.actor.personId })
    .where(eq(ownBoots.id, ownBootsId))
  context.touchRental(row.rentalId)
  return { ownBootsId }
}

/** Whether somebody beside the one who read the boots stands for them. */
export const secondLookDone = (
  row: Pick<typeof ownBoots.$inferSelect, 'secondLookBy'>,
  judgedByRoles: readonly string[],
) => row.secondLookBy !== null || may(judgedByRoles as Parameters<typeof may>[0], 'fittings.decide')
