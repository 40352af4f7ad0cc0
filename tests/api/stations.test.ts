import { randomUUID } from 'node:crypto'
import { and, eq } from 'drizzle-orm'
import { beforeAll, describe, expect, test } from 'vitest'
import { listDevices, revokeDevice, type DeviceRow } from '#shared/api/devices'
import { signRecord } from '#shared/api/records'
import type { StationAnswer } from '#shared/api/session'
import { deviceCookie } from '../../server/auth/actors'
import { devices, memberships, session } from '../../server/db/schema/schema'
import { Browser } from '../support/browser'
import { addPerson, addShop, addStaff, enrolDevice, testPassword } from '../support/people'
import { testServer, type TestServer } from '../support/server'

let on: TestServer
let shopId: string
let siteId: string
let people: Awaited<ReturnType<typeof addStaff>>

const browser = () => new Browser(on.server.url)

async function signedIn(email: string, at = browser()): Promise<Browser> {
  expect((await at.send('POST', '/api/session', { email, password: testPassword })).status).toBe(201)
  return at
}

/** A browser at an enrolled bench, with nobody on it. */
async function bench(): Promise<Browser & { deviceId: string }> {
  const enrolledBy = people.manager.id
  const { id, token } = await enrolDevice(on.database.db, { shopId, siteId, station: 'bench', enrolledBy })
  const at = browser()
  at.cookies.set(deviceCookie, token)
  return Object.assign(at, { deviceId: id })
}

const goOn = (at: Browser, personId: string, pin: string) =>
  at.send('POST', '/api/session/switch', { personId, pin })
const personAt = async (at: Browser) =>
  ((await at.get('/api/session')).body as { person?: { id: string } }).person?.id ?? null

async function technician(pin = '314417') {
  return addPerson(on.database.db, shopId, ['technician'], { pin })
}

async function triesOf(personId: string) {
  const [row] = await on.database.db
    .select({ tries: memberships.pinTries })
    .from(memberships)
    .where(and(eq(memberships.shopId, shopId), eq(memberships.personId, personId)))
  return row!.tries
}

beforeAll(async () => {
  on = await testServer()
  const shop = await addShop(on.database.db)
  shopId = shop.shopId
  siteId = shop.siteIds[0]
  people = await addStaff(on.database.db, shopId)
})

describe('going on at a station', () => {
  test('the six digits are enough at an enrolled browser', async () => {
    const at = await bench()
    const { technician: lio } = people
    const answer = await goOn(at, lio.id, lio.pin)
    expect(answer.status).toBe(201)
    expect(answer.body).toMatchObject({ person: { id: lio.id }, device: { station: 'bench', siteId } })
    expect(await personAt(at)).toBe(lio.id)
  })

  test('away from an enrolled browser the right digits are worth nothing', async () => {
    const { technician: lio } = people
    expect((await goOn(browser(), lio.id, lio.pin)).code).toBe('pin.not_enrolled')
    const made = browser()
    made.cookies.set(deviceCookie, 'a-token-that-nobody-made-0000')
    expect((await goOn(made, lio.id, lio.pin)).code).toBe('pin.not_enrolled')
  })

  test('the station names its people, who is on it and who is at another one, and nothing else of them', async () => {
    const [one, two] = [await bench(), await bench()]
    await goOn(one, people.technician.id, people.technician.pin)
    await goOn(two, people.counter.id, people.counter.pin)
    const station = (await one.get('/api/station')).body as unknown as NonNullable<StationAnswer>
    expect(station.device.station).toBe('bench')
    expect(station.here?.personId).toBe(people.technician.id)
    expect(station.here?.since).toMatch(/^\d{4}-/)
    const counter = station.people.find(({ id }) => id === people.counter.id)
    expect(counter).toMatchObject({ name: people.counter.name, hasPin: true, at: 'bench 1' })
    expect(JSON.stringify(station)).not.toContain('@')
  })

  test('the next person gets a new session, and the one before is gone', async () => {
    const at = await bench()
    await goOn(at, people.technician.id, people.technician.pin)
    const before = at.cookies.get('notchwise')!
    await goOn(at, people.counter.id, people.counter.pin)
    expect(at.cookies.get('notchwise')).not.toBe(before)
    const left = browser()
    left.cookies.set('notchwise', before)
    expect(await personAt(left)).toBeNull()
  })

  test('of two who go on in the same moment one stays, and nobody works under the other name', async () => {
    for (let round = 0; round < 6; round += 1) {
      const at = await bench()
      const [one, two] = [await technician('104418'), await technician('204418')]
      const cookies = { cookie: `${deviceCookie}=${at.cookies.get(deviceCookie)}` }
      const send = (personId: string, pin: string) =>
        browser().ask('POST', '/api/session/switch', JSON.stringify({ personId, pin }), {
          ...cookies,
          'content-type': 'application/json',
        })
      const answers = await Promise.all([send(one.personId, '104418'), send(two.personId, '204418')])
      const open = await on.database.db.select().from(session)
      const here = open.filter(({ sess }) => (sess as { deviceId?: string }).deviceId === at.deviceId)
      expect(here).toHaveLength(1)
      const stays = here[0]!.personId
      for (const [index, { personId }] of [one, two].entries()) {
        const { status, code, headers } = answers[index]!
        if (status !== 201) expect(code).toBe('session.switched')
        const copy = browser()
        const cookie = headers['set-cookie']?.find((c) => c.startsWith('notchwise='))
        if (cookie) copy.cookies.set('notchwise', cookie.split(';')[0]!.split('=')[1]!)
        expect([null, personId]).toContain(await personAt(copy))
        if (personId === stays) expect(await personAt(copy)).toBe(personId)
      }
    }
  })

  test('somebody of another shop, without access or without a PIN does not go on', async () => {
    const at = await bench()
    const { shopId: elsewhere } = await addShop(on.database.db, 'Other Hire')
    const stranger = await addPerson(on.database.db, elsewhere, ['technician'], { pin: '314417' })
    const nobody = await goOn(at, randomUUID(), '314417')
    expect(nobody.code).toBe('pin.not_set')
    expect((await goOn(at, stranger.personId, '314417')).body).toEqual(nobody.body)
    const { personId: withoutPin } = await addPerson(on.database.db, shopId, ['counter'])
    expect((await goOn(at, withoutPin, '314417')).code).toBe('pin.not_set')
    const ended = await technician()
    await on.database.db
      .update(memberships)
      .set({ endedAt: new Date() })
      .where(eq(memberships.personId, ended.personId))
    expect((await goOn(at, ended.personId, '314417')).body).toEqual(nobody.body)
  })
})

describe('wrong digits', () => {
  test('five tries, then the password opens it again', async () => {
    const at = await bench()
    const { personId, email } = await technician()
    for (const left of [4, 3, 2, 1]) {
      const answer = await goOn(at, personId, '999888')
      expect([answer.code, answer.params.triesLeft]).toEqual(['pin.wrong', left])
    }
    expect((await goOn(at, personId, '999888')).code).toBe('pin.locked')
    // the right ones are too late
    expect((await goOn(at, personId, '314417')).code).toBe('pin.locked')
    expect((await goOn(at, people.technician.id, people.technician.pin)).status).toBe(201)
    await signedIn(email)
    expect((await goOn(at, personId, '314417')).status).toBe(201)
  })

  test('right digits give the five tries back', async () => {
    const at = await bench()
    const { personId } = await technician()
    await goOn(at, personId, '999888')
    await goOn(at, personId, '314417')
    expect((await goOn(at, personId, '999888')).params.triesLeft).toBe(4)
  })

  test('forty tries sent at once, from two stations, are five', async () => {
    const [one, two] = [await bench(), await bench()]
    const { personId } = await technician('777888')
    const answers = await Promise.all(
      Array.from({ length: 40 }, (_, n) => goOn(n % 2 ? one : two, personId, String(100_000 + n))),
    )
    expect(answers.filter(({ code }) => code === 'pin.wrong')).toHaveLength(4)
    expect(answers.filter(({ code }) => code === 'pin.locked')).toHaveLength(36)
    expect((await goOn(one, personId, '777888')).code).toBe('pin.locked')
  })

  test('a wrong PIN under a record is counted although the record is refused', async () => {
    const at = await bench()
    const { personId } = await technician()
    await goOn(at, personId, '314417')
    const sign = (pin?: string) => at.command(signRecord, { fittingId: randomUUID() }, { 'x-pin': pin })
    expect((await sign('999888')).params.triesLeft).toBe(4)
    expect((await sign('999888')).params.triesLeft).toBe(3)
    expect(await triesOf(personId)).toBe(2)
    expect((await sign()).code).toBe('pin.missing')
    const right = await sign('314417')
    expect(right.code).not.toMatch(/^pin/)
    expect(await triesOf(personId)).toBe(0)
  })

  test('a record is not signed by PIN where no browser is enrolled', async () => {
    const { email } = await technician()
    const at = await signedIn(email)
    const answer = await at.command(signRecord, { fittingId: randomUUID() }, { 'x-pin': '314417' })
    expect(answer.code).toBe('pin.not_enrolled')
  })
})

describe("a person's own PIN", () => {
  const choose = (at: Browser, pin: string, password = testPassword) =>
    at.send('POST', '/api/session/pin', { password, pin })

  test('is set by whoever knows the password', async () => {
    const { personId, email } = await addPerson(on.database.db, shopId, ['technician'])
    const at = await signedIn(email)
    expect((await choose(at, '271828', 'not the password')).code).toBe('session.wrong_password')
    expect((await choose(at, '271828')).status).toBe(204)
    expect((await goOn(await bench(), personId, '271828')).status).toBe(201)
  })

  test.each(['000000', '123456', '987654'])('%s is what everybody tries first', async (pin) => {
    const { email } = await addPerson(on.database.db, shopId, ['technician'])
    expect((await choose(await signedIn(email), pin)).code).toBe('pin.taken_shape')
  })

  test.each(['12345', '1234567', '12 456', 'abcdef'])('%s is not six digits', async (pin) => {
    const { email } = await addPerson(on.database.db, shopId, ['technician'])
    expect((await choose(await signedIn(email), pin)).code).toBe('request.malformed')
  })
})

describe('enrolling a browser', () => {
  const enrol = (at: Browser, name = 'Bench 7') =>
    at.send('POST', '/api/devices', { name, station: 'bench', siteId })

  test('sets a cookie out of reach of scripts, and only its hash is kept', async () => {
    const at = await signedIn(people.manager.email)
    const answer = await enrol(at)
    expect(answer.status).toBe(201)
    const cookie = answer.headers['set-cookie']!.find((c) => c.startsWith(deviceCookie))!
    expect(cookie).toMatch(/HttpOnly/i)
    const token = at.cookies.get(deviceCookie)!
    expect(token.length).toBeGreaterThanOrEqual(27)
    expect(JSON.stringify(answer.body)).not.toContain(token)
    const [row] = await on.database.db
      .select()
      .from(devices)
      .where(eq(devices.id, String(answer.body.deviceId)))
    expect(JSON.stringify(row)).not.toContain(token)
    expect(row!.tokenSha256.toString('base64url')).not.toContain(token)
    const rows = (await at.get(listDevices.path)).body.rows as DeviceRow[]
    expect(rows.filter(({ here }) => here).map(({ id }) => id)).toEqual([answer.body.deviceId])
  })

  test('again makes another device of it, and the one before is revoked', async () => {
    const at = await signedIn(people.manager.email)
    const first = (await enrol(at)).body.deviceId
    const second = (await enrol(at, 'Desk 2')).body.deviceId
    const rows = (await at.get(listDevices.path)).body.rows as DeviceRow[]
    expect(rows.find(({ id }) => id === first)?.revokedAt).not.toBeNull()
    expect(rows.find(({ id }) => id === second)).toMatchObject({
      name: 'Desk 2',
      here: true,
      revokedAt: null,
    })
  })

  test('a revoked one knows nobody any more, and whoever went on there is signed out', async () => {
    const at = await bench()
    await goOn(at, people.technician.id, people.technician.pin)
    const manager = await signedIn(people.manager.email)
    expect((await manager.command(revokeDevice, { deviceId: at.deviceId })).status).toBe(201)
    expect((await at.get('/api/board')).status).toBe(401)
    expect((await goOn(at, people.technician.id, people.technician.pin)).code).toBe('pin.not_enrolled')
  })
})
