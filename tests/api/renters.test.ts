import { eq } from 'drizzle-orm'
import { beforeAll, describe, expect, it } from 'vitest'
import { changeContact, changeInputs, requestRow, type RentalDetail } from '#shared/api/rentals'
import { fittingInputs, fittings, renters } from '../../server/db/schema/schema'
import type { TestRental } from '../support/rentals'
import { testShop, type TestShop } from '../support/shop'

let shop: TestShop
const staff = ['counter', 'technician', 'head_technician', 'manager'] as const
/** A picture of one white pixel (made for this test). */
const signature =
  'data:image/png;base64,iVBORw0KGgoAAAANSUhEUgAAAAEAAAABCAYAAAAfFcSJAAAADUlEQVR42mP8z8BQDwAEhQGAhKmMIQAAAABJRU5ErkJggg=='

beforeAll(async () => {
  shop = await testShop()
})

const detail = async (id: string) => (await shop.as('counter').get<RentalDetail>(`/api/rentals/${id}`)).body
const fittingState = async (id: string) =>
  (await shop.db.select().from(fittings).where(eq(fittings.id, id)))[0]!

async function fitted(values: Parameters<TestShop['rental']>[0] = {}) {
  const rental = await shop.rental(values)
  const fitting = await shop.fitting({
    rental,
    pair: await shop.rackedPair(),
    boots: await shop.rackedBoots(),
  })
  return { rental, fitting }
}

/** What the desk sends when nothing of the renter's data is different. */
const unchanged = (rental: TestRental) => ({
  rentalId: rental.id,
  seenInputsId: rental.inputsId,
  birthDate: null,
  age: 34,
  mass: { unit: 'kg', value: 78 } as const,
  massSource: 'declared' as const,
  height: { unit: 'cm', value: 178 } as const,
  heightSource: 'declared' as const,
  skierType: 'II' as const,
  skierTypeByRenter: true as const,
})
const contactOf = ({ renter }: RentalDetail) => ({
  firstName: renter.firstName,
  lastName: renter.lastName,
  email: renter.email ?? '',
  phone: renter.phone ?? '',
  locale: renter.locale,
  guardian: null,
  version: renter.version,
})

describe('what a fitting was computed from', () => {
  it('voids the open fitting when mass, height, age or skier type is another', async () => {
    const changes = [
      { mass: { unit: 'kg', value: 78.4 } },
      { height: { unit: 'cm', value: 179 } },
      { age: 35 },
      { skierType: 'I' },
    ] as const
    for (const change of changes) {
      const { rental, fitting } = await fitted()
      const changed = await shop.as('counter').send(changeInputs, { ...unchanged(rental), ...change })
      expect(changed.status).toBe(201)
      expect(changed.ids.inputsId).not.toBe(rental.inputsId)
      expect(await fittingState(fitting.id), JSON.stringify(change)).toMatchObject({
        state: 'void',
        endReason: 'renter_data_changed',
      })
    }
  })

  it('voids it too when the same body is given in another unit, since the table may read it otherwise', async () => {
    const { rental, fitting } = await fitted()
    await shop.as('counter').send(changeInputs, { ...unchanged(rental), mass: { unit: 'lb', value: 172 } })
    expect((await fittingState(fitting.id)).state).toBe('void')
  })

  it('keeps it when the same value was measured, and says by whom', async () => {
    const feet = { unit: 'ft-in', feet: 5, inches: 10 } as const
    const { rental, fitting } = await fitted({ height: feet })
    const body = { ...unchanged(rental), height: feet, massSource: 'measured' as const }
    expect((await shop.as('technician').send(changeInputs, body)).ids.inputsId).toBe(rental.inputsId)
    expect((await fittingState(fitting.id)).state).toBe('claimed')
    expect((await detail(rental.id)).inputs).toMatchObject({
      massSource: 'measured',
      massBy: shop.people.technician.name,
      heightSource: 'declared',
    })
    await shop.as('counter').send(changeInputs, { ...body, heightSource: 'measured' })
    expect((await detail(rental.id)).inputs).toMatchObject({
      massBy: shop.people.technician.name,
      heightBy: shop.people.counter.name,
    })
  })

  it('keeps it when e-mail, phone or name is another', async () => {
    const { rental, fitting } = await fitted()
    const before = await detail(rental.id)
    const changed = await shop.as('counter').send(changeContact, {
      ...contactOf(before),
      rentalId: rental.id,
      email: 'new@renter.test',
      lastName: 'Heath-Fenn',
    })
    expect(changed.status).toBe(201)
    expect((await fittingState(fitting.id)).state).toBe('claimed')
    const after = await detail(rental.id)
    expect(after.renter).toMatchObject({ email: 'new@renter.test', lastName: 'Heath-Fenn' })
    expect(after.inputs?.id).toBe(before.inputs?.id)
  })

  it('is not overwritten by a screen that has not seen the latest', async () => {
    const rental = await shop.rental()
    await shop.as('counter').send(changeInputs, { ...unchanged(rental), age: 35 })
    const late = await shop.as('technician').send(changeInputs, { ...unchanged(rental), age: 36 })
    expect(late).toMatchObject({ status: 409, code: 'renters.changed' })
    const seen = await detail(rental.id)
    await shop.as('counter').send(changeContact, { ...contactOf(seen), rentalId: rental.id })
    const old = await shop.as('technician').send(changeContact, { ...contactOf(seen), rentalId: rental.id })
    expect(old.code).toBe('renters.changed')
  })

  it('is changed by everybody who works in the shop, for nobody of another shop', async () => {
    const other = await shop.another()
    const theirs = await other.rental()
    for (const who of staff) {
      const rental = await shop.rental()
      expect((await shop.as(who).send(changeInputs, { ...unchanged(rental), age: 40 })).status, who).toBe(201)
      expect((await shop.as(who).send(changeInputs, unchanged(theirs))).code, who).toBe('rentals.unknown')
    }
    expect((await shop.stranger().send(changeInputs, unchanged(await shop.rental()))).code).toBe(
      'session.missing',
    )
  })

  it('needs a guardian once the age says so', async () => {
    const rental = await shop.rental()
    const young = await shop.as('counter').send(changeInputs, { ...unchanged(rental), age: 15 })
    expect(young).toMatchObject({ code: 'renters.unfinished', params: { fields: ['guardianName:minor'] } })
    const guardian = { name: 'Alban Heath', relation: 'parent', phone: '+43 000 288' } as const
    const known = await detail(rental.id)
    await shop.as('counter').send(changeContact, { ...contactOf(known), rentalId: rental.id, guardian })
    expect((await shop.as('counter').send(changeInputs, { ...unchanged(rental), age: 15 })).status).toBe(201)
    const without = { ...contactOf(await detail(rental.id)), rentalId: rental.id }
    expect((await shop.as('counter').send(changeContact, without)).params.fields).toEqual([
      'guardianName:minor',
    ])
  })

  it('is not a skier type that the staff chose', async () => {
    const rental = await shop.rental()
    const body = {
      ...unchanged(rental),
      skierType: 'III' as const,
      skierTypeByRenter: false as unknown as true,
    }
    expect((await shop.as('head_technician').send(changeInputs, body)).code).toBe('request.malformed')
  })
})

describe('a signed request for one row lower or higher', () => {
  const signed = { signedName: 'Jara Heath', signature }
  const of = (rental: TestRental) => ({ rentalId: rental.id, seenInputsId: rental.inputsId })

  it('is kept with its signature and name, and voids what was fitted before', async () => {
    const { rental, fitting } = await fitted()
    const asked = await shop.as('counter').send(requestRow, { ...of(rental), request: 1, ...signed })
    expect(asked.status).toBe(201)
    expect((await fittingState(fitting.id)).state).toBe('void')
    const [inputs] = await shop.db
      .select()
      .from(fittingInputs)
      .where(eq(fittingInputs.id, asked.ids.inputsId))
    expect(inputs).toMatchObject({ request: 1, requestSignedName: 'Jara Heath', skierType: 'II' })
    expect(inputs!.requestSignature!.subarray(1, 4).toString()).toBe('PNG')
  })

  it('needs the signature, and a picture as signature', async () => {
    const rental = await shop.rental()
    const bare = { ...of(rental), request: -1 as const, signedName: 'Jara Heath', signature: null }
    expect((await shop.as('counter').send(requestRow, bare)).code).toBe('renters.unsigned')
    const nameless = { ...of(rental), request: -1 as const, signedName: '', signature }
    expect((await shop.as('counter').send(requestRow, nameless)).code).toBe('renters.unsigned')
    const text = {
      ...of(rental),
      request: -1 as const,
      ...signed,
      signature: 'data:image/png;base64,aGVsbG8=',
    }
    expect((await shop.as('counter').send(requestRow, text)).code).toBe('request.malformed')
  })

  it('is never upward for a child of nine and under or up to 21 kg, 47 lb', async () => {
    const small = [
      { age: 9 },
      { mass: { unit: 'kg', value: 21.9 } },
      { mass: { unit: 'lb', value: 47.9 } },
      { mass: { unit: 'st-lb', stone: 3, pounds: 5 } },
    ] as const
    for (const values of small) {
      const rental = await shop.rental({ skierType: 'I', ...values })
      await shop.db
        .update(renters)
        .set({ guardianName: 'Alban Heath', guardianRelation: 'parent' })
        .where(eq(renters.id, rental.renterId))
      const by = { ...signed, signedName: 'Alban Heath' }
      const higher = await shop.as('head_technician').send(requestRow, { ...of(rental), request: 1, ...by })
      expect(higher.code, JSON.stringify(values)).toBe('renters.request_not_allowed')
      expect((await shop.as('counter').send(requestRow, { ...of(rental), request: -1, ...by })).status).toBe(
        201,
      )
    }
  })

  it('is signed by the guardian for a minor', async () => {
    const rental = await shop.rental({ age: 15 })
    await shop.db
      .update(renters)
      .set({ guardianName: 'Alban Heath', guardianRelation: 'parent' })
      .where(eq(renters.id, rental.renterId))
    const child = await shop.as('counter').send(requestRow, { ...of(rental), request: -1, ...signed })
    // A refusal is kept for a week: it names nobody.
    expect(child).toMatchObject({ status: 422, code: 'renters.guardian' })
    expect(child.params).toEqual({})
    const guardian = { ...of(rental), request: 1 as const, ...signed, signedName: 'Alban Heath' }
    expect((await shop.as('counter').send(requestRow, guardian)).status).toBe(201)
  })

  it('goes on with changed data when it is for less, and is signed again when it is for more', async () => {
    for (const [request, kept] of [
      [-1, -1],
      [1, 0],
    ] as const) {
      const rental = await shop.rental()
      const { ids } = await shop.as('counter').send(requestRow, { ...of(rental), request, ...signed })
      const body = { ...unchanged(rental), seenInputsId: ids.inputsId, age: 36 }
      await shop.as('counter').send(changeInputs, body)
      expect((await detail(rental.id)).inputs?.request).toBe(kept)
    }
  })

  it('is taken back without a signature', async () => {
    const rental = await shop.rental()
    const { ids } = await shop.as('counter').send(requestRow, { ...of(rental), request: 1, ...signed })
    const back = {
      rentalId: rental.id,
      seenInputsId: ids.inputsId,
      request: 0 as const,
      signedName: '',
      signature: null,
    }
    await shop.as('counter').send(requestRow, back)
    expect((await detail(rental.id)).inputs).toMatchObject({ request: 0, requestSignedName: null })
  })

  it('without a signature is refused by the database itself', async () => {
    const rental = await shop.rental()
    const [row] = await shop.db.select().from(fittingInputs).where(eq(fittingInputs.id, rental.inputsId))
    const { id: _id, ...values } = row!
    const unsigned = shop.db.insert(fittingInputs).values({ ...values, request: 1 })
    await expect(unsigned).rejects.toMatchObject({ cause: { constraint: 'fitting_inputs_request' } })
  })

  it('and every body value stays as it was said: the program may not change them', async () => {
    const rental = await shop.rental()
    const change = shop.db.update(fittingInputs).set({ age: 35 }).where(eq(fittingInputs.id, rental.inputsId))
    await expect(change).rejects.toMatchObject({ cause: { code: '42501' } })
  })
})
