import { and, asc, desc, eq } from 'drizzle-orm'
import { alias } from 'drizzle-orm/pg-core'
import { dayInZone, rentalDays } from '#shared/dates/days'
import type { OwnBoots, RentalDetail } from '#shared/api/rentals'
import type { GuardianRelation } from '#shared/renters/guardian'
import type { RenterInputs, RenterLocale } from '#shared/schemas/renters'
import type { Reader } from '../../deps'
import { Problem } from '../../errors'
import {
  boots,
  fittingDecisions,
  fittingInputs,
  fittings,
  memberships,
  ownBoots,
  people,
  rentalItems,
  rentals,
  renters,
  shops,
  skiPairs,
} from '../schema/schema'
import { iso, isoOrNull } from './lists'
import { rentalColumns, rentalRow } from './rentals'

const clerk = alias(people, 'clerk')
const massPerson = alias(people, 'mass_person')
const heightPerson = alias(people, 'height_person')
const judge = alias(people, 'judge')
const second = alias(people, 'second')

/** Everything that the counter needs of one rental. */
export async function rentalById(
  db: Reader,
  shopId: string,
  rentalId: string,
  now: Date,
): Promise<RentalDetail> {
  const [found] = await db
    .select({
      row: rentalColumns,
      rental: rentals,
      renter: renters,
      inputs: fittingInputs,
      massBy: massPerson.name,
      heightBy: heightPerson.name,
      shop: shops,
    })
    .from(rentals)
    .innerJoin(renters, eq(renters.id, rentals.renterId))
    .innerJoin(shops, eq(shops.id, rentals.shopId))
    .leftJoin(fittingInputs, eq(fittingInputs.id, renters.currentInputsId))
    .leftJoin(massPerson, eq(massPerson.id, fittingInputs.massBy))
    .leftJoin(heightPerson, eq(heightPerson.id, fittingInputs.heightBy))
    .leftJoin(clerk, eq(clerk.id, rentals.takenBy))
    .where(and(eq(rentals.id, rentalId), eq(rentals.shopId, shopId)))
  if (!found) throw new Problem('rentals.unknown')
  const { row, rental, renter, inputs, massBy, heightBy, shop } = found
  return {
    ...rentalRow(row),
    renter: renterOf(renter),
    inputs: inputs ? inputsOf(inputs, { massBy, heightBy }) : null,
    shoe: rental.shoe,
    ownBootsWanted: rental.ownBoots,
    ownBoots: await ownBootsOf(db, rentalId),
    wishes: rental.wishes,
    rentalDays: rentalDays(rental.startsOn, rental.endsOn),
    items: await itemsOf(db, rentalId),
    fittings: await fittingsOf(db, rentalId),
    decisions: await decisionsOf(db, rentalId),
    shop: {
      today: dayInZone(now, shop.zone),
      ageOfMajority: shop.ageOfMajority,
      nearMassKg: shop.nearMassKg,
      nearHeightCm: shop.nearHeightCm,
    },
  }
}

function renterOf(renter: typeof renters.$inferSelect): RentalDetail['renter'] {
  const { id, firstName, lastName, email, phone, locale, birthDate, guardianName, guardianPhone, version } =
    renter
  return {
    id,
    firstName,
    lastName,
    email,
    phone,
    locale: locale as RenterLocale,
    birthDate,
    guardianName,
    guardianRelation: renter.guardianRelation as GuardianRelation | null,
    guardianPhone,
    version,
  }
}

function inputsOf(
  inputs: typeof fittingInputs.$inferSelect,
  by: Pick<RenterInputs, 'massBy' | 'heightBy'>,
): RenterInputs {
  const { id, mass, massSource, height, heightSource, age, requestSignedName } = inputs
  return {
    id,
    mass,
    massSource,
    height,
    heightSource,
    age,
    requestSignedName,
    ...by,
    skierType: inputs.skierType as RenterInputs['skierType'],
    request: inputs.request as RenterInputs['request'],
    createdAt: iso(inputs.createdAt),
  }
}

/** The latest reading of the renter's own boots; a head technician's needs no second look. */
export async function ownBootsOf(db: Reader, rentalId: string): Promise<OwnBoots | null> {
  const [found] = await db
    .select({ reading: ownBoots, judge: judge.name, roles: memberships.roles, second: second.name })
    .from(ownBoots)
    .innerJoin(judge, eq(judge.id, ownBoots.judgedBy))
    .leftJoin(
      memberships,
      and(eq(memberships.personId, ownBoots.judgedBy), eq(memberships.shopId, ownBoots.shopId)),
    )
    .leftJoin(second, eq(second.id, ownBoots.secondLookBy))
    .where(eq(ownBoots.rentalId, rentalId))
    .orderBy(desc(ownBoots.recordedAt), desc(ownBoots.id))
    .limit(1)
  if (!found) return null
  const { reading } = found
  return {
    id: reading.id,
    description: reading.description,
    soleLengthMm: reading.soleLengthMm,
    soleType: reading.soleType as OwnBoots['soleType'],
    wear: reading.wear,
    judgedBy: found.judge,
    judgedById: reading.judgedBy,
    judgedByHead: found.roles?.includes('head_technician') ?? false,
    secondLookBy: found.second,
    at: iso(reading.occurredAt),
  }
}

async function itemsOf(db: Reader, rentalId: string): Promise<RentalDetail['items']> {
  const rows = await db
    .select({ item: rentalItems, pair: skiPairs.code, boots: boots.code })
    .from(rentalItems)
    .leftJoin(skiPairs, eq(skiPairs.id, rentalItems.itemId))
    .leftJoin(boots, eq(boots.id, rentalItems.itemId))
    .where(eq(rentalItems.rentalId, rentalId))
    .orderBy(asc(rentalItems.outAt), desc(rentalItems.itemKind), asc(rentalItems.side))
  return rows.map(({ item, pair, boots }) => ({
    itemKind: item.itemKind,
    code: pair ?? boots ?? '',
    side: item.side,
    backAt: isoOrNull(item.backAt),
  }))
}

async function fittingsOf(db: Reader, rentalId: string): Promise<RentalDetail['fittings']> {
  const rows = await db
    .select({ fitting: fittings, skiPair: skiPairs.code, boots: boots.code })
    .from(fittings)
    .innerJoin(skiPairs, eq(skiPairs.id, fittings.skiPairId))
    .leftJoin(boots, eq(boots.id, fittings.bootsId))
    .where(eq(fittings.rentalId, rentalId))
    .orderBy(desc(fittings.number))
  return rows.map(({ fitting: { id, number, state, value, claimedAt, endReason, recordId }, ...codes }) => ({
    id,
    number,
    state,
    value,
    endReason,
    recordId,
    ...codes,
    at: iso(claimedAt),
  }))
}

async function decisionsOf(db: Reader, rentalId: string): Promise<RentalDetail['decisions']> {
  const rows = await db
    .select({ decision: fittingDecisions, by: people.name })
    .from(fittingDecisions)
    .innerJoin(people, eq(people.id, fittingDecisions.personId))
    .where(eq(fittingDecisions.rentalId, rentalId))
    .orderBy(desc(fittingDecisions.recordedAt))
  return rows.map(({ decision, by }) => {
    const { id, kind, reason, value, skiPairId, bootsId, ownBootsId, occurredAt } = decision
    return { id, kind, reason, by, at: iso(occurredAt), value, skiPairId, bootsId, ownBootsId }
  })
}
