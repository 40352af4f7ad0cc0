import { randomUUID } from 'node:crypto'
import { eq } from 'drizzle-orm'
import { beforeAll, describe, expect, it } from 'vitest'
import { closeDoor, endFormLinks, makeFormLink, openDoor } from '#shared/api/forms'
import { addDays } from '#shared/dates/days'
import { doorLinks, fittingInputs, formLinks, rentals, renters } from '../../server/db/schema/schema'
import { tokenHash } from '../../server/auth/tokens'
import { filledForm, newToken, phone, today } from '../support/forms'
import { testShop, type TestShop } from '../support/shop'

let shop: TestShop
const stranger = () => shop.app.stranger()
const staff = ['counter', 'technician', 'head_technician', 'manager'] as const

beforeAll(async () => {
  shop = await testShop()
})

/** A phone that opened the door's code of the lower site. */
async function begun() {
  const door = newToken()
  await shop.as('counter').send(openDoor, { siteId: shop.sites.lower, token: door })
  const link = newToken()
  const renter = phone(stranger, link)
  expect((await renter.begin(door)).status).toBe(201)
  return { ...renter, link, door }
}

const rentalOf = async (id: string) => {
  const [found] = await shop.db
    .select()
    .from(rentals)
    .innerJoin(renters, eq(renters.id, rentals.renterId))
    .innerJoin(fittingInputs, eq(fittingInputs.id, renters.currentInputsId))
    .where(eq(rentals.id, id))
  return found!
}

describe('the code at the door', () => {
  it('is made by everybody who works in the shop, and by nobody else', async () => {
    for (const who of staff) {
      const made = await shop.as(who).send(openDoor, { siteId: shop.sites.lower, token: newToken() })
      expect(made.status, who).toBe(201)
    }
    const refused = await shop.stranger().send(openDoor, { siteId: shop.sites.lower, token: newToken() })
    expect(refused.code).toBe('session.missing')
  })

  it('is not made for a site of another shop', async () => {
    const other = await shop.another()
    const refused = await shop.as('manager').send(openDoor, { siteId: other.sites.lower, token: newToken() })
    expect(refused).toMatchObject({ status: 404, code: 'sites.unknown' })
  })

  it('is stored only as a hash, and ends with the shop’s day', async () => {
    const { door } = await begun()
    const [row] = await shop.db
      .select()
      .from(doorLinks)
      .where(eq(doorLinks.tokenSha256, tokenHash(door)))
    expect(JSON.stringify(row)).not.toContain(door)
    const left = row!.expiresAt.getTime() - Date.now()
    expect(left).toBeGreaterThan(0)
    expect(left).toBeLessThanOrEqual(25 * 3_600_000)
    const atEnd = new Intl.DateTimeFormat('en-GB', { timeZone: 'Europe/Vienna', timeStyle: 'medium' })
    expect(atEnd.format(row!.expiresAt)).toBe('00:00:00')
  })

  it('begins no form when its day is over, when it was closed, or when nobody made it', async () => {
    const { door } = await begun()
    await shop.db
      .update(doorLinks)
      .set({ expiresAt: new Date(Date.now() - 1000) })
      .where(eq(doorLinks.tokenSha256, tokenHash(door)))
    expect((await phone(stranger, newToken()).begin(door)).body.code).toBe('links.expired')

    const closed = await begun()
    await shop.as('counter').send(closeDoor, { siteId: shop.sites.lower })
    expect((await phone(stranger, newToken()).begin(closed.door)).body.code).toBe('links.unknown')
    expect((await closed.form()).status).toBe(200)

    expect((await phone(stranger, newToken()).begin(newToken())).body.code).toBe('links.unknown')
    expect((await phone(stranger, 'short').begin(newToken())).body.code).toBe('request.malformed')
  })

  it('begins one form when the phone asks twice', async () => {
    const { door, link } = await begun()
    expect((await phone(stranger, link).begin(door)).status).toBe(201)
    expect(await shop.db.$count(formLinks, eq(formLinks.tokenSha256, tokenHash(link)))).toBe(1)
  })
})

describe('a draft on a personal link', () => {
  it('survives a reload and is shown to nobody else', async () => {
    const mine = await begun()
    const other = await begun()
    expect((await mine.form()).body).toMatchObject({ draft: null, draftVersion: 0, today: today() })
    expect((await mine.save(0, { firstName: 'Orla', mass: '11,5' })).body).toEqual({ draftVersion: 1 })
    expect((await mine.form()).body.draft).toEqual({ firstName: 'Orla', mass: '11,5' })
    expect((await other.form()).body.draft).toBeNull()
    const unknown = await phone(stranger, newToken()).form()
    expect(unknown.status).toBe(404)
    expect(unknown.body.code).toBe('links.unknown')
  })

  it('is not shown to the staff, who have no link', async () => {
    const agent = await shop.agent('manager')
    expect((await agent.get('/api/forms/mine')).status).toBe(404)
  })

  it('is not undone by an older page of the same phone', async () => {
    const mine = await begun()
    await mine.save(0, { firstName: 'Orla' })
    const late = await mine.save(0, { firstName: 'O' })
    expect(late.body.code).toBe('command.stale')
    expect((await mine.form()).body.draft).toEqual({ firstName: 'Orla' })
  })

  it('takes texts only, and not many', async () => {
    const mine = await begun()
    const many = Object.fromEntries(
      [...'abcdefghijklmnopqrstuvwxyz'].flatMap((a) => [`${a}a`, `${a}b`, `${a}c`].map((k) => [k, ''])),
    )
    for (const draft of [{ firstName: 1 }, { firstName: 'x'.repeat(501) }, { 'a b': '' }, many]) {
      expect((await mine.save(0, draft as Record<string, string>)).body.code).toBe('request.malformed')
    }
  })

  it('is gone once the form is sent', async () => {
    const mine = await begun()
    await mine.save(0, { firstName: 'Orla' })
    await mine.submit(filledForm())
    const { body } = await mine.form()
    expect(body.draft).toBeNull()
    expect(body.submitted).toMatchObject({ state: 'waiting' })
    expect(JSON.stringify(body)).not.toContain('Orla')
    expect((await mine.save(1, { firstName: 'Orla' })).body.code).toBe('forms.sent')
  })
})

describe('a form that is sent', () => {
  it('waits at the desk under the day’s next short number, promised for arrival plus the shop’s setting', async () => {
    const first = await (await begun()).submit(filledForm())
    const second = await (await begun()).submit(filledForm())
    expect(first.status).toBe(201)
    const [a, b] = [await rentalOf(first.body.ids.rentalId), await rentalOf(second.body.ids.rentalId)]
    expect(a.rentals).toMatchObject({ state: 'waiting', siteId: shop.sites.lower, takenBy: null })
    expect(b.rentals.number).toBe(a.rentals.number + 1)
    expect(a.rentals.promisedAt.getTime() - a.rentals.arrivedAt.getTime()).toBe(20 * 60_000)
  })

  it('keeps each value in the unit that was typed, as declared by the renter', async () => {
    const sent = await (await begun()).submit(filledForm())
    const { fitting_inputs: inputs } = await rentalOf(sent.body.ids.rentalId)
    expect(inputs).toMatchObject({
      mass: { unit: 'st-lb', stone: 11, pounds: 3 },
      height: { unit: 'ft-in', feet: 5, inches: 9 },
      massSource: 'declared',
      massBy: null,
      createdBy: null,
      request: 0,
    })
    expect(inputs.salt).toHaveLength(32)
  })

  it('arrives when the server hears of it, whatever the phone’s clock says', async () => {
    const mine = await begun()
    const answer = await stranger().post('/api/forms/submit').set('x-renter-link', mine.link).send({
      id: randomUUID(),
      occurredAt: '2020-01-01T00:00:00Z',
      seenSeq: null,
      kind: 'forms.submit',
      body: filledForm(),
    })
    const { rentals: rental } = await rentalOf(answer.body.ids.rentalId)
    expect(Date.now() - rental.arrivedAt.getTime()).toBeLessThan(60_000)
  })

  it('is one rental however often the phone sends it', async () => {
    const mine = await begun()
    const id = randomUUID()
    const answers = await Promise.all([1, 2, 3].map(() => mine.submit(filledForm(), id)))
    const again = await mine.submit(filledForm(), id)
    const ids = [...answers, again].map((answer) => answer.body.ids.rentalId)
    expect(new Set(ids).size).toBe(1)
    expect((await mine.submit(filledForm())).body.code).toBe('forms.sent')
    expect((await mine.submit(filledForm({ lastName: 'Other' }), id)).body.code).toBe('command.reused')
  })

  it('names every field that is not well formed', async () => {
    const { body, status } = await (
      await begun()
    ).submit({ ...filledForm(), firstName: ' ', mass: { unit: 'kg', value: 900 }, skierType: 'IV' })
    expect(status).toBe(400)
    expect(body.code).toBe('request.malformed')
    const fields = body.issues.map(({ path }: { path: string[] }) => path.slice(0, 2).join('.'))
    expect(fields).toEqual(['body.firstName', 'body.mass', 'body.skierType'])
  })

  it('names what one field means for another', async () => {
    const child = { age: 8, mass: { unit: 'kg', value: 21.9 }, skierType: 'III' } as const
    const cases = [
      [filledForm({ birthDate: addDays(today(), 1), age: null }), ['birthDate:ahead']],
      [filledForm({ age: null }), ['birthDate:empty']],
      [filledForm({ phone: '', email: '' }), ['phone:nobody_reachable']],
      [filledForm(child), ['guardianName:minor', 'skierType:light']],
      [filledForm({ startsOn: addDays(today(), -1) }), ['startsOn:past']],
      [filledForm({ endsOn: addDays(today(), -1) }), ['endsOn:before_first_day']],
      [filledForm({ endsOn: addDays(today(), 400) }), ['endsOn:too_long']],
    ] as const
    for (const [form, fields] of cases) {
      const { body } = await (await begun()).submit(form)
      expect(body).toMatchObject({ code: 'renters.unfinished', params: { fields } })
    }
  })

  it('needs a guardian under the shop’s age of majority, by the birth date on the first day', async () => {
    const eighteenToday = `${Number(today().slice(0, 4)) - 18}${today().slice(4)}`
    // 29 February has no day of its own in other years; the day after is as good here
    const birthDate = eighteenToday.endsWith('02-29')
      ? eighteenToday.replace('02-29', '03-01')
      : eighteenToday
    const grown = await (await begun()).submit(filledForm({ birthDate, age: null }))
    expect(grown.status).toBe(201)
    const minor = filledForm({ birthDate: addDays(birthDate, 1), age: null })
    expect((await (await begun()).submit(minor)).body.params.fields).toEqual(['guardianName:minor'])
    const guardian = { name: 'Alban Fenn', relation: 'parent', phone: '' } as const
    const sent = await (await begun()).submit({ ...minor, guardian })
    expect((await rentalOf(sent.body.ids.rentalId)).renters).toMatchObject({
      guardianName: 'Alban Fenn',
      guardianRelation: 'parent',
    })
  })

  it('reads the table with the age that gives the lower value when a tenth birthday falls inside the rental', async () => {
    const soon = [addDays(today(), 1), addDays(today(), 2)]
    const birthday = soon.find((day) => !day.endsWith('02-29'))!
    const birthDate = `${Number(birthday.slice(0, 4)) - 10}${birthday.slice(4)}`
    const guardian = { name: 'Alban Fenn', relation: 'parent', phone: '' } as const
    const days = { startsOn: today(), endsOn: birthday }
    const sent = await (await begun()).submit(filledForm({ birthDate, age: null, guardian, ...days }))
    expect((await rentalOf(sent.body.ids.rentalId)).fitting_inputs.age).toBe(9)
  })
})

describe('a personal link from the desk', () => {
  it('is given by everybody who works in the shop, for a form or for a rental of theirs', async () => {
    const other = await shop.another()
    const [mine, theirs] = [await shop.rental(), await other.rental()]
    for (const who of staff) {
      const empty = { siteId: shop.sites.square, token: newToken(), rentalId: null }
      expect((await shop.as(who).send(makeFormLink, empty)).status, who).toBe(201)
    }
    const body = { siteId: shop.sites.lower, token: newToken() }
    expect((await shop.as('counter').send(makeFormLink, { ...body, rentalId: mine.id })).status).toBe(201)
    const refused = await shop
      .as('counter')
      .send(makeFormLink, { ...body, token: newToken(), rentalId: theirs.id })
    expect(refused.code).toBe('rentals.unknown')
    expect((await shop.stranger().send(makeFormLink, { ...body, rentalId: null })).code).toBe(
      'session.missing',
    )
  })

  it('changes the data of the rental that it was made for, and tells no body value', async () => {
    const rental = await shop.rental({ lastName: 'Fennwick' })
    const token = newToken()
    await shop.as('counter').send(makeFormLink, { siteId: shop.sites.lower, token, rentalId: rental.id })
    const mine = phone(stranger, token)
    const { body } = await mine.form()
    expect(body.known).toMatchObject({ lastName: 'Fennwick' })
    expect(JSON.stringify(body)).not.toContain('78')
    const sent = await mine.submit(filledForm())
    expect(sent.body.ids.rentalId).toBe(rental.id)
    const now = await rentalOf(rental.id)
    expect(now.renters.lastName).toBe('Fenn')
    expect(now.fitting_inputs.id).not.toBe(rental.inputsId)
  })

  it('is worth nothing once it is over or taken back', async () => {
    const rental = await shop.rental()
    const [over, back] = [newToken(), newToken()]
    for (const token of [over, back]) {
      await shop.as('counter').send(makeFormLink, { siteId: shop.sites.lower, token, rentalId: rental.id })
      expect((await phone(stranger, token).form()).status).toBe(200)
    }
    await shop.db
      .update(formLinks)
      .set({ expiresAt: new Date(Date.now() - 1000) })
      .where(eq(formLinks.tokenSha256, tokenHash(over)))
    expect((await phone(stranger, over).form()).body.code).toBe('links.unknown')
    expect((await phone(stranger, over).submit(filledForm())).body.code).toBe('links.unknown')
    await shop.as('counter').send(endFormLinks, { rentalId: rental.id })
    expect((await phone(stranger, back).form()).body.code).toBe('links.unknown')
    expect((await phone(stranger, back).save(0, {})).body.code).toBe('links.unknown')
  })

  it('gives no way into the shop', async () => {
    const mine = await begun()
    for (const path of ['/api/rentals', '/api/board', '/api/rental-form']) {
      expect((await stranger().get(path).set('x-renter-link', mine.link)).status, path).toBe(401)
    }
  })
})

describe('guessing links', () => {
  it('ends after sixty tries from one address, and real links beside them are not counted', async () => {
    const guessed = await testShop()
    const door = newToken()
    await guessed.as('counter').send(openDoor, { siteId: guessed.sites.lower, token: door })
    const real = phone(() => guessed.app.stranger(), newToken())
    await real.begin(door)
    const agent = guessed.app.stranger()
    for (let i = 0; i < 60; i += 1) {
      expect((await agent.get('/api/forms/mine').set('x-renter-link', newToken())).status).toBe(404)
      if (i % 20 === 0) expect((await real.form()).status).toBe(200)
    }
    expect((await agent.get('/api/forms/mine').set('x-renter-link', newToken())).body.code).toBe(
      'request.too_many',
    )
  })
})
