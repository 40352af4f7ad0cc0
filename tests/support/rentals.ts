import { randomBytes, randomUUID } from 'node:crypto'
import { eq, sql } from 'drizzle-orm'
import { addDays, dayInZone } from '#shared/dates/days'
import { releaseSetting } from '#shared/release/releaseSetting'
import { targetIndicator } from '#shared/track/targetIndicator'
import { trackPlan } from '#shared/track/trackPlan'
import type { SkierType } from '#shared/release/rules'
import type { Height, Mass } from '#shared/units/bodySchemas'
import { fittingInputs, fittings, rentals, renters, shopSequences } from '../../server/db/schema/schema'
import type { TestDatabase } from './database'
import { addStateChange, type TestPair } from './things'

type Db = TestDatabase['db']
type InShop = { shopId: string; siteId: string; personId: string }

export interface TestRental {
  id: string
  renterId: string
  inputsId: string
  number: number
}

export interface RentalValues {
  firstName?: string
  lastName?: string
  birthDate?: string | null
  age?: number
  mass?: Mass
  height?: Height
  skierType?: SkierType
  state?: 'waiting' | 'open'
  ownBoots?: boolean
  days?: number
}

/** A renter at the desk with body values and a rental that begins today. */
export async function addRental(
  db: Db,
  { shopId, siteId, personId, number }: InShop & { number: number },
  values: RentalValues = {},
): Promise<TestRental> {
  const { mass = { unit: 'kg', value: 78 }, height = { unit: 'cm', value: 178 }, age = 34 } = values
  const { firstName = 'Jara', lastName = `Heath ${number}`, skierType = 'II', days = 3 } = values
  const [id, renterId, inputsId] = [randomUUID(), randomUUID(), randomUUID()]
  const now = new Date()
  const startsOn = dayInZone(now, 'Europe/Vienna')
  await db.insert(renters).values({
    id: renterId,
    shopId,
    firstName,
    lastName,
    email: 'jara@renter.test',
    phone: '+43 000 417',
    birthDate: values.birthDate ?? null,
  })
  await db.insert(fittingInputs).values({
    id: inputsId,
    shopId,
    renterId,
    salt: randomBytes(16),
    mass,
    massSource: 'declared',
    height,
    heightSource: 'declared',
    age,
    skierType,
  })
  await db.update(renters).set({ currentInputsId: inputsId }).where(eq(renters.id, renterId))
  const state = values.state ?? 'open'
  await db.insert(rentals).values({
    id,
    shopId,
    siteId,
    renterId,
    day: startsOn,
    number,
    state,
    startsOn,
    endsOn: addDays(startsOn, days - 1),
    ownBoots: values.ownBoots ?? false,
    arrivedAt: now,
    promisedAt: new Date(now.getTime() + 20 * 60_000),
    ...(state === 'open' ? { takenBy: personId, takenAt: now } : {}),
  })
  return { id, renterId, inputsId, number }
}

/**
 * Takes pair and boots for a rental straight in the database, as the claim does. For tests of what happens to a
 * fitting; those of the claim itself use the claim.
 */
export async function addFitting(
  db: Db,
  shop: InShop,
  {
    rental,
    pair,
    boots,
    soleLengthMm = 305,
  }: {
    rental: TestRental
    pair: TestPair
    /** The shop's boots, or a reading of the renter's own. */
    boots: { id: string; own?: boolean }
    soleLengthMm?: number
  },
): Promise<{ id: string; number: number }> {
  const release = releaseSetting({
    mass: { unit: 'kg', value: 78 },
    height: { unit: 'cm', value: 178 },
    age: 34,
    skierType: 'II',
    soleLengthMm,
  })
  const track = trackPlan(pair.track, soleLengthMm)
  if (!release.ok || !track.ok) throw new Error('these cannot be fitted')
  const indicator = targetIndicator(pair.track, release.value)
  if (!indicator.ok) throw new Error('outside the scale')
  const unitTargets = { toe: indicator.value, heel: indicator.value }
  const id = randomUUID()
  const number = await db.transaction(async (tx) => {
    const [next] = await tx
      .update(shopSequences)
      .set({ lastFittingNumber: sql`${shopSequences.lastFittingNumber} + 1` })
      .where(eq(shopSequences.shopId, shop.shopId))
      .returning({ number: shopSequences.lastFittingNumber })
    await tx.insert(fittings).values({
      id,
      shopId: shop.shopId,
      siteId: shop.siteId,
      number: next!.number,
      rentalId: rental.id,
      renterId: rental.renterId,
      inputsId: rental.inputsId,
      skiPairId: pair.id,
      ...(boots.own ? { ownBootsId: boots.id } : { bootsId: boots.id }),
      soleLengthMm,
      release: {
        row: release.row,
        value: release.value,
        sideways: release.sideways,
        twistNm: release.twistNm,
        forwardLeanNm: release.forwardLeanNm,
        rowSteps: [],
      },
      value: release.value,
      track,
      targets: { left: unitTargets, right: unitTargets },
      edition: 'eight-column',
      rulesVersion: 'tests',
      approved: false,
      promisedAt: new Date(),
      claimedBy: shop.personId,
      claimedAt: new Date(),
    })
    const within = tx as unknown as Db
    await addStateChange(within, shop, { kind: 'ski_pair', id: pair.id }, 'racked', 'claimed', {
      subjectId: id,
    })
    if (!boots.own)
      await addStateChange(within, shop, { kind: 'boots', id: boots.id }, 'racked', 'claimed', {
        subjectId: id,
      })
    return next!.number
  })
  return { id, number }
}
