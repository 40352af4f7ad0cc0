import { eq } from 'drizzle-orm'
import { beforeAll, describe, expect, it } from 'vitest'
import type { AnswerOf, BodyOf } from '#shared/api/define'
import { getClearing, listUnchecked, recordInspection } from '#shared/api/inspections'
import { scanReturn } from '#shared/api/returns'
import { boots, inspections, skiPairs, stateChanges } from '../../server/db/schema/schema'
import { setOut, type TestSet } from '../support/handOvers'
import { soundBoots, soundSkis } from '../support/inspections'
import { testShop, type Person, type TestShop } from '../support/shop'

let shop: TestShop
let technician: Person

beforeAll(async () => {
  shop = await testShop()
  technician = shop.as('technician')
})

type Body = BodyOf<typeof recordInspection>
type SkiBody = Extract<Body, { itemKind: 'ski_pair' }>

const skiBody = (itemId: string, more: Partial<SkiBody> = {}): SkiBody => ({
  itemKind: 'ski_pair',
  itemId,
  checks: soundSkis,
  verdict: 'rack',
  note: '',
  ...more,
})
const pairOf = async (id: string) => (await shop.db.select().from(skiPairs).where(eq(skiPairs.id, id)))[0]!
const bootsOf = async (id: string) => (await shop.db.select().from(boots).where(eq(boots.id, id)))[0]!
const inspectionsOf = (id: string) => shop.db.select().from(inspections).where(eq(inspections.itemId, id))

async function bothSkisBack(person = shop.as('counter')): Promise<TestSet> {
  const set = await setOut(shop)
  for (const side of ['left', 'right'] as const)
    await person.send(scanReturn, { text: set.pair.skis[side].label })
  return set
}

describe('clearing a pair', () => {
  it('puts it back to the place where it hung, with the list that was gone through', async () => {
    const { pair } = await bothSkisBack()
    const before = await pairOf(pair.id)
    const answer = await technician.send(recordInspection, skiBody(pair.id))
    expect(answer.status).toBe(201)
    expect(await pairOf(pair.id)).toMatchObject({ state: 'racked', rackPlace: before.rackPlace })
    expect(await inspectionsOf(pair.id)).toMatchObject([
      {
        id: answer.ids.inspectionId,
        verdict: 'rack',
        personId: shop.people.technician.id,
        checks: soundSkis,
      },
    ])
    const [change] = await shop.db.select().from(stateChanges).where(eq(stateChanges.id, answer.ids.changeId))
    expect(change).toMatchObject({
      fromState: 'unchecked',
      toState: 'racked',
      subjectId: answer.ids.inspectionId,
    })
  })

  it('puts it to another place when one is given', async () => {
    const { pair } = await bothSkisBack()
    await technician.send(recordInspection, skiBody(pair.id, { rackPlace: 'C 09' }))
    expect(await pairOf(pair.id)).toMatchObject({ state: 'racked', rackPlace: 'C 09' })
  })

  it('waits until both skis are there, and says which one is missing', async () => {
    const set = await setOut(shop)
    await shop.as('counter').send(scanReturn, { text: set.pair.skis.left.label })
    expect(await technician.send(recordInspection, skiBody(set.pair.id))).toMatchObject({
      status: 409,
      code: 'inspections.part_missing',
      params: { code: set.pair.code, sides: ['right'] },
    })
    expect(await inspectionsOf(set.pair.id)).toEqual([])
    expect((await pairOf(set.pair.id)).state).toBe('unchecked')
    const broken = skiBody(set.pair.id, { verdict: 'service', note: 'Left toe housing cracked' })
    expect((await technician.send(recordInspection, broken)).status).toBe(201)
  })

  it('takes no list with a point left out', async () => {
    const { pair } = await bothSkisBack()
    const { screws: _left, ...short } = soundSkis
    const answer = await technician.send(
      recordInspection,
      skiBody(pair.id, { checks: short as SkiBody['checks'] }),
    )
    expect(answer).toMatchObject({ status: 400, code: 'request.malformed' })
    const ofBoots = skiBody(pair.id, { checks: soundBoots as unknown as SkiBody['checks'] })
    expect((await technician.send(recordInspection, ofBoots)).status).toBe(400)
    expect((await pairOf(pair.id)).state).toBe('unchecked')
  })

  it('is refused with a fault left, and goes through once the fault was put right', async () => {
    const { pair } = await bothSkisBack()
    const faulty = skiBody(pair.id, { checks: { ...soundSkis, edge: 'fault', brake: 'fault' } })
    expect(await technician.send(recordInspection, faulty)).toMatchObject({
      status: 422,
      code: 'inspections.fault_left',
      params: { faults: ['edge', 'brake'] },
    })
    const mended = skiBody(pair.id, { checks: { ...soundSkis, edge: 'put_right' } })
    expect((await technician.send(recordInspection, mended)).status).toBe(201)
  })

  it('sends it to service or withdraws it for a fault, or for a reason in words', async () => {
    const [first, second] = [await bothSkisBack(), await bothSkisBack()]
    expect(
      await technician.send(recordInspection, skiBody(first.pair.id, { verdict: 'withdraw' })),
    ).toMatchObject({
      status: 422,
      code: 'inspections.reason',
    })
    const cracked = { ...soundSkis, toe: 'fault' } as const
    await technician.send(recordInspection, skiBody(first.pair.id, { verdict: 'withdraw', checks: cracked }))
    expect((await pairOf(first.pair.id)).state).toBe('withdrawn')
    await technician.send(recordInspection, skiBody(second.pair.id, { verdict: 'service', note: 'Wax' }))
    expect((await pairOf(second.pair.id)).state).toBe('service')
  })

  it('has no second time: what is cleared, out, or held is not unchecked', async () => {
    const { pair } = await bothSkisBack()
    await technician.send(recordInspection, skiBody(pair.id))
    expect(await technician.send(recordInspection, skiBody(pair.id))).toMatchObject({
      status: 409,
      code: 'items.state',
      params: { state: 'racked' },
    })
    const out = await setOut(shop)
    expect((await technician.send(recordInspection, skiBody(out.pair.id))).params).toMatchObject({
      state: 'out',
    })
    await shop.hold({ kind: 'ski_pair', id: pair.id }, 'racked')
    expect((await technician.send(recordInspection, skiBody(pair.id))).params).toMatchObject({
      state: 'quarantine',
    })
  })

  it('happens once when two people clear it at the same moment', async () => {
    const { pair } = await bothSkisBack()
    const both = await Promise.all([
      technician.send(recordInspection, skiBody(pair.id)),
      shop
        .as('head_technician')
        .send(recordInspection, skiBody(pair.id, { verdict: 'service', note: 'Edge' })),
    ])
    expect(both.map(({ status }) => status).sort()).toEqual([201, 409])
    expect(await inspectionsOf(pair.id)).toHaveLength(1)
  })

  it('asks for a place where the pair came back to another site', async () => {
    const { pair } = await bothSkisBack()
    const bench = await shop.enrol('returns', shop.sites.square)
    const there = shop.as('technician', bench)
    expect(await there.send(recordInspection, skiBody(pair.id))).toMatchObject({
      status: 422,
      code: 'inspections.rack_place',
    })
    await there.send(recordInspection, skiBody(pair.id, { rackPlace: 'V 02' }))
    expect(await pairOf(pair.id)).toMatchObject({
      siteId: shop.sites.square,
      rackPlace: 'V 02',
      state: 'racked',
    })
  })
})

describe('clearing boots', () => {
  it('goes through their own list', async () => {
    const set = await setOut(shop)
    for (const side of ['left', 'right'] as const)
      await shop.as('counter').send(scanReturn, { text: set.boots!.labels[side] })
    const body = { itemKind: 'boots', itemId: set.boots!.id, verdict: 'rack', note: '' } as const
    const worn = { ...soundBoots, sole_wear: 'fault' } as const
    expect((await technician.send(recordInspection, { ...body, checks: worn })).code).toBe(
      'inspections.fault_left',
    )
    expect((await technician.send(recordInspection, { ...body, checks: soundBoots })).status).toBe(201)
    expect((await bootsOf(set.boots!.id)).state).toBe('racked')
  })
})

describe('who clears', () => {
  it('is a technician or a head technician, not the counter, the manager or a stranger', async () => {
    const { pair } = await bothSkisBack()
    for (const who of ['counter', 'manager'] as const)
      expect(await shop.as(who).send(recordInspection, skiBody(pair.id))).toMatchObject({
        status: 403,
        code: 'session.role',
      })
    expect((await shop.stranger().send(recordInspection, skiBody(pair.id))).status).toBe(401)
    expect((await shop.as('head_technician').send(recordInspection, skiBody(pair.id))).status).toBe(201)
  })

  it('is of this shop: another shop’s pair is not known', async () => {
    const other = await shop.another()
    const theirs = await setOut(other)
    await other.as('counter').send(scanReturn, { text: theirs.pair.skis.left.label })
    expect(await technician.send(recordInspection, skiBody(theirs.pair.id))).toMatchObject({
      status: 404,
      code: 'items.unknown',
    })
    expect((await technician.get(`/api/returns/items/ski_pair/${theirs.pair.id}`)).status).toBe(404)
    const { body } = await technician.get<AnswerOf<typeof listUnchecked>>('/api/returns/unchecked')
    expect(body.rows.map(({ itemId }) => itemId)).not.toContain(theirs.pair.id)
  })
})

describe('what waits to be cleared', () => {
  it('is listed with its place and what of it is missing, and gone once cleared', async () => {
    const set = await setOut(shop)
    const waiting = async () =>
      (await technician.get<AnswerOf<typeof listUnchecked>>('/api/returns/unchecked')).body.rows.find(
        ({ itemId }) => itemId === set.pair.id,
      )
    expect(await waiting()).toBeUndefined()
    await shop.as('counter').send(scanReturn, { text: set.pair.skis.right.label })
    const { rackPlace } = await pairOf(set.pair.id)
    expect(await waiting()).toMatchObject({ code: set.pair.code, size: 163, rackPlace, missing: ['left'] })
    await shop.as('counter').send(scanReturn, { text: set.pair.skis.left.label })
    await technician.send(recordInspection, skiBody(set.pair.id))
    expect(await waiting()).toBeUndefined()
  })

  it('shows one item with its track, where its units stand, its rental and the last list', async () => {
    const { pair, rental } = await bothSkisBack()
    const path = `/api/returns/items/ski_pair/${pair.id}`
    const { body } = await technician.get<AnswerOf<typeof getClearing>>(path)
    expect(body).toMatchObject({
      code: pair.code,
      state: 'unchecked',
      rentalNumber: rental.number,
      missing: [],
      track: pair.track,
      presets: [
        { side: 'left', toe: 5, heel: 5 },
        { side: 'right', toe: 5, heel: 5 },
      ],
      lastInspection: null,
    })
    await technician.send(recordInspection, skiBody(pair.id, { note: 'Edges dressed' }))
    const after = (await technician.get<AnswerOf<typeof getClearing>>(path)).body
    expect(after.lastInspection).toMatchObject({
      by: shop.people.technician.name,
      verdict: 'rack',
      note: 'Edges dressed',
    })
  })
})
