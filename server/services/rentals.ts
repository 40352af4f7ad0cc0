import { and, eq, inArray, sql } from 'drizzle-orm'
import type { cancelRental, changePeriod, createRental, takeRental } from '#shared/api/rentals'
import type { BodyOf, IdsOf } from '#shared/api/define'
import { rentalDays } from '#shared/dates/days'
import { individualTestFromDays } from '#shared/renters/period'
import { ageForTable, ageOnFirstDay, formProblems, periodProblems } from '#shared/renters/formRules'
import type { Period, RenterForm } from '#shared/schemas/renters'
import { openFittingStates } from '#shared/lifecycle/fittingStates'
import { dayNumbers, fittings, people, rentals, renters } from '../db/schema/schema'
import { Problem } from '../errors'
import { personIdOf, type PersonActor } from './actor'
import type { CommandContext, Service } from './commands'
import { doubtFittings, endFitting } from './doubt'
import {
  addInputs,
  carriedRequest,
  contactColumns,
  lockRental,
  refuseUnfinished,
  replaceInputs,
  saidBy,
  type InputValues,
} from './renters'
import { requireSite, shopById, shopDay } from './shops'
import { currentText, requireUsable } from './texts'

type Does<C> = Service<BodyOf<C>, IdsOf<C>, PersonActor>

type Sources = Pick<InputValues, 'massSource' | 'massBy' | 'heightSource' | 'heightBy'>

/** Refuses a form that the shop cannot use yet, field by field; answers the age that the table is read with. */
export async function usableForm(context: CommandContext, form: RenterForm) {
  const shop = await shopById(context.tx, context.actor.shopId)
  const today = shopDay(shop, context.deps.now())
  refuseUnfinished(formProblems(form, { today, ageOfMajority: shop.ageOfMajority }))
  const age = ageForTable(form, form)
  if (age === null) throw new Problem('request.malformed')
  return { shop, age }
}

/** Renter, inputs and rental from a form, whoever typed it. */
export async function addRental(
  context: CommandContext,
  form: RenterForm,
  arrival: { siteId: string; state: 'waiting' | 'open'; arrivedAt: Date; sources: Sources },
) {
  const { tx, actor } = context
  const { siteId, state, arrivedAt, sources } = arrival
  const { shop, age } = await usableForm(context, form)
  await requireSite(tx, shop.id, siteId)
  // The way of skiing is chosen by sentences: a real shop uses none that nobody of it signed.
  await requireUsable(tx, shop.id, await currentText(tx, shop.id, 'skier_types', form.locale))
  const [renter] = await tx
    .insert(renters)
    .values({ shopId: shop.id, ...contactColumns(form), birthDate: form.birthDate })
    .returning({ id: renters.id })
  const renterId = renter!.id
  const { mass, height, skierType } = form
  await addInputs(context, renterId, { ...sources, mass, height, age, skierType })
  const day = shopDay(shop, arrivedAt)
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
      arrivedAt,
      promisedAt: new Date(arrivedAt.getTime() + shop.promiseMinutes * 60_000),
      takenBy: taken ? personIdOf(actor) : null,
      takenAt: taken ? arrivedAt : null,
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
  const sources = {
    massSource,
    massBy: saidBy(context, massSource),
    heightSource,
    heightBy: saidBy(context, heightSource),
  }
  return addRental(context, form, { siteId, state: 'open', arrivedAt: context.occurredAt, sources })
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

/** Somebody does not come, or goes: open fittings are given back and their items go to the racks. */
export const cancelRentalService: Does<typeof cancelRental> = async (context, { rentalId, reason }) => {
  const { rental } = await lockRental(context, rentalId)
  if (rental.state !== 'waiting' && rental.state !== 'open')
    throw new Problem('rentals.state', { state: rental.state })
  const open = await context.tx
    .select()
    .from(fittings)
    .where(and(eq(fittings.rentalId, rentalId), inArray(fittings.state, [...openFittingStates])))
    .orderBy(fittings.id)
    .for('update')
  for (const fitting of open) await endFitting(context, fitting, { state: 'given_back', reason })
  await context.tx
    .update(rentals)
    .set({ state: 'cancelled', version: rental.version + 1 })
    .where(eq(rentals.id, rentalId))
  context.touchRental(rentalId)
  return { rentalId }
}

/**
 * Other days may mean another age for the table, and a guardian; and a period that now needs an individual test puts
 * what was fitted without one in doubt.
 */
export const changePeriodService: Does<typeof changePeriod> = async (context, { rentalId, ...days }) => {
  const { rental, renter, inputs } = await lockRental(context, rentalId)
  if (rental.state === 'returned' || rental.state === 'cancelled')
    throw new Problem('rentals.state', { state: rental.state })
  const shop = await shopById(context.tx, context.actor.shopId)
  const today = shopDay(shop, context.deps.now())
  const firstDayAge = ageOnFirstDay({ birthDate: renter.birthDate, age: inputs?.age ?? null }, days.startsOn)
  const minor = firstDayAge !== null && firstDayAge < shop.ageOfMajority && !renter.guardianName
  refuseUnfinished([
    ...periodProblems(days, days.startsOn === rental.startsOn ? null : today),
    ...(minor ? [{ field: 'guardianName' as const, reason: 'minor' }] : []),
  ])
  await context.tx
    .update(rentals)
    .set({ ...days, version: rental.version + 1 })
    .where(eq(rentals.id, rentalId))
  if (inputs) {
    const age = ageForTable({ birthDate: renter.birthDate, age: inputs.age }, days) ?? inputs.age
    const { mass, massSource, massBy, height, heightSource, heightBy, skierType } = inputs
    const values = { mass, massSource, massBy, height, heightSource, heightBy, skierType, age }
    await replaceInputs(context, inputs, { ...values, ...carriedRequest(inputs, values) })
  }
  if (isLong(days) && !isLong(rental)) {
    await doubtFittings(context, { renterId: renter.id }, 'renter_data_changed')
  }
  context.touchRental(rentalId)
  return { rentalId }
}

const isLong = ({ startsOn, endsOn }: Period) => rentalDays(startsOn, endsOn) >= individualTestFromDays
