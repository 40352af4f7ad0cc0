import fc from 'fast-check'
import { and, eq } from 'drizzle-orm'
import { beforeAll, describe, expect, it } from 'vitest'
import type { AnswerOf, BodyOf } from '#shared/api/define'
import { recordInspection } from '#shared/api/inspections'
import { moveItem } from '#shared/api/items'
import { getReturnsToday, returnOwnBoots, scanReturn, type ReturnSet } from '#shared/api/returns'
import type { BoardItem } from '#shared/schemas/board'
import { soundBoots, soundSkis } from '../support/inspections'
import { boots, callBacks, rentals, returns, skiPairs, stateChanges } from '../../server/db/schema/schema'
import { preparedSet, setOut, type TestSet } from '../support/handOvers'
import { testShop, type TestShop } from '../support/shop'

let shop: TestShop

beforeAll(async () => {
  shop = await testShop()
})

const scan = (text: string) => shop.as('counter').send(scanReturn, { text })
const clear = async (item: Pick<BodyOf<typeof recordInspection>, 'itemKind' | 'itemId' | 'checks'>) => {
  const body = { ...item, verdict: 'rack', note: '' } as BodyOf<typeof recordInspection>
  expect((await shop.as('technician').send(recordInspection, body)).status).toBe(201)
}
const pairState = async (id: string) =>
  (await shop.db.select().from(skiPairs).where(eq(skiPairs.id, id)))[0]!.state
const bootsState = async (id: string) =>
  (await shop.db.select().from(boots).where(eq(boots.id, id)))[0]!.state
const rentalState = async (id: string) =>
  (await shop.db.select().from(rentals).where(eq(rentals.id, id)))[0]!.state
const returnsOf = (itemId: string) => shop.db.select().from(returns).where(eq(returns.itemId, itemId))
const setOf = async (rentalId: string) =>
  (await shop.as('counter').get<ReturnSet>(`/api/returns/sets/${rentalId}`)).body
const openCodes = (set: ReturnSet) =>
  set.parts.filter((part) => !part.back).map((part) => `${part.code} ${part.side}`)
const labelsOf = ({ pair, boots: shopBoots }: TestSet) => [
  pair.skis.left.label,
  pair.skis.right.label,
  ...(shopBoots ? [shopBoots.labels.left, shopBoots.labels.right] : []),
]

describe('a set that comes back', () => {
  it('is unchecked at its first ski, and stays open with what is missing until all of it is there', async () => {
    const set = await setOut(shop)
    const first = await scan(set.pair.skis.left.label)
    expect(first).toMatchObject({
      status: 201,
      ids: { rentalId: set.rental.id, already: false, stateBefore: 'out', state: 'unchecked' },
    })
    expect(await rentalState(set.rental.id)).toBe('out')
    const { code } = set.pair
    const bootsCode = set.boots!.code
    expect(openCodes(await setOf(set.rental.id))).toEqual([
      `${code} right`,
      `${bootsCode} left`,
      `${bootsCode} right`,
    ])

    await scan(set.boots!.labels.right)
    await scan(set.pair.skis.right.label)
    expect(await rentalState(set.rental.id)).toBe('out')
    await scan(set.boots!.labels.left)
    expect(await rentalState(set.rental.id)).toBe('returned')
    expect(openCodes(await setOf(set.rental.id))).toEqual([])
    const changes = await shop.db
      .select()
      .from(stateChanges)
      .where(and(eq(stateChanges.itemId, set.pair.id), eq(stateChanges.toState, 'unchecked')))
    expect(changes).toHaveLength(1)
  })

  it('ends the same whatever the order of its scans, and whatever is scanned twice', async () => {
    const shuffles = fc.sample(
      fc
        .tuple(
          fc.shuffledSubarray([0, 1, 2, 3], { minLength: 4 }),
          fc.array(fc.integer({ min: 0, max: 3 }), { maxLength: 3 }),
        )
        .chain(([all, again]) =>
          fc.shuffledSubarray([...all, ...again], { minLength: all.length + again.length }),
        ),
      { numRuns: 8, seed: 417 },
    )
    for (const order of shuffles) {
      const set = await setOut(shop)
      const labels = labelsOf(set)
      for (const index of order) expect((await scan(labels[index]!)).status).toBe(201)
      expect(await pairState(set.pair.id)).toBe('unchecked')
      expect(await bootsState(set.boots!.id)).toBe('unchecked')
      expect(await rentalState(set.rental.id)).toBe('returned')
      expect([...(await returnsOf(set.pair.id)), ...(await returnsOf(set.boots!.id))]).toHaveLength(4)
    }
  })

  it('is returned as well when its last two things are scanned at the same moment', async () => {
    const set = await setOut(shop)
    await scan(set.pair.skis.left.label)
    await scan(set.boots!.labels.left)
    const both = await Promise.all([scan(set.pair.skis.right.label), scan(set.boots!.labels.right)])
    expect(both.map(({ status }) => status)).toEqual([201, 201])
    expect(await rentalState(set.rental.id)).toBe('returned')
  })

  it('may come mixed with another set: each thing goes to its own rental', async () => {
    const [one, other] = [await setOut(shop), await setOut(shop)]
    const first = await scan(one.pair.skis.left.label)
    const second = await scan(other.pair.skis.right.label)
    expect([first.ids.rentalId, second.ids.rentalId]).toEqual([one.rental.id, other.rental.id])
    for (const label of [...labelsOf(one), ...labelsOf(other)]) await scan(label)
    expect([await rentalState(one.rental.id), await rentalState(other.rental.id)]).toEqual([
      'returned',
      'returned',
    ])
  })

  it('is told to the boards without a name, with the ski that is missing', async () => {
    const set = await setOut(shop)
    const answer = await scan(set.pair.skis.left.label)
    const event = answer.body.event as { items: BoardItem[] }
    expect(event.items).toMatchObject([{ id: set.pair.id, state: 'unchecked', missing: ['right'] }])
    expect(JSON.stringify(answer.body)).not.toContain('Heath')
  })
})

describe('a scan at the returns desk', () => {
  it('that is made twice answers the first return and adds none', async () => {
    const set = await setOut(shop)
    const first = await scan(set.pair.skis.left.label)
    const second = await scan(set.pair.skis.left.label)
    expect(second).toMatchObject({ status: 201, ids: { already: true, returnIds: first.ids.returnIds } })
    expect(await returnsOf(set.pair.id)).toHaveLength(1)
  })

  it('that is sent again with its own id has no second effect', async () => {
    const set = await setOut(shop)
    const envelope = { id: crypto.randomUUID(), occurredAt: new Date().toISOString() }
    const text = set.pair.skis.left.label
    const first = await shop.as('counter').send(scanReturn, { text }, { envelope })
    const again = await shop.as('counter').send(scanReturn, { text }, { envelope })
    expect(again.body).toEqual(first.body)
    expect(await returnsOf(set.pair.id)).toHaveLength(1)
  })

  it('of something that hangs on its rack or is prepared is written down and changes nothing', async () => {
    const racked = await shop.rackedPair()
    expect(await scan(racked.skis.left.label)).toMatchObject({
      status: 201,
      ids: { rentalId: null, stateBefore: 'racked', state: 'racked' },
    })
    expect(await returnsOf(racked.id)).toMatchObject([{ rentalId: null, stateBefore: 'racked' }])
    const set = await preparedSet(shop)
    expect((await scan(set.boots!.labels.left)).ids).toMatchObject({ rentalId: null, state: 'prepared' })
    expect(await bootsState(set.boots!.id)).toBe('prepared')
  })

  it('of something that is held is written down; the hold stays and the set closes', async () => {
    const set = await setOut(shop)
    await shop.hold({ kind: 'ski_pair', id: set.pair.id }, 'out')
    for (const label of labelsOf(set)) expect((await scan(label)).status).toBe(201)
    expect(await pairState(set.pair.id)).toBe('quarantine')
    expect(await returnsOf(set.pair.id)).toMatchObject([
      { stateBefore: 'quarantine', rentalId: set.rental.id },
      { stateBefore: 'quarantine', rentalId: set.rental.id },
    ])
    expect(await rentalState(set.rental.id)).toBe('returned')
  })

  it('of something that was lost finds it again', async () => {
    const set = await setOut(shop)
    await shop.as('counter').send(moveItem, {
      itemKind: 'ski_pair',
      itemId: set.pair.id,
      to: 'lost',
      rackPlace: '',
      reason: 'Not brought back',
    })
    expect(await pairState(set.pair.id)).toBe('lost')
    expect((await scan(set.pair.skis.left.label)).ids).toMatchObject({
      stateBefore: 'lost',
      state: 'unchecked',
    })
  })

  it('counts from when the thing went out again: an old return is not taken for a new one', async () => {
    const set = await setOut(shop)
    for (const label of labelsOf(set)) await scan(label)
    const first = await scan(set.pair.skis.left.label)
    await clear({ itemKind: 'ski_pair', itemId: set.pair.id, checks: soundSkis })
    await clear({ itemKind: 'boots', itemId: set.boots!.id, checks: soundBoots })
    const again = await setOut(shop, { pair: set.pair, boots: set.boots })
    const second = await scan(set.pair.skis.left.label)
    expect(second.ids).toMatchObject({ already: false, rentalId: again.rental.id, state: 'unchecked' })
    expect(second.ids.returnIds).not.toEqual(first.ids.returnIds)
  })

  it('takes a code typed by hand, and asks which ski it is when the code does not say', async () => {
    const set = await setOut(shop)
    expect(await scan(set.pair.code)).toMatchObject({ status: 422, code: 'returns.side' })
    const one = await shop.as('counter').send(scanReturn, { text: `${set.pair.code}r`.toLowerCase() })
    expect(one.ids.state).toBe('unchecked')
    const whole = await shop.as('counter').send(scanReturn, { text: set.boots!.code, side: 'both' })
    expect(whole.ids.returnIds).toHaveLength(2)
    const byId = { itemKind: 'ski_pair', itemId: set.pair.id, side: 'left' } as const
    expect((await shop.as('counter').send(scanReturn, byId)).status).toBe(201)
    expect(await rentalState(set.rental.id)).toBe('returned')
  })

  it('does not know the label of another shop, nor its items and rentals', async () => {
    const other = await shop.another()
    const theirs = await setOut(other)
    const byId = { itemKind: 'ski_pair', itemId: theirs.pair.id, side: 'left' } as const
    expect(await shop.as('manager').send(scanReturn, byId)).toMatchObject({
      status: 404,
      code: 'items.unknown',
    })
    expect(await scan('S99999L')).toMatchObject({ status: 404, code: 'labels.unknown' })
    expect((await shop.as('counter').get(`/api/returns/sets/${theirs.rental.id}`)).status).toBe(404)
    const own = { rentalId: theirs.rental.id, soleLengthMm: 305 }
    expect(await shop.as('counter').send(returnOwnBoots, own)).toMatchObject({ code: 'returns.nothing_out' })
    expect(await pairState(theirs.pair.id)).toBe('out')
  })

  it('is anybody’s who works in the shop, and nobody else’s', async () => {
    for (const who of ['counter', 'technician', 'head_technician', 'manager'] as const) {
      const set = await setOut(shop)
      expect((await shop.as(who).send(scanReturn, { text: set.pair.skis.left.label })).status).toBe(201)
    }
    expect(await shop.stranger().send(scanReturn, { text: 'S1L' })).toMatchObject({
      status: 401,
      code: 'session.missing',
    })
  })
})

describe('the renter’s own boots', () => {
  const read = (rentalId: string, soleLengthMm: number) =>
    shop.as('counter').send(returnOwnBoots, { rentalId, soleLengthMm })

  it('keep the set open until their sole length was read', async () => {
    const set = await setOut(shop, { ownSoleLengthMm: 305 })
    for (const label of labelsOf(set)) await scan(label)
    expect(await rentalState(set.rental.id)).toBe('out')
    expect((await setOf(set.rental.id)).ownBoots).toBeNull()
    expect((await read(set.rental.id, 305)).ids).toMatchObject({
      already: false,
      differs: false,
      callBackId: null,
    })
    expect(await rentalState(set.rental.id)).toBe('returned')
    expect((await setOf(set.rental.id)).ownBoots).toEqual({ readMm: 305, fittedMm: 305 })
    expect((await read(set.rental.id, 305)).ids.already).toBe(true)
  })

  it('of another length are a call-back while the skis are still out', async () => {
    const set = await setOut(shop, { ownSoleLengthMm: 305 })
    const answer = await read(set.rental.id, 317)
    expect(answer.ids.differs).toBe(true)
    const [entry] = await shop.db.select().from(callBacks).where(eq(callBacks.fittingId, set.fittingId))
    expect(entry).toMatchObject({ id: answer.ids.callBackId, cause: 'own_boots_differ', closedAt: null })
  })

  it('of another length are kept with the return when everything else is back', async () => {
    const set = await setOut(shop, { ownSoleLengthMm: 305 })
    for (const label of labelsOf(set)) await scan(label)
    expect((await read(set.rental.id, 317)).ids).toMatchObject({ differs: true, callBackId: null })
    expect((await setOf(set.rental.id)).ownBoots).toEqual({ readMm: 317, fittedMm: 305 })
    expect(await returnsOf(set.ownBootsId!)).toMatchObject([{ soleLengthReadMm: 317, side: 'both' }])
  })

  it('are not asked for where the shop’s boots are out', async () => {
    const set = await setOut(shop)
    expect(await read(set.rental.id, 305)).toMatchObject({ status: 409, code: 'returns.nothing_out' })
  })
})

describe('the day at the returns desk', () => {
  it('lists the scans, newest first, and the sets that are due with what of them is out', async () => {
    const set = await setOut(shop, { days: 1, firstName: 'Oriel', lastName: 'Vintersoe' })
    const later = await setOut(shop, { days: 3 })
    await scan(set.pair.skis.left.label)
    await scan(set.boots!.labels.left)
    const { body } = await shop.as('counter').get<AnswerOf<typeof getReturnsToday>>('/api/returns/today')
    expect(body.scans.slice(0, 2)).toMatchObject([
      { code: set.boots!.code, side: 'left', state: 'unchecked', missing: ['right'] },
      { code: set.pair.code, side: 'left', renter: 'Oriel V.', rentalId: set.rental.id },
    ])
    expect(body.sets).toContainEqual(
      expect.objectContaining({
        rentalId: set.rental.id,
        renter: 'Oriel V.',
        parts: 4,
        out: 2,
        endsOn: body.today,
      }),
    )
    expect(body.sets.map(({ rentalId }) => rentalId)).not.toContain(later.rental.id)
  })

  it('shows one site to who asks for it', async () => {
    const { body } = await shop
      .as('counter')
      .get<AnswerOf<typeof getReturnsToday>>('/api/returns/today', { siteId: shop.sites.square })
    expect(body).toMatchObject({ scans: [], sets: [] })
  })
})
