import { randomUUID } from 'node:crypto'
import { io, type Socket } from 'socket.io-client'
import { afterEach, beforeAll, describe, expect, it } from 'vitest'
import { revokeDevice } from '#shared/api/devices'
import { changePerson, disablePerson } from '#shared/api/people'
import type { Role } from '#shared/permissions'
import { deviceCookie } from '../../server/auth/actors'
import { Browser } from '../support/browser'
import { addPerson, addShop, addStaff, enrolDevice, testPassword } from '../support/people'
import { testServer, type TestServer } from '../support/server'

let on: TestServer
let shopId: string
let siteId: string
let people: Awaited<ReturnType<typeof addStaff>>
let manager: Browser
const open: Socket[] = []

async function signedIn(email: string) {
  const at = new Browser(on.server.url)
  expect((await at.send('POST', '/api/session', { email, password: testPassword })).status).toBe(201)
  return at
}

/** A screen that hears of the shop, of whoever is on at this browser. */
async function screen(at: Browser, reconnection = false): Promise<Socket> {
  const cookie = [...at.cookies].map(([name, value]) => `${name}=${value}`).join('; ')
  const socket = io(on.server.url, {
    extraHeaders: { cookie, origin: on.server.url },
    transports: ['websocket'],
    reconnection,
    reconnectionDelay: 50,
    forceNew: true,
  })
  open.push(socket)
  await new Promise<void>((heard, failed) => {
    socket.once('connect', heard)
    socket.once('connect_error', failed)
  })
  return socket
}

/** Milliseconds until the server lets go of a screen, from now. */
async function lettingGo(socket: Socket, doing: () => Promise<unknown>): Promise<number> {
  const gone = new Promise<void>((heard) => socket.once('disconnect', () => heard()))
  await doing()
  const started = Date.now()
  await gone
  return Date.now() - started
}

async function somebody(...roles: Role[]) {
  const { personId, email } = await addPerson(on.database.db, shopId, roles)
  return { personId, email, at: await signedIn(email) }
}

beforeAll(async () => {
  on = await testServer()
  const shop = await addShop(on.database.db)
  shopId = shop.shopId
  siteId = shop.siteIds[0]
  people = await addStaff(on.database.db, shopId)
  manager = await signedIn(people.manager.email)
})
afterEach(() => {
  for (const socket of open.splice(0)) socket.disconnect()
})

describe('screens of people whose rights change', () => {
  it('are let go within a second when the person is disabled, and do not come back', async () => {
    const { personId, at } = await somebody('counter')
    const socket = await screen(at)
    expect(await lettingGo(socket, () => manager.command(disablePerson, { personId }))).toBeLessThan(1000)
    await expect(screen(at)).rejects.toThrow('session.missing')
  })

  it('are let go when a role changes, and come back with the new ones', async () => {
    const { personId, email, at } = await somebody('counter')
    const socket = await screen(at)
    const change = {
      personId,
      email,
      name: 'Somebody',
      roles: ['technician' as const],
      locale: 'en' as const,
    }
    expect(await lettingGo(socket, () => manager.command(changePerson, change))).toBeLessThan(1000)
    expect((await screen(at)).connected).toBe(true)
  })

  it('are let go when somebody signs out, and those of the same person elsewhere stay', async () => {
    const { email, at } = await somebody('counter')
    const elsewhere = await screen(await signedIn(email))
    const socket = await screen(at)
    expect(await lettingGo(socket, () => at.send('DELETE', '/api/session'))).toBeLessThan(1000)
    expect(elsewhere.connected).toBe(true)
  })

  it('at a station are let go when the next person goes on, and when the station is revoked', async () => {
    const at = { shopId, siteId, station: 'bench', enrolledBy: people.manager.id }
    const { id: deviceId, token } = await enrolDevice(on.database.db, at)
    const bench = new Browser(on.server.url)
    bench.cookies.set(deviceCookie, token)
    const goOn = ({ id: personId, pin }: { id: string; pin: string }) =>
      bench.send('POST', '/api/session/switch', { personId, pin })
    await goOn(people.technician)
    const first = await screen(bench)
    expect(await lettingGo(first, () => goOn(people.second_technician))).toBeLessThan(1000)
    const second = await screen(bench)
    expect(await lettingGo(second, () => manager.command(revokeDevice, { deviceId }))).toBeLessThan(1000)
  })

  it('of another origin are refused, and so are those of nobody', async () => {
    const { at } = await somebody('counter')
    const cookie = [...at.cookies].map(([name, value]) => `${name}=${value}`).join('; ')
    const strangers: Record<string, string>[] = [
      { cookie, origin: 'http://elsewhere.test' },
      { cookie, origin: `${on.server.url}.elsewhere.test` },
      { origin: on.server.url },
      { origin: on.server.url, cookie: `notchwise=s%3A${randomUUID()}.c2ln` },
    ]
    for (const headers of strangers) {
      const socket = io(on.server.url, {
        extraHeaders: headers,
        transports: ['websocket'],
        reconnection: false,
        forceNew: true,
      })
      open.push(socket)
      const refused = await new Promise<boolean>((heard) => {
        socket.once('connect', () => heard(false))
        socket.once('connect_error', () => heard(true))
      })
      expect(refused).toBe(true)
    }
  })
})
