import { randomUUID } from 'node:crypto'
import { eq } from 'drizzle-orm'
import { io, type Socket } from 'socket.io-client'
import { afterEach, beforeAll, describe, expect, it } from 'vitest'
import type { BoardCatchUp, BoardEvent } from '#shared/schemas/board'
import { boots, people, session, shopSequences } from '../../server/db/schema/schema'
import { endSessions } from '../../server/services/sessions'
import { addPerson, addShop, testPassword } from '../support/people'
import { testServer, type TestServer } from '../support/server'

let test: TestServer
let shopId: string
let siteId: string
let personId: string
let cookie: string
const open: Socket[] = []

const headers = () => ({ origin: test.server.url, 'x-notchwise': '1', 'content-type': 'application/json' })

async function signIn(email: string): Promise<string> {
  const response = await fetch(`${test.server.url}/api/session`, {
    method: 'POST',
    headers: headers(),
    body: JSON.stringify({ email, password: testPassword }),
  })
  expect(response.status).toBe(201)
  return response.headers.get('set-cookie')!.split(';')[0]!
}

function connect(as: string, origin = test.server.url): Socket {
  const socket = io(test.server.url, {
    extraHeaders: { cookie: as, origin },
    transports: ['websocket'],
    reconnectionDelay: 100,
    reconnectionDelayMax: 200,
    forceNew: true,
  })
  open.push(socket)
  return socket
}

const once = <T>(socket: Socket, event: string) => new Promise<T>((heard) => socket.once(event, heard))

let number = 100
/** A command that every board hears of: new boots in the fleet. */
async function addBoots(as = cookie): Promise<BoardEvent> {
  const body = {
    ...{ code: `B${(number += 1)}`, model: 'Boots', mondo: 265, soleLengthMm: 305, soleType: 'ISO 5355 A' },
    ...{ season: 2025, homeSiteId: siteId, rackPlace: 'A 1' },
  }
  const envelope = {
    ...{ id: randomUUID(), occurredAt: new Date().toISOString(), seenSeq: null, kind: 'boots.create', body },
  }
  const response = await fetch(`${test.server.url}/api/boots/create`, {
    method: 'POST',
    headers: { ...headers(), cookie: as },
    body: JSON.stringify(envelope),
  })
  expect(response.status).toBe(201)
  return ((await response.json()) as { event: BoardEvent }).event
}

beforeAll(async () => {
  test = await testServer()
  const shop = await addShop(test.database.db)
  shopId = shop.shopId
  siteId = shop.siteIds[0]!
  const manager = await addPerson(test.database.db, shopId, ['manager'])
  personId = manager.personId
  cookie = await signIn(manager.email)
})

afterEach(() => open.splice(0).forEach((socket) => socket.close()))

describe('the live board', () => {
  it('tells every screen of the shop the same event that the command answered', async () => {
    const [first, second] = [connect(cookie), connect(cookie)]
    await Promise.all([once(first, 'connect'), once(second, 'connect')])
    const heard = Promise.all([once<BoardEvent>(first, 'event'), once<BoardEvent>(second, 'event')])
    const answered = await addBoots()
    expect(await heard).toEqual([answered, answered])
    expect(answered.items).toHaveLength(1)
  })

  it('tells nothing to another shop, to a stranger, or to a page of another origin', async () => {
    const other = await addShop(test.database.db, 'Another shop')
    const stranger = await addPerson(test.database.db, other.shopId, ['counter'])
    const elsewhere = connect(await signIn(stranger.email))
    await once(elsewhere, 'connect')
    const heard: unknown[] = []
    elsewhere.on('event', (event) => heard.push(event))
    await addBoots()
    expect(await once<{ seq: number }>(elsewhere, 'head')).toMatchObject({ seq: 0 })
    expect(heard).toEqual([])
    expect((await once<Error>(connect('notchwise=nothing'), 'connect_error')).message).toBe('session.missing')
    await once(connect(cookie, 'http://127.0.0.1.example'), 'connect_error')
  })

  it('says the head of the sequence, from the database, every five seconds', async () => {
    const socket = connect(cookie)
    await once(socket, 'connect')
    const [row] = await test.database.db.select().from(shopSequences).where(eq(shopSequences.shopId, shopId))
    expect(await once<{ seq: number }>(socket, 'head')).toMatchObject({ seq: row!.seq })
  })

  it('replays what a screen missed while the server was away, and a snapshot where events are gone', async () => {
    const before = await addBoots()
    const socket = connect(cookie)
    await once(socket, 'connect')
    const away = once(socket, 'disconnect')
    const back = new Promise<void>((connected) => socket.io.once('reconnect', () => connected()))
    await test.restart()
    await away
    await back
    const missed = [await addBoots(), await addBoots()]
    const since = async (seq: number) =>
      (await (
        await fetch(`${test.server.url}/api/board/since/${seq}`, { headers: { cookie } })
      ).json()) as BoardCatchUp
    expect(await since(before.seq)).toMatchObject({ kind: 'events', events: missed })
    expect(await since(missed[1]!.seq)).toMatchObject({ kind: 'events', events: [] })
    const all = await since(missed[1]!.seq + 100)
    if (all.kind !== 'snapshot') throw new Error('a number from the future is answered by a snapshot')
    const rows = await test.database.db.select().from(boots).where(eq(boots.shopId, shopId))
    expect(all.snapshot.items.map(({ code }) => code).sort()).toEqual(rows.map(({ code }) => code).sort())
  })

  it('gives dense numbers to commands that come at once', async () => {
    const events = await Promise.all(Array.from({ length: 12 }, () => addBoots()))
    const seqs = events.map(({ seq }) => seq).sort((a, b) => a - b)
    expect(seqs).toEqual(Array.from({ length: 12 }, (_, i) => seqs[0]! + i))
  })

  it('ends within a second for somebody whose sessions end', async () => {
    const socket = connect(cookie)
    await once(socket, 'connect')
    const ended = once(socket, 'disconnect')
    const started = Date.now()
    await endSessions(test.server.deps, personId)
    await ended
    expect(Date.now() - started).toBeLessThan(1000)
    expect(await test.database.db.$count(session, eq(session.personId, personId))).toBe(0)
    expect(await test.database.db.$count(people, eq(people.id, personId))).toBe(1)
  })
})
