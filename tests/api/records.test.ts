import { createHash } from 'node:crypto'
import pg from 'pg'
import { and, eq } from 'drizzle-orm'
import { beforeAll, describe, expect, it } from 'vitest'
import type { AnswerOf } from '#shared/api/define'
import { getRecord, signRecord } from '#shared/api/records'
import { decideReading } from '#shared/api/tickets'
import { partReading } from '#shared/schemas/records'
import {
  boots,
  commandLog,
  fittingInputs,
  fittingRecordParts,
  fittingRecords,
  fittings,
  skiPairs,
} from '../../server/db/schema/schema'
import { benchOf, handOver, newTicket, read, readingOf, sign, signedTicket } from '../support/bench'
import { staff } from '../support/people'
import { testShop, type TestShop } from '../support/shop'

let shop: TestShop
beforeAll(async () => {
  shop = await testShop()
})

const fittingRow = async (id: string) =>
  (await shop.db.select().from(fittings).where(eq(fittings.id, id)))[0]!
const recordRow = async (id: string) =>
  (await shop.db.select().from(fittingRecords).where(eq(fittingRecords.id, id)))[0]!
const partRows = (recordId: string) =>
  shop.db
    .select()
    .from(fittingRecordParts)
    .where(eq(fittingRecordParts.recordId, recordId))
    .orderBy(fittingRecordParts.side)
const recordOf = async (id: string, who: Parameters<TestShop['as']>[0] = 'counter') =>
  (await shop.as(who).get<AnswerOf<typeof getRecord>>(getRecord.path.replace(':id', id))).body

async function asOwner<Answer>(run: (client: pg.Client) => Promise<Answer>): Promise<Answer> {
  const client = new pg.Client({ connectionString: shop.app.database.ownerUrl })
  await client.connect()
  try {
    return await run(client)
  } finally {
    await client.end()
  }
}

describe('signing what was read', () => {
  it('makes one record with a part per ski, and fitting, pair and boots are prepared', async () => {
    const { fittingId, pair, boots: made, recordId } = await signedTicket(shop)
    expect(await fittingRow(fittingId)).toMatchObject({ state: 'prepared', recordId, heldBy: null })
    const [pairRow] = await shop.db.select().from(skiPairs).where(eq(skiPairs.id, pair.id))
    const [bootsRow] = await shop.db.select().from(boots).where(eq(boots.id, made!.id))
    expect([pairRow!.state, bootsRow!.state]).toEqual(['prepared', 'prepared'])
    expect(await recordRow(recordId)).toMatchObject({
      skiPairCode: pair.code,
      bootsCode: made!.code,
      bootsOwner: 'shop',
      soleLengthMm: 305,
      // 78 kg, 178 cm, type II: row L, 6.5, twist 50 and lean 194 N·m (selection table of the reference tests)
      row: 'L',
      value: 6.5,
      twistNm: 50,
      forwardLeanNm: 194,
      targetToe: 7,
      targetHeel: 6,
      signedBy: shop.people.technician.id,
    })
    const parts = await partRows(recordId)
    expect(parts.map(({ side, label, verdict }) => [side, label, verdict])).toEqual([
      ['left', pair.skis.left.label, 'matches'],
      ['right', pair.skis.right.label, 'matches'],
    ])
  })

  it('keeps no name and no body value: the renter is an id, the inputs a commitment that can be proved', async () => {
    const { recordId, rental } = await signedTicket(shop, { firstName: 'Oriane', lastName: 'Vantongeren' })
    const record = await recordRow(recordId)
    const text = JSON.stringify([record, await partRows(recordId)])
    expect(text).not.toMatch(/Oriane|Vantongeren|massKg|"mass"|"height"|skierType/)
    const [inputs] = await shop.db.select().from(fittingInputs).where(eq(fittingInputs.id, rental.inputsId))
    // Written out by hand: salt, then JSON with its keys in alphabetical order.
    const canonical =
      '{"age":34,"height":{"unit":"cm","value":178},"mass":{"unit":"kg","value":78},"request":0,"skierType":"II"}'
    const commitment = createHash('sha256').update(inputs!.salt).update(canonical).digest('hex')
    expect(record.inputsCommitment).toBe(commitment)
  })

  it('copies the latest reading of each ski, with the decision that let it stand', async () => {
    const { fittingId } = await newTicket(shop)
    await read(shop, fittingId, 'left')
    await read(shop, fittingId, 'left', { heel: 7 })
    const { reading } = await readingOf(shop, fittingId, 'right', { toe: 8 })
    const { ids } = await shop.as('head_technician').send(decideReading, {
      fittingId,
      side: 'right',
      reading: partReading.parse(reading),
      reason: 'Boot sits centred as the sheet shows',
    })
    await read(shop, fittingId, 'right', { toe: 8 })
    const { ids: signed } = await sign(shop, fittingId)
    const [left, right] = await partRows(signed.recordId)
    expect(left).toMatchObject({ verdict: 'window_decides', reading: { heel: 7 } })
    expect(right).toMatchObject({
      verdict: 'head_technician',
      decisionId: ids.decisionId,
      reading: { toe: 8 },
    })
    expect((await recordRow(signed.recordId)).decisionIds).toEqual([ids.decisionId])
  })

  it('is refused while a ski is unread', async () => {
    const { fittingId } = await newTicket(shop)
    await read(shop, fittingId, 'right')
    expect(await sign(shop, fittingId)).toMatchObject({
      status: 409,
      code: 'fittings.unread',
      params: { sides: ['left'] },
    })
  })

  it('is refused without the right PIN, and away from an enrolled device', async () => {
    const { fittingId } = await newTicket(shop)
    await read(shop, fittingId, 'left')
    await read(shop, fittingId, 'right')
    expect((await sign(shop, fittingId, { pin: staff.head_technician.pin })).code).toBe('pin.wrong')
    const elsewhere = await shop
      .as('technician')
      .send(signRecord, { fittingId }, { pin: staff.technician.pin })
    expect(elsewhere.code).toBe('pin.not_enrolled')
    expect((await fittingRow(fittingId)).state).toBe('claimed')
    expect((await sign(shop, fittingId)).status).toBe(201)
  })

  it.each(['counter', 'manager'] as const)("is not a %s's", async (who) => {
    const { fittingId } = await newTicket(shop)
    expect((await sign(shop, fittingId, { who })).code).toBe('session.role')
  })

  it('twice by the same command is one record; signed once more it is no ticket any longer', async () => {
    const { fittingId } = await newTicket(shop)
    await read(shop, fittingId, 'left')
    await read(shop, fittingId, 'right')
    const me = shop.as('technician', await benchOf(shop))
    const envelope = { id: '0193d1a2-0000-4000-8000-000000000002' }
    const { pin } = staff.technician
    const first = await me.send(signRecord, { fittingId }, { pin, envelope })
    const again = await me.send(signRecord, { fittingId }, { pin, envelope })
    expect([again.status, again.ids]).toEqual([201, first.ids])
    expect(await shop.db.$count(fittingRecords, eq(fittingRecords.fittingId, fittingId))).toBe(1)
    expect((await sign(shop, fittingId)).code).toBe('fittings.not_open')
    const logged = await shop.db
      .select()
      .from(commandLog)
      .where(and(eq(commandLog.shopId, shop.id), eq(commandLog.commandId, envelope.id)))
    expect(JSON.stringify(logged)).not.toContain(pin)
  })

  it('when a correction changed after it was computed, refuses, and the fitting is void', async () => {
    const { fittingId, pair } = await newTicket(shop)
    await read(shop, fittingId, 'left')
    await read(shop, fittingId, 'right')
    await asOwner((client) =>
      client.query('update skis set heel_correction = 0.5 where id = $1', [pair.skis.left.id]),
    )
    expect(await sign(shop, fittingId)).toMatchObject({
      code: 'handOvers.changed',
      params: { changed: ['correction'] },
    })
    expect(await fittingRow(fittingId)).toMatchObject({ state: 'void', endReason: 'correction_changed' })
  })
})

describe('a record', () => {
  it('is never changed or deleted, not even by the owner of the tables', async () => {
    const { recordId } = await signedTicket(shop)
    const tries = [
      ['update fitting_records set value = 9 where id = $1', recordId],
      ['delete from fitting_records where id = $1', recordId],
      ['update fitting_record_parts set verdict = $$x$$ where record_id = $1', recordId],
      ['delete from fitting_record_parts where record_id = $1', recordId],
    ] as const
    for (const [text, id] of tries) {
      await expect(asOwner((client) => client.query(text, [id]))).rejects.toMatchObject({ code: 'NW009' })
      // The server's own role is not even let at it.
      await expect(shop.app.database.pool.query(text, [id])).rejects.toMatchObject({ code: '42501' })
    }
    expect((await recordRow(recordId)).value).toBe(6.5)
  })

  it('is read for print with names, what was read and its signatures', async () => {
    const ticket = await signedTicket(shop, { firstName: 'Yusto', lastName: 'Marrow' })
    await handOver(shop, ticket)
    const record = await recordOf(ticket.recordId)
    expect(record).toMatchObject({
      renter: { firstName: 'Yusto', lastName: 'Marrow' },
      signedBy: staff.technician.name,
      signedDevice: 'bench 1',
      inputs: { mass: { unit: 'kg', value: 78 }, massSource: 'declared' },
      approved: false,
      approvedBy: null,
      sheetUnchanged: true,
      handOver: { signedName: 'Jara Heath', signedAs: 'renter' },
      correctsId: null,
      correctedById: null,
    })
    expect(record.handOver!.signaturePng).toMatch(/^data:image\/png;base64,/)
    expect(record.parts.map(({ side, reading }) => [side, reading.toe, reading.heel])).toEqual([
      ['left', 7, 6],
      ['right', 7, 6],
    ])
  })

  it('prints without name and body values once they were erased', async () => {
    const ticket = await signedTicket(shop)
    await handOver(shop, ticket)
    await shop.app.database.pool.query('select erase_renter($1, $2, $3)', [
      ticket.rental.renterId,
      'asked for it (invented)',
      shop.people.manager.id,
    ])
    const record = await recordOf(ticket.recordId)
    expect(record).toMatchObject({
      renter: null,
      inputs: null,
      handOver: { signedName: null, signaturePng: null },
    })
    expect(record.parts).toHaveLength(2)
  })

  it('of another shop is unknown', async () => {
    const { recordId } = await signedTicket(shop)
    const other = await shop.another()
    const answer = await other.as('manager').get(getRecord.path.replace(':id', recordId))
    expect([answer.status, answer.code]).toEqual([404, 'records.unknown'])
    expect((await shop.stranger().get(getRecord.path.replace(':id', recordId))).status).toBe(401)
  })

  it('says that the shop approved its numbers, and who did', async () => {
    const approving = await shop.another()
    await approving.approveTable()
    const { recordId } = await signedTicket(approving)
    const { body } = await approving
      .as('counter')
      .get<AnswerOf<typeof getRecord>>(getRecord.path.replace(':id', recordId))
    expect(body).toMatchObject({ approved: true, approvedBy: { name: staff.head_technician.name } })
  })
})
