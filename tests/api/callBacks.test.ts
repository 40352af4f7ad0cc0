import { eq } from 'drizzle-orm'
import { beforeAll, describe, expect, it } from 'vitest'
import type { AnswerOf } from '#shared/api/define'
import { changeBoots } from '#shared/api/boots'
import { correctRecord, listCallBacks, stepCallBack, type CallBackRow } from '#shared/api/callBacks'
import type { getRecord } from '#shared/api/records'
import { scanReturn } from '#shared/api/returns'
import {
  boots,
  callBacks,
  fittingRecordParts,
  fittingRecords,
  fittings,
  skiPairs,
  skis,
} from '../../server/db/schema/schema'
import { preparedSet, setOut, type TestSet } from '../support/handOvers'
import { testShop, type Person, type TestShop } from '../support/shop'

let shop: TestShop
let head: Person
let counter: Person

beforeAll(async () => {
  shop = await testShop()
  head = shop.as('head_technician')
  counter = shop.as('counter')
})

const what = 'The heel value of the left ski was read at the other pair'
const correct = (recordId: string, parts = {}) => head.send(correctRecord, { recordId, what, parts })
const list = async (state: 'open' | 'closed' = 'open') =>
  (await counter.get<AnswerOf<typeof listCallBacks>>('/api/call-backs', { state })).body.rows
const entryOf = async (set: TestSet): Promise<CallBackRow | undefined> =>
  (await list()).find(({ fittingId }) => fittingId === set.fittingId)
const partsOf = (recordId: string) =>
  shop.db.select().from(fittingRecordParts).where(eq(fittingRecordParts.recordId, recordId))
const fittingOf = async (id: string) => (await shop.db.select().from(fittings).where(eq(fittings.id, id)))[0]!

async function openEntry(): Promise<{ set: TestSet; callBackId: string }> {
  const set = await setOut(shop)
  const { ids } = await correct(set.recordId)
  return { set, callBackId: ids.callBackId! }
}

describe('an error found on a record', () => {
  it('of a set that is out makes a correcting record and an entry that says who has what', async () => {
    const set = await setOut(shop, { firstName: 'Yrsa', lastName: 'Lindroft' })
    const answer = await correct(set.recordId)
    expect(answer.status).toBe(201)
    const [correction] = await shop.db
      .select()
      .from(fittingRecords)
      .where(eq(fittingRecords.id, answer.ids.recordId))
    expect(correction).toMatchObject({
      correctsId: set.recordId,
      correctionReason: what,
      signedBy: shop.people.head_technician.id,
      skiPairCode: set.pair.code,
    })
    expect(await entryOf(set)).toMatchObject({
      id: answer.ids.callBackId,
      cause: 'record_error',
      detail: what,
      recordId: answer.ids.recordId,
      openedBy: shop.people.head_technician.name,
      renter: { firstName: 'Yrsa', lastName: 'Lindroft', phone: '+43 000 417' },
      out: [
        { code: set.pair.code, side: 'left' },
        { code: set.pair.code, side: 'right' },
        { code: set.boots!.code, side: 'left' },
        { code: set.boots!.code, side: 'right' },
      ],
    })
  })

  it('leaves the old record and its parts as they were, and says in the new one what was really read', async () => {
    const set = await setOut(shop)
    const before = await partsOf(set.recordId)
    const left = before.find(({ side }) => side === 'left')!.reading
    const { soleClearance: _s, forwardPressure: _f, brake: _b, function: _u, ...read } = left
    const { ids } = await correct(set.recordId, { left: { ...read, heel: read.heel + 1 } })
    expect(await partsOf(set.recordId)).toEqual(before)
    const after = await partsOf(ids.recordId)
    expect(after.find(({ side }) => side === 'left')).toMatchObject({
      reading: { ...left, heel: left.heel + 1 },
      verdict: 'corrected',
      readBy: shop.people.head_technician.id,
    })
    expect(after.find(({ side }) => side === 'right')).toMatchObject({
      reading: left,
      verdict: 'matches',
      readBy: shop.people.technician.id,
    })
    const [ski] = await shop.db.select().from(skis).where(eq(skis.id, set.pair.skis.left.id))
    expect(ski).toMatchObject({ presetHeel: left.heel + 1, presetVersion: before[0]!.presetVersion + 1 })
  })

  it('cannot be put right with a mark that the rail does not have', async () => {
    const set = await setOut(shop)
    const reading = { toe: 5, heel: 99, turns: null, toeValue: 6, heelValue: 6 }
    expect(await correct(set.recordId, { right: reading })).toMatchObject({
      status: 422,
      code: 'records.not_on_rail',
    })
    expect(await entryOf(set)).toBeUndefined()
  })

  it('voids a fitting that waits for its hand-over, and calls nobody', async () => {
    const set = await preparedSet(shop)
    const answer = await correct(set.recordId)
    expect(answer.ids.callBackId).toBeNull()
    expect(await fittingOf(set.fittingId)).toMatchObject({ state: 'void', endReason: 'record_error' })
    const [pair] = await shop.db.select().from(skiPairs).where(eq(skiPairs.id, set.pair.id))
    expect(pair!.state).toBe('racked')
    expect(await entryOf(set)).toBeUndefined()
  })

  it('of a set that is back makes the record and calls nobody', async () => {
    const set = await setOut(shop)
    for (const text of [
      ...Object.values(set.pair.skis).map(({ label }) => label),
      ...Object.values(set.boots!.labels),
    ])
      await counter.send(scanReturn, { text })
    expect((await correct(set.recordId)).ids.callBackId).toBeNull()
    expect(await entryOf(set)).toBeUndefined()
  })

  it('is corrected at the newest record only; a second error makes no second entry', async () => {
    const set = await setOut(shop)
    const first = await correct(set.recordId)
    expect(await correct(set.recordId)).toMatchObject({ status: 409, code: 'records.corrected' })
    const second = await correct(first.ids.recordId)
    expect(second.ids.callBackId).toBe(first.ids.callBackId)
    // whichever of the three somebody opens, it says that the renter signed
    for (const id of [set.recordId, first.ids.recordId, second.ids.recordId]) {
      const { body } = await head.get<AnswerOf<typeof getRecord>>(`/api/records/${id}`)
      expect(body.handOver).toMatchObject({ signedAs: 'renter' })
    }
  })

  it('is corrected once when two people find it at the same moment', async () => {
    const set = await setOut(shop)
    const both = await Promise.all([
      correct(set.recordId),
      shop.as('manager').send(correctRecord, { recordId: set.recordId, what, parts: {} }),
    ])
    expect(both.map(({ status }) => status).sort()).toEqual([201, 409])
  })

  it('is recorded by a head technician or a manager, nobody else, and only in their own shop', async () => {
    const set = await setOut(shop)
    const body = { recordId: set.recordId, what, parts: {} }
    for (const who of ['counter', 'technician'] as const)
      expect(await shop.as(who).send(correctRecord, body)).toMatchObject({
        status: 403,
        code: 'session.role',
      })
    expect((await shop.stranger().send(correctRecord, body)).status).toBe(401)
    const other = await shop.another()
    expect(await other.as('manager').send(correctRecord, body)).toMatchObject({
      status: 404,
      code: 'records.unknown',
    })
    expect((await shop.as('manager').send(correctRecord, body)).status).toBe(201)
  })
})

describe('a void found after hand-over', () => {
  /** Somebody reads another sole length on the shell of these boots than the shop had. */
  async function readOtherSole(set: TestSet) {
    const { id } = set.boots!
    const [row] = await shop.db.select().from(boots).where(eq(boots.id, id))
    const { model, mondo, soleLengthMm, season, homeSiteId, version } = row!
    const values = { model, mondo, season, homeSiteId, rackPlace: '', soleType: 'ISO 5355 A' } as const
    return shop.as('manager').send(changeBoots, { id, version, ...values, soleLengthMm: soleLengthMm + 2 })
  }

  it('makes an entry by itself, once, and none for a set that is back', async () => {
    const out = await setOut(shop)
    const back = await setOut(shop)
    for (const text of [
      ...Object.values(back.pair.skis).map(({ label }) => label),
      ...Object.values(back.boots!.labels),
    ])
      await counter.send(scanReturn, { text })
    const answer = await readOtherSole(out)
    expect((answer.body.event as { callBacks: number }).callBacks).toBe((await list()).length)
    await readOtherSole(out)
    await readOtherSole(back)
    const rows = await shop.db.select().from(callBacks).where(eq(callBacks.cause, 'sole_changed'))
    expect(rows).toMatchObject([{ fittingId: out.fittingId, rentalId: out.rental.id }])
    expect((await fittingOf(out.fittingId)).state).toBe('handed_over')
  })
})

describe('working a call-back', () => {
  const step = (callBackId: string, which: 'tried' | 'reached' | 'set_checked' | 'closed', note = '') =>
    counter.send(stepCallBack, { callBackId, step: which, note })

  it('goes from tried over reached and checked to closed, each with who and when', async () => {
    const { set, callBackId } = await openEntry()
    await step(callBackId, 'tried', 'No answer')
    await step(callBackId, 'reached', 'Comes at two')
    await step(callBackId, 'set_checked')
    expect((await entryOf(set))!.steps).toMatchObject([
      { step: 'tried', note: 'No answer', by: shop.people.counter.name },
      { step: 'reached', note: 'Comes at two' },
      { step: 'set_checked', note: '' },
    ])
    const closed = await step(callBackId, 'closed')
    expect(closed.status).toBe(201)
    expect(await entryOf(set)).toBeUndefined()
    expect((await list('closed'))[0]).toMatchObject({ id: callBackId, steps: { length: 4 } })
    const [row] = await shop.db.select().from(callBacks).where(eq(callBacks.id, callBackId))
    expect(row).toMatchObject({ lastStep: 'closed', stepCount: 4 })
  })

  it('is not closed unchecked without a reason', async () => {
    const { callBackId } = await openEntry()
    await step(callBackId, 'reached')
    expect(await step(callBackId, 'closed')).toMatchObject({ status: 422, code: 'callBacks.reason' })
    expect((await step(callBackId, 'closed', 'The set came back unused')).status).toBe(201)
  })

  it('ends when it is closed: nothing is added after that', async () => {
    const { callBackId } = await openEntry()
    await step(callBackId, 'closed', 'Came back')
    expect(await step(callBackId, 'tried')).toMatchObject({ status: 409, code: 'callBacks.closed' })
  })

  it('is told to the boards as a number, without a name', async () => {
    const { callBackId } = await openEntry()
    const open = (await list()).length
    const answer = await step(callBackId, 'closed', 'Came back')
    expect(answer.body.event).toMatchObject({ callBacks: open - 1 })
    expect(JSON.stringify(answer.body)).not.toContain('Heath')
  })

  it('is anybody’s who works in the shop, not a stranger’s and not another shop’s', async () => {
    const { callBackId } = await openEntry()
    const body = { callBackId, step: 'tried', note: '' } as const
    for (const who of ['counter', 'technician', 'head_technician', 'manager'] as const)
      expect((await shop.as(who).send(stepCallBack, body)).status).toBe(201)
    expect((await shop.stranger().send(stepCallBack, body)).status).toBe(401)
    expect((await shop.stranger().get('/api/call-backs')).status).toBe(401)
    const other = await shop.another()
    expect(await other.as('manager').send(stepCallBack, body)).toMatchObject({
      status: 404,
      code: 'callBacks.unknown',
    })
    const theirs = await other.as('manager').get<AnswerOf<typeof listCallBacks>>('/api/call-backs')
    expect(theirs.body.rows).toEqual([])
  })
})
