import { and, asc, eq } from 'drizzle-orm'
import type { ReadySet } from '#shared/api/handOvers'
import { ageOn } from '#shared/dates/days'
import type { Reader } from '../../deps'
import {
  boots,
  fittingInputs,
  fittingRecords,
  fittings,
  people,
  rentals,
  renters,
  shops,
  skiPairs,
} from '../schema/schema'
import { calledName } from './names'

/** Sets that wait for their renter, those promised first on top. */
export async function readySets(db: Reader, shopId: string, siteId: string | null): Promise<ReadySet[]> {
  const rows = await db
    .select({
      fittingId: fittings.id,
      recordId: fittingRecords.id,
      number: rentals.number,
      renter: { firstName: renters.firstName, lastName: renters.lastName },
      pairCode: skiPairs.code,
      bootsCode: boots.code,
      preparedAt: fittingRecords.signedAt,
      promisedAt: fittings.promisedAt,
      signedBy: people.name,
    })
    .from(fittings)
    .innerJoin(fittingRecords, eq(fittingRecords.id, fittings.recordId))
    .innerJoin(people, eq(people.id, fittingRecords.signedBy))
    .innerJoin(rentals, eq(rentals.id, fittings.rentalId))
    .innerJoin(renters, eq(renters.id, fittings.renterId))
    .innerJoin(skiPairs, eq(skiPairs.id, fittings.skiPairId))
    .leftJoin(boots, eq(boots.id, fittings.bootsId))
    .where(
      and(
        eq(fittings.shopId, shopId),
        eq(fittings.state, 'prepared'),
        siteId ? eq(fittings.siteId, siteId) : undefined,
      ),
    )
    .orderBy(asc(fittings.promisedAt), asc(fittings.number))
  return rows.map(({ renter, ...row }) => ({
    ...row,
    name: calledName(renter),
    preparedAt: row.preparedAt.toISOString(),
    promisedAt: row.promisedAt.toISOString(),
  }))
}

/** Whether somebody else signs: under the age of majority, by the birth date or by the age that was given. */
export async function guardianSigns(db: Reader, fittingId: string): Promise<boolean> {
  const [row] = await db
    .select({
      birthDate: renters.birthDate,
      startsOn: rentals.startsOn,
      age: fittingInputs.age,
      majority: shops.ageOfMajority,
    })
    .from(fittings)
    .innerJoin(renters, eq(renters.id, fittings.renterId))
    .innerJoin(rentals, eq(rentals.id, fittings.rentalId))
    .innerJoin(shops, eq(shops.id, fittings.shopId))
    .leftJoin(fittingInputs, eq(fittingInputs.id, fittings.inputsId))
    .where(eq(fittings.id, fittingId))
  if (!row) return false
  const age = row.birthDate ? ageOn(row.birthDate, row.startsOn) : row.age
  return age !== null && age < row.majority
}
