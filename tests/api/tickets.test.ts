import { and, asc, eq } from 'drizzle-orm'
import { beforeAll, describe, expect, it } from 'vitest'
import type { AnswerOf } from '#shared/api/define'
import {
  cannotBeSet,
  decideReading,
  getBenchQueue,
  getTicket,
  leaveTicket,
  openTicket,
  readSki,
  standsElsewhere,
} from '#shared/api/tickets'
import { partReading } from '#shared/schemas/records'
import {
  boots,
  fittings,
  presetChanges,
  skiPairs,
  skiReadings,
  skis,
  stateChanges,
  ticketHolds,
} from '../../server/db/schema/schema'
import { newTicket, read, readingOf, sign, ticketOf } from '../support/bench'
import { staff } from '../support/people'
import { testShop, type TestShop } from '../support/shop'

let shop: TestShop
beforeAll(async () => {
  shop = await testShop()
})

const open = (fittingId: string, who: Parameters<TestShop['as']>[0] = 'technician', takeOver = false) =>
  shop.as(who).send(openTicket, { fittingId, takeOver })
const queue = async (siteId?: string) =>
  (
    await shop
      .as('technician')
      .get<AnswerOf<typeof getBenchQueue>>(getBenchQueue.path, siteId ? { siteId } : {})
  ).body.tickets
const skiRow = async (id: string) => (await shop.db.select().from(skis).where(eq(skis.id, id)))[0]!
const readings = (fittingId: string) =>
  shop.db.select().from(skiReadings).where(eq(skiReadings.fittingId, fittingId))

/** What a head technician lets stand, as the technician read it. */
async function decided(fittingId: string, side: 'left' | 'right', differs: { toe?: number; heel?: number }) {
  const { reading } = await readingOf(shop, fittingId, side, differs)
  return { fittingId, side, reading: partReading.parse(reading), reason: 'Looked at it with the boot in' }
}

describe('the queue at the bench', () => {
  it('lists open tickets by promised time, by short number and called name, without body values', async () => {
    const {
      fittingId,
      rental,
      pair,
      boots: made,
    } = await newTicket(shop, { firstName: 'Yusto', lastName: 'Marrow' })
    const found = (await queue()).find((ticket) => ticket.fittingId === fittingId)
    expect(found).toMatchObject({
      number: rental.number,
      name: 'Yusto M.',
      pairCode: pair.code,
      bootsCode: made!.code,
      claimedBy: staff.counter.name,
      heldBy: null,
      read: [],
      // Both skis stand at toe 5, heel 5 and go to toe 7, heel 6 (ladder-16 with a sole of 305 mm, track vectors)
      notches: 6,
    })
    expect(JSON.stringify(found)).not.toContain('Marrow')
    const times = (await queue()).map((ticket) => ticket.promisedAt)
    expect(times).toEqual([...times].sort())
  })

  it('shows one site alone when asked, and nothing of another shop', async () => {
    const { fittingId } = await newTicket(shop)
    expect((await queue(shop.sites.square)).map((ticket) => ticket.fittingId)).not.toContain(fittingId)
    expect((await queue(shop.sites.lower)).map((ticket) => ticket.fittingId)).toContain(fittingId)
    const other = await shop.another()
    const theirs = await other.as('technician').get<AnswerOf<typeof getBenchQueue>>(getBenchQueue.path)
    expect(theirs.body.tickets).toEqual([])
  })

  it("says when an unfinished claim begins to age: after the shop's minutes", async () => {
    const { fittingId } = await newTicket(shop)
    const found = (await queue()).find((ticket) => ticket.fittingId === fittingId)!
    // 30 minutes is the shop's setting as it begins (invented)
    expect(Date.parse(found.agesAt) - Date.parse(found.claimedAt)).toBe(30 * 60_000)
  })

  it('drops a ticket that is signed', async () => {
    const { fittingId } = await newTicket(shop)
    await read(shop, fittingId, 'left')
    // What is left to move is the other ski's: toe 5 to 7 and heel 5 to 6.
    expect((await queue()).find((ticket) => ticket.fittingId === fittingId)).toMatchObject({
      read: ['left'],
      notches: 3,
    })
    await read(shop, fittingId, 'right')
    expect((await sign(shop, fittingId)).status).toBe(201)
    expect((await queue()).map((ticket) => ticket.fittingId)).not.toContain(fittingId)
  })
})

describe('who has a ticket', () => {
  it('a second technician is told who has it and since when, and takes it over with both names kept', async () => {
    const { fittingId } = await newTicket(shop)
    expect((await open(fittingId)).status).toBe(201)
    const refused = await open(fittingId, 'second_technician')
    expect(refused).toMatchObject({
      status: 409,
      code: 'fittings.held_by',
      params: { by: staff.technician.name },
    })
    expect(Date.parse(String(refused.params.since))).toBeLessThanOrEqual(Date.now())

    expect((await open(fittingId, 'second_technician', true)).status).toBe(201)
    const { fitting } = await ticketOf(shop, fittingId)
    expect(fitting.heldBy?.name).toBe(staff.second_technician.name)
    expect(fitting.holds.map(({ by, from }) => [by, from])).toEqual([
      [staff.technician.name, null],
      [staff.second_technician.name, staff.technician.name],
    ])
  })

  it("opening one's own again changes nothing, and one command sent twice is one", async () => {
    const { fittingId } = await newTicket(shop)
    const envelope = { id: '0193d1a2-0000-4000-8000-000000000001' }
    const first = await shop.as('technician').send(openTicket, { fittingId, takeOver: false }, { envelope })
    const again = await shop.as('technician').send(openTicket, { fittingId, takeOver: false }, { envelope })
    expect([again.status, again.seq]).toEqual([201, first.seq])
    await open(fittingId)
    expect(await shop.db.$count(ticketHolds, eq(ticketHolds.fittingId, fittingId))).toBe(1)
  })

  it('nobody reads, moves or ends a ticket that somebody else has', async () => {
    const { fittingId, pair } = await newTicket(shop)
    await open(fittingId)
    expect((await read(shop, fittingId, 'left', { who: 'second_technician' })).code).toBe('fittings.held_by')
    const elsewhere = { fittingId, skiId: pair.skis.left.id, toe: 3, heel: 3, turns: null, presetVersion: 1 }
    const other = shop.as('second_technician')
    expect((await other.send(standsElsewhere, elsewhere)).code).toBe('fittings.held_by')
    const end = { fittingId, reason: 'Screw is loose', to: 'service' as const }
    expect((await other.send(cannotBeSet, end)).code).toBe('fittings.held_by')
    expect((await other.send(leaveTicket, { fittingId })).code).toBe('fittings.held_by')
  })

  it('a ticket that was left is free for the next, and what was read stays', async () => {
    const { fittingId } = await newTicket(shop)
    await read(shop, fittingId, 'left')
    expect((await shop.as('technician').send(leaveTicket, { fittingId })).status).toBe(201)
    expect((await open(fittingId, 'second_technician')).status).toBe(201)
    expect((await ticketOf(shop, fittingId)).fitting.readings.left?.by.name).toBe(staff.technician.name)
  })

  it('two technicians at once: one has it, the other learns so', async () => {
    const { fittingId } = await newTicket(shop)
    const both = await Promise.all([open(fittingId), open(fittingId, 'second_technician')])
    expect(both.map(({ status }) => status).sort()).toEqual([201, 409])
  })
})

describe('reading a ski back', () => {
  it('what matches is stored, and the preset is from then on what was read', async () => {
    const { fittingId, pair } = await newTicket(shop)
    expect((await read(shop, fittingId, 'left')).status).toBe(201)
    const [stored] = await readings(fittingId)
    expect(stored).toMatchObject({ side: 'left', verdict: 'matches', presetVersion: 2, decisionId: null })
    expect(stored!.reading).toMatchObject({ toe: 7, heel: 6, toeValue: 6.5, heelValue: 6.5 })
    expect(await skiRow(pair.skis.left.id)).toMatchObject({ presetToe: 7, presetHeel: 6, presetVersion: 2 })
    const [change] = await shop.db
      .select()
      .from(presetChanges)
      .where(and(eq(presetChanges.skiId, pair.skis.left.id), eq(presetChanges.presetVersion, 2)))
    expect(change).toMatchObject({ reason: 'read_back', fittingId, personId: shop.people.technician.id })
  })

  it('a heel one notch off with forward pressure in its window is stored: the window decides', async () => {
    const { fittingId, pair } = await newTicket(shop)
    expect((await read(shop, fittingId, 'right', { heel: 7 })).status).toBe(201)
    expect((await readings(fittingId))[0]).toMatchObject({ verdict: 'window_decides' })
    expect(await skiRow(pair.skis.right.id)).toMatchObject({ presetToe: 7, presetHeel: 7 })
  })

  it('a screw one turn off within its travel is decided by the window, beyond its travel it is no reading', async () => {
    const { fittingId } = await newTicket(shop, { track: 'ladder-12-s' })
    const { fitting } = await ticketOf(shop, fittingId)
    const turns = fitting.track.turns!
    const off = turns > 0 ? turns - 1 : turns + 1
    expect((await read(shop, fittingId, 'left', { turns: off })).status).toBe(201)
    expect((await readings(fittingId))[0]!.verdict).toBe('window_decides')
    expect((await read(shop, fittingId, 'right', { turns: 2 })).code).toBe('records.not_on_rail')
    expect((await read(shop, fittingId, 'right', { turns: null })).params).toMatchObject({
      what: 'screw',
      read: null,
      decides: 'nobody',
    })
  })

  it.each([
    ['a toe value', { toeValue: 6 }, { what: 'value', part: 'toe', target: 6.5, read: 6, decides: 'nobody' }],
    [
      'a heel value',
      { heelValue: 7 },
      { what: 'value', part: 'heel', target: 6.5, read: 7, decides: 'nobody' },
    ],
    [
      'forward pressure outside its window',
      { forwardPressure: false },
      { what: 'forward_pressure', part: 'heel', decides: 'nobody' },
    ],
    [
      'another toe mark',
      { toe: 8 },
      { what: 'mark', part: 'toe', targetMark: '7', readMark: '8', decides: 'head_technician' },
    ],
    [
      'a heel two notches off',
      { heel: 8 },
      { what: 'mark', part: 'heel', targetMark: '6', readMark: '8', decides: 'head_technician' },
    ],
  ])(
    '%s is refused with what differs and who decides, and nothing is stored',
    async (_what, differs, params) => {
      const { fittingId, pair } = await newTicket(shop)
      const refused = await read(shop, fittingId, 'left', differs)
      expect(refused).toMatchObject({
        status: 422,
        code: 'fittings.mismatch',
        params: { side: 'left', ...params },
      })
      expect(await readings(fittingId)).toEqual([])
      expect(await skiRow(pair.skis.left.id)).toMatchObject({ presetToe: 5, presetHeel: 5, presetVersion: 1 })
    },
  )

  it("on a coupled track one notch off is a head technician's already", async () => {
    const { fittingId } = await newTicket(shop, { track: 'twinrow-21' })
    const { fitting } = await ticketOf(shop, fittingId)
    const { toe, heel } = fitting.track
    const refused = await read(shop, fittingId, 'left', { toe: toe + 1, heel: heel + 1 })
    expect(refused.params).toMatchObject({ what: 'mark', part: 'both', decides: 'head_technician' })
    expect((await read(shop, fittingId, 'left', { heel: heel + 1 })).params.decides).toBe('head_technician')
    expect((await read(shop, fittingId, 'left')).status).toBe(201)
  })

  it('a mark that is not on the rail was read nowhere', async () => {
    const { fittingId } = await newTicket(shop)
    expect((await read(shop, fittingId, 'left', { heel: 17 })).code).toBe('records.not_on_rail')
  })

  it('a check that nobody confirmed is no reading', async () => {
    const { fittingId } = await newTicket(shop)
    const body = await readingOf(shop, fittingId, 'left')
    const unconfirmed = { ...body, reading: { ...body.reading, brake: false as true } }
    expect((await shop.as('technician').send(readSki, unconfirmed)).code).toBe('request.malformed')
  })

  it('a ski whose preset somebody else wrote meanwhile is to be looked at again', async () => {
    const { fittingId } = await newTicket(shop)
    const seen = await readingOf(shop, fittingId, 'left')
    await read(shop, fittingId, 'left')
    expect((await shop.as('technician').send(readSki, seen)).code).toBe('fittings.preset_moved')
  })
})

describe("a head technician's decision about a reading", () => {
  it('lets a mark stand that differs, with the decision on the reading, for that reading only', async () => {
    const { fittingId } = await newTicket(shop)
    const body = await decided(fittingId, 'left', { toe: 8 })
    const { status, ids } = await shop.as('head_technician').send(decideReading, body)
    expect(status).toBe(201)
    expect((await read(shop, fittingId, 'left', { toe: 9 })).code).toBe('fittings.mismatch')
    expect((await read(shop, fittingId, 'right', { toe: 8 })).code).toBe('fittings.mismatch')
    expect((await read(shop, fittingId, 'left', { toe: 8 })).status).toBe(201)
    expect((await readings(fittingId))[0]).toMatchObject({
      verdict: 'head_technician',
      decisionId: ids.decisionId,
    })
    const { body: ticket } = await shop
      .as('technician')
      .get<AnswerOf<typeof getTicket>>(getTicket.path.replace(':id', fittingId))
    expect(ticket.decided).toMatchObject([{ side: 'left', by: staff.head_technician.name }])
  })

  it('never lets a value stand, nor decides what matches or what the window decides', async () => {
    const { fittingId } = await newTicket(shop)
    const head = shop.as('head_technician')
    const wrong = await decided(fittingId, 'left', { toe: 8 })
    wrong.reading.heelValue = 7
    expect(await head.send(decideReading, wrong)).toMatchObject({
      code: 'fittings.value_not_decidable',
      params: { why: 'value' },
    })
    expect((await head.send(decideReading, await decided(fittingId, 'left', {}))).code).toBe(
      'fittings.nothing_to_decide',
    )
    expect((await head.send(decideReading, await decided(fittingId, 'left', { heel: 7 }))).code).toBe(
      'fittings.nothing_to_decide',
    )
  })

  it.each(['technician', 'counter', 'manager'] as const)("is not a %s's", async (who) => {
    const { fittingId } = await newTicket(shop)
    const body = await decided(fittingId, 'left', { toe: 8 })
    expect((await shop.as(who).send(decideReading, body)).code).toBe('session.role')
  })
})

describe('it stands elsewhere', () => {
  it('is stored and counted, the queue counts the moves from there, and the ticket goes on', async () => {
    const { fittingId, pair } = await newTicket(shop)
    const skiId = pair.skis.left.id
    const body = { fittingId, skiId, toe: 7, heel: 9, turns: null, presetVersion: 1 }
    expect((await shop.as('technician').send(standsElsewhere, body)).status).toBe(201)
    const changes = await shop.db
      .select()
      .from(presetChanges)
      .where(eq(presetChanges.skiId, skiId))
      .orderBy(asc(presetChanges.presetVersion))
    expect(changes.map(({ reason }) => reason)).toEqual(['read', 'stood_elsewhere'])
    expect(changes[1]).toMatchObject({ presetToe: 7, presetHeel: 9, fittingId })
    // Left: toe stays, heel 9 to 6; right: toe 5 to 7, heel 5 to 6
    expect((await queue()).find((ticket) => ticket.fittingId === fittingId)!.notches).toBe(6)
    expect((await ticketOf(shop, fittingId)).fitting.state).toBe('claimed')
    expect((await read(shop, fittingId, 'left')).status).toBe(201)
  })

  it('is refused where it was believed to stand, off the rail, and for a ski of another pair', async () => {
    const { fittingId, pair } = await newTicket(shop)
    const other = await newTicket(shop)
    const send = (differs: object) =>
      shop.as('technician').send(standsElsewhere, {
        fittingId,
        skiId: pair.skis.left.id,
        toe: 5,
        heel: 5,
        turns: null,
        presetVersion: 1,
        ...differs,
      })
    expect((await send({})).code).toBe('fittings.stands_there')
    expect((await send({ toe: 99 })).code).toBe('records.not_on_rail')
    expect((await send({ toe: 6, skiId: other.pair.skis.left.id })).code).toBe('items.unknown')
  })

  it('after a reading, the ski has to be read again before anybody signs', async () => {
    const { fittingId, pair } = await newTicket(shop)
    await read(shop, fittingId, 'left')
    await read(shop, fittingId, 'right')
    const moved = { fittingId, skiId: pair.skis.left.id, toe: 7, heel: 5, turns: null, presetVersion: 2 }
    expect((await shop.as('technician').send(standsElsewhere, moved)).status).toBe(201)
    expect(await sign(shop, fittingId)).toMatchObject({
      code: 'fittings.unread',
      params: { sides: ['left'] },
    })
    await read(shop, fittingId, 'left')
    expect((await sign(shop, fittingId)).status).toBe(201)
  })
})

describe('a pair that cannot be set', () => {
  it.each(['service', 'unchecked'] as const)('goes to %s, its boots go back to their place', async (to) => {
    const { fittingId, pair, boots: made } = await newTicket(shop)
    const body = { fittingId, reason: 'Heel rail is bent', to }
    expect((await shop.as('technician').send(cannotBeSet, body)).status).toBe(201)
    const [fitting] = await shop.db.select().from(fittings).where(eq(fittings.id, fittingId))
    expect(fitting).toMatchObject({ state: 'void', endReason: 'cannot_be_set', heldBy: null })
    const [pairRow] = await shop.db.select().from(skiPairs).where(eq(skiPairs.id, pair.id))
    const [bootsRow] = await shop.db.select().from(boots).where(eq(boots.id, made!.id))
    expect([pairRow!.state, bootsRow!.state]).toEqual([to, 'racked'])
    const changes = await shop.db.select().from(stateChanges).where(eq(stateChanges.itemId, pair.id))
    expect(changes.find((change) => change.toState === to)?.reason).toBe('Heel rail is bent')
    expect((await read(shop, fittingId, 'left')).code).toBe('fittings.void')
  })
})

describe('who may work at the bench', () => {
  it.each(['technician', 'head_technician'] as const)('a %s opens tickets', async (who) => {
    const { fittingId } = await newTicket(shop)
    expect((await open(fittingId, who)).status).toBe(201)
  })

  it.each(['counter', 'manager'] as const)('a %s does not', async (who) => {
    const { fittingId } = await newTicket(shop)
    const me = shop.as(who)
    expect((await open(fittingId, who)).code).toBe('session.role')
    expect((await me.send(leaveTicket, { fittingId })).code).toBe('session.role')
    expect((await read(shop, fittingId, 'left', { who })).code).toBe('session.role')
    const end = { fittingId, reason: 'Not mine to say', to: 'service' as const }
    expect((await me.send(cannotBeSet, end)).code).toBe('session.role')
  })

  it('a stranger gets nothing', async () => {
    const { fittingId } = await newTicket(shop)
    expect((await shop.stranger().send(openTicket, { fittingId, takeOver: false })).status).toBe(401)
    expect((await shop.stranger().get(getBenchQueue.path)).status).toBe(401)
  })

  it("another shop's ticket is unknown", async () => {
    const { fittingId } = await newTicket(shop)
    const other = await shop.another()
    const theirs = other.as('head_technician')
    expect(await theirs.send(openTicket, { fittingId, takeOver: true })).toMatchObject({
      code: 'fittings.not_open',
      params: { state: 'unknown' },
    })
    expect((await theirs.get(getTicket.path.replace(':id', fittingId))).status).toBe(404)
  })
})
