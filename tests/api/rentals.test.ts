import { randomUUID } from 'node:crypto'
import { eq } from 'drizzle-orm'
import { beforeAll, describe, expect, it } from 'vitest'
import {
  cancelRental,
  changePeriod,
  createRental,
  readOwnBoots,
  secondLook,
  takeRental,
  type RentalDetail,
  type RentalRow,
} from '#shared/api/rentals'
import { addDays } from '#shared/dates/days'
import { callBacks, fittings, rentals, skiPairs } from '../../server/db/schema/schema'
import { filledForm, today } from '../support/forms'
import { testShop, type TestShop } from '../support/shop'

let shop: TestShop
const staff = ['counter', 'technician', 'head_technician', 'manager'] as const

beforeAll(async () => {
  shop = await testShop()
})

const walkIn = (form = filledForm()) => ({
  siteId: shop.sites.lower,
  form,
  massSource: 'measured' as const,
  heightSource: 'declared' as const,
  skierTypeByRenter: true as const,
})
const detail = async (id: string) => (await shop.as('counter').get<RentalDetail>(`/api/rentals/${id}`)).body
const found = async (query: Record<string, string>) =>
  (await shop.as('counter').get<{ rows: RentalRow[] }>('/api/rentals', query)).body.rows
const fittingState = async (id: string) =>
  (await shop.db.select().from(fittings).where(eq(fittings.id, id)))[0]!

/** A rental with a pair and the shop's boots claimed for it. */
async function fitted(values: Parameters<TestShop['rental']>[0] = {}) {
  const rental = await shop.rental(values)
  const pair = await shop.rackedPair()
  const boots = await shop.rackedBoots()
  const fitting = await shop.fitting({ rental, pair, boots })
  return { rental, pair, boots, fitting }
}

describe('a walk-in typed at the desk', () => {
  it('is open and taken at once, by everybody who works in the shop', async () => {
    for (const who of staff) {
      const made = await shop.as(who).send(createRental, walkIn())
      expect(made.status, who).toBe(201)
      const rental = await detail(made.ids.rentalId)
      expect(rental).toMatchObject({ state: 'open', takenBy: shop.people[who].name, name: 'Orla Fenn' })
    }
    expect((await shop.stranger().send(createRental, walkIn())).code).toBe('session.missing')
  })

  it('says of each body value whether it was declared or measured, and by whom', async () => {
    const made = await shop.as('technician').send(createRental, walkIn())
    expect((await detail(made.ids.rentalId)).inputs).toMatchObject({
      mass: { unit: 'st-lb', stone: 11, pounds: 3 },
      massSource: 'measured',
      massBy: shop.people.technician.name,
      heightSource: 'declared',
      heightBy: null,
    })
  })

  it('is refused where the renter did not choose the skier type', async () => {
    const body = { ...walkIn(), skierTypeByRenter: false as unknown as true }
    expect((await shop.as('counter').send(createRental, body)).code).toBe('request.malformed')
  })

  it('is held to the same rules as the renter’s phone', async () => {
    const refused = await shop.as('counter').send(createRental, walkIn(filledForm({ age: 12 })))
    expect(refused).toMatchObject({
      status: 422,
      code: 'renters.unfinished',
      params: { fields: ['guardianName:minor'] },
    })
  })

  it('is not made at another shop’s site', async () => {
    const other = await shop.another()
    const refused = await shop.as('counter').send(createRental, { ...walkIn(), siteId: other.sites.lower })
    expect(refused.code).toBe('sites.unknown')
  })

  it('is one rental when the desk sends it twice', async () => {
    const id = randomUUID()
    const first = await shop.as('counter').send(createRental, walkIn(), { envelope: { id } })
    const again = await shop
      .as('counter')
      .send(createRental, walkIn(), { envelope: { id, occurredAt: new Date().toISOString() } })
    expect(again.ids).toEqual(first.ids)
  })
})

describe('taking somebody who filled in the form', () => {
  it('is done once: the second clerk is told who has them, since when', async () => {
    const { id } = await shop.rental({ state: 'waiting' })
    const answers = await Promise.all([
      shop.as('counter').send(takeRental, { rentalId: id }),
      shop.as('technician').send(takeRental, { rentalId: id }),
    ])
    expect(answers.map(({ status }) => status).sort()).toEqual([201, 409])
    const winner = answers[0].status === 201 ? 'counter' : 'technician'
    const refused = answers.find(({ status }) => status === 409)!
    expect(refused).toMatchObject({
      code: 'rentals.taken',
      params: { by: shop.people[winner].name, state: 'open' },
    })
    expect(Date.parse(String(refused.params.since))).toBeGreaterThan(0)
  })

  it('is for everybody of this shop and for nobody of another', async () => {
    const other = await shop.another()
    const theirs = await other.rental({ state: 'waiting' })
    for (const who of staff) {
      const { id } = await shop.rental({ state: 'waiting' })
      expect((await shop.as(who).send(takeRental, { rentalId: id })).status, who).toBe(201)
      expect((await shop.as(who).send(takeRental, { rentalId: theirs.id })).code).toBe('rentals.unknown')
      expect((await shop.as(who).get(`/api/rentals/${theirs.id}`)).status).toBe(404)
    }
    const { id } = await shop.rental({ state: 'waiting' })
    expect((await shop.stranger().send(takeRental, { rentalId: id })).code).toBe('session.missing')
    expect((await shop.stranger().get('/api/rentals')).status).toBe(401)
    expect((await shop.stranger().get(`/api/rentals/${id}`)).status).toBe(401)
  })

  it('is told to the boards without a name', async () => {
    const { id } = await shop.rental({ state: 'waiting', lastName: 'Quillmark' })
    await shop.as('counter').send(takeRental, { rentalId: id })
    const { event } = shop.app.events.at(-1)!
    expect(event.rentals).toMatchObject([{ id, state: 'open' }])
    expect(JSON.stringify(event)).not.toContain('Quillmark')
  })
})

describe('somebody who goes away', () => {
  it('leaves their skis and boots in the racks, the reason kept', async () => {
    const { rental, pair, fitting } = await fitted()
    const gone = await shop.as('counter').send(cancelRental, { rentalId: rental.id, reason: 'no_show' })
    expect(gone.status).toBe(201)
    expect(await fittingState(fitting.id)).toMatchObject({ state: 'given_back', endReason: 'no_show' })
    const [racked] = await shop.db.select().from(skiPairs).where(eq(skiPairs.id, pair.id))
    expect(racked!.state).toBe('racked')
    expect((await detail(rental.id)).state).toBe('cancelled')
    const again = await shop.as('counter').send(cancelRental, { rentalId: rental.id, reason: 'no_show' })
    expect(again).toMatchObject({ code: 'rentals.state', params: { state: 'cancelled' } })
  })

  it('cannot be somebody who has a set', async () => {
    const { id } = await shop.rental()
    await shop.db.update(rentals).set({ state: 'out' }).where(eq(rentals.id, id))
    const refused = await shop.as('counter').send(cancelRental, { rentalId: id, reason: 'given_back' })
    expect(refused).toMatchObject({ code: 'rentals.state', params: { state: 'out' } })
  })
})

describe('finding a person', () => {
  it('goes by part of a name, first or last, in any case', async () => {
    const { id } = await shop.rental({ firstName: 'Ysolde', lastName: 'Brackenby' })
    for (const search of ['bracken', 'YSOL', 'ysolde brackenby', 'brackenby ysolde']) {
      expect(
        (await found({ search })).map((row) => row.id),
        search,
      ).toEqual([id])
    }
    expect(await found({ search: '%' })).toEqual([])
  })

  it('goes by phone however it is spaced, and by short number', async () => {
    const form = filledForm({ lastName: 'Thistlewood', phone: '+43 (0)681-555 917' })
    const made = await shop.as('counter').send(createRental, walkIn(form))
    expect((await found({ search: '0681 555917' })).map((row) => row.id)).toEqual([made.ids.rentalId])
    const { number } = await detail(made.ids.rentalId)
    expect((await found({ search: String(number) })).map((row) => row.id)).toContain(made.ids.rentalId)
  })

  it('goes by the label of a ski or boot that they have', async () => {
    const { rental, pair, boots } = await fitted()
    for (const search of [pair.code, `${pair.code}L`, boots.code.toLowerCase()]) {
      expect(
        (await found({ search })).map((row) => row.id),
        search,
      ).toEqual([rental.id])
    }
    expect(await found({ search: 'S99999' })).toEqual([])
  })

  it('shows who is here by promised time, at one site or at both', async () => {
    const rows = await found({ show: 'here', site: shop.sites.lower })
    const times = rows.map((row) => row.promisedAt)
    expect(times.length).toBeGreaterThan(5)
    expect(times).toEqual([...times].sort())
    expect(rows.every((row) => row.state === 'waiting' || row.state === 'open')).toBe(true)
    expect(await found({ show: 'here', site: shop.sites.square })).toEqual([])
  })

  it('says who is a minor, by birth date on the first day or by the age said', async () => {
    const years = (age: number, day: string) =>
      `${Number(day.slice(0, 4)) - age}${day.slice(4).replace('02-29', '03-01')}`
    const cases = [
      [{ age: 17 }, true],
      [{ age: 18 }, false],
      [{ age: 18, birthDate: years(18, addDays(today(), 3)) }, true],
      [{ age: 17, birthDate: years(18, addDays(today(), -3)) }, false],
    ] as const
    for (const [values, minor] of cases) {
      const { id } = await shop.rental(values)
      expect((await detail(id)).minor, JSON.stringify(values)).toBe(minor)
    }
  })
})

describe('another period', () => {
  it('voids what was fitted when a fiftieth birthday comes to lie inside it, and not otherwise', async () => {
    const soon = [addDays(today(), 5), addDays(today(), 6)].find((day) => !day.endsWith('02-29'))!
    const birthDate = `${Number(soon.slice(0, 4)) - 50}${soon.slice(4)}`
    const { rental, fitting } = await fitted({ age: 49, birthDate, days: 2 })
    const until = (endsOn: string) =>
      shop.as('counter').send(changePeriod, { rentalId: rental.id, startsOn: today(), endsOn })
    expect((await until(addDays(today(), 3))).status).toBe(201)
    expect((await fittingState(fitting.id)).state).toBe('claimed')
    expect((await until(soon)).status).toBe(201)
    expect(await fittingState(fitting.id)).toMatchObject({ state: 'void', endReason: 'renter_data_changed' })
    expect((await detail(rental.id)).inputs?.age).toBe(50)
  })

  it('voids what was fitted when it becomes fifteen days or more, which needs an individual test', async () => {
    const { rental, fitting } = await fitted()
    const body = { rentalId: rental.id, startsOn: today() }
    await shop.as('counter').send(changePeriod, { ...body, endsOn: addDays(today(), 13) })
    expect((await fittingState(fitting.id)).state).toBe('claimed')
    await shop.as('counter').send(changePeriod, { ...body, endsOn: addDays(today(), 14) })
    expect((await fittingState(fitting.id)).state).toBe('void')
    expect((await detail(rental.id)).rentalDays).toBe(15)
  })

  it('runs forward, and belongs to a rental that is not over', async () => {
    const { id } = await shop.rental()
    const backward = { rentalId: id, startsOn: today(), endsOn: addDays(today(), -1) }
    expect((await shop.as('counter').send(changePeriod, backward)).params.fields).toEqual([
      'endsOn:before_first_day',
    ])
    await shop.db.update(rentals).set({ state: 'returned' }).where(eq(rentals.id, id))
    const late = { rentalId: id, startsOn: today(), endsOn: today() }
    expect((await shop.as('counter').send(changePeriod, late)).code).toBe('rentals.state')
  })
})

describe('the renter’s own boots', () => {
  const reading = {
    description: 'red, four buckles',
    soleLengthMm: 305,
    soleType: 'ISO 5355 A',
    wear: 'sound',
  } as const

  it('are read and judged by everybody, and the latest reading counts', async () => {
    const { id } = await shop.rental({ ownBoots: true })
    for (const who of staff) {
      const read = await shop.as(who).send(readOwnBoots, { ...reading, rentalId: id })
      expect(read.status, who).toBe(201)
      expect((await detail(id)).ownBoots).toMatchObject({
        id: read.ids.ownBootsId,
        judgedBy: shop.people[who].name,
        judgedByHead: who === 'head_technician',
        secondLookBy: null,
      })
    }
  })

  it('get a second look by somebody else of the workshop', async () => {
    const { id } = await shop.rental({ ownBoots: true })
    const { ids } = await shop.as('technician').send(readOwnBoots, { ...reading, rentalId: id })
    expect((await shop.as('technician').send(secondLook, ids)).code).toBe('ownBoots.same_person')
    for (const who of ['counter', 'manager'] as const) {
      expect((await shop.as(who).send(secondLook, ids)).code, who).toBe('session.role')
    }
    const looked = await shop.as('head_technician').send(secondLook, ids)
    expect(looked.status).toBe(201)
    expect((await detail(id)).ownBoots).toMatchObject({
      soleLengthMm: 305,
      judgedBy: shop.people.technician.name,
      secondLookBy: shop.people.head_technician.name,
    })
    expect((await shop.as('head_technician').send(secondLook, ids)).code).toBe('ownBoots.read_anew')
  })

  it('put what was fitted to them in doubt when they are read otherwise, and not when they are read the same', async () => {
    const rental = await shop.rental({ ownBoots: true })
    const pair = await shop.rackedPair()
    const { ids } = await shop.as('technician').send(readOwnBoots, { ...reading, rentalId: rental.id })
    const fitting = await shop.fitting({ rental, pair, boots: { id: ids.ownBootsId, own: true } })
    await shop.as('counter').send(readOwnBoots, { ...reading, rentalId: rental.id })
    expect((await fittingState(fitting.id)).state).toBe('claimed')
    await shop.as('counter').send(readOwnBoots, { ...reading, rentalId: rental.id, soleLengthMm: 306 })
    expect(await fittingState(fitting.id)).toMatchObject({ state: 'void', endReason: 'sole_changed' })
  })

  it('leave a fitting with the shop’s boots alone', async () => {
    const { rental, fitting } = await fitted()
    await shop.as('counter').send(readOwnBoots, { ...reading, rentalId: rental.id })
    await shop.as('counter').send(readOwnBoots, { ...reading, rentalId: rental.id, wear: 'worn' })
    expect((await fittingState(fitting.id)).state).toBe('claimed')
    expect(await shop.db.$count(callBacks, eq(callBacks.rentalId, rental.id))).toBe(0)
  })

  it('of another shop’s renter are not to be read', async () => {
    const other = await shop.another()
    const theirs = await other.rental({ ownBoots: true })
    expect((await shop.as('technician').send(readOwnBoots, { ...reading, rentalId: theirs.id })).code).toBe(
      'rentals.unknown',
    )
  })
})
