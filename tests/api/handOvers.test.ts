import { createHash } from 'node:crypto'
import pg from 'pg'
import { and, eq, isNull } from 'drizzle-orm'
import { beforeAll, describe, expect, it } from 'vitest'
import { changeBoots, getBoots } from '#shared/api/boots'
import { correctRecord } from '#shared/api/callBacks'
import type { AnswerOf, BodyOf } from '#shared/api/define'
import { claimFitting } from '#shared/api/fittings'
import { getHandOver, getReadySets, recordHandOver } from '#shared/api/handOvers'
import { getBindingModel, saveBindingModel } from '#shared/api/models'
import { changeContact, changeInputs, readOwnBoots, requestRow, type RentalDetail } from '#shared/api/rentals'
import { reviewText, writeText } from '#shared/api/shop'
import { readPreset } from '#shared/api/skiPairs'
import {
  boots,
  fittings,
  handOvers,
  rentalItems,
  rentals,
  shopTexts,
  signatures,
  skiPairs,
  skis,
} from '../../server/db/schema/schema'
import { textSha256 } from '../../server/services/texts'
import {
  handOver,
  handOverBody,
  labelsOf,
  newTicket,
  signaturePng,
  signedTicket,
  type TestTicket,
} from '../support/bench'
import { testShop, type TestShop } from '../support/shop'

let shop: TestShop
beforeAll(async () => {
  shop = await testShop()
})

type Signed = Awaited<ReturnType<typeof signedTicket>>

const fittingRow = async (id: string) =>
  (await shop.db.select().from(fittings).where(eq(fittings.id, id)))[0]!
const stateOf = async (table: typeof skiPairs | typeof boots, id: string) =>
  (await shop.db.select({ state: table.state }).from(table).where(eq(table.id, id)))[0]!.state
const out = (rentalId: string) =>
  shop.db
    .select()
    .from(rentalItems)
    .where(and(eq(rentalItems.rentalId, rentalId), isNull(rentalItems.backAt)))
const rentalDetail = async (id: string) =>
  (await shop.as('counter').get<RentalDetail>(`/api/rentals/${id}`)).body

async function owner(text: string, values: unknown[]) {
  const client = new pg.Client({ connectionString: shop.app.database.ownerUrl })
  await client.connect()
  try {
    await client.query(text, values)
  } finally {
    await client.end()
  }
}

describe('handing a set over', () => {
  it('both skis and both boots leave with a renter who read the numbers and signed', async () => {
    const ticket = await signedTicket(shop)
    const { status, ids } = await handOver(shop, ticket)
    expect(status).toBe(201)
    expect((await fittingRow(ticket.fittingId)).state).toBe('handed_over')
    expect(await stateOf(skiPairs, ticket.pair.id)).toBe('out')
    expect(await stateOf(boots, ticket.boots!.id)).toBe('out')
    const [rental] = await shop.db.select().from(rentals).where(eq(rentals.id, ticket.rental.id))
    expect(rental!.state).toBe('out')
    expect((await out(ticket.rental.id)).map(({ itemKind, side }) => `${itemKind} ${side}`).sort()).toEqual([
      'boots left',
      'boots right',
      'ski_pair left',
      'ski_pair right',
    ])
    const [row] = await shop.db.select().from(handOvers).where(eq(handOvers.id, ids.handOverId))
    const [text] = await shop.db.select().from(shopTexts).where(eq(shopTexts.id, row!.textId))
    const picture = Buffer.from(signaturePng.split(',')[1]!, 'base64')
    expect(row).toMatchObject({
      recordId: ticket.recordId,
      signedAs: 'renter',
      signatureSha256: createHash('sha256').update(picture).digest('hex'),
      textVersion: text!.version,
      textSha256: createHash('sha256').update(text!.body).digest('hex'),
      personId: shop.people.counter.id,
    })
    const [signature] = await shop.db
      .select()
      .from(signatures)
      .where(eq(signatures.handOverId, ids.handOverId))
    expect(signature!.picture.equals(picture)).toBe(true)
    expect(signature!.signedName).toBe('Jara Heath')
  })

  it('labels typed by hand, without their check character, are taken as well', async () => {
    const ticket = await signedTicket(shop)
    const typed = labelsOf(ticket).map((label) => label.slice(0, -1).toLowerCase())
    expect((await handOver(shop, ticket, { labels: typed })).status).toBe(201)
  })

  it('twice by the same command is one hand-over; another one is refused', async () => {
    const ticket = await signedTicket(shop)
    const body = await handOverBody(shop, ticket)
    const envelope = { id: '0193d1a2-0000-4000-8000-000000000003' }
    const me = shop.as('counter')
    const first = await me.send(recordHandOver, body, { envelope })
    const again = await me.send(recordHandOver, body, { envelope })
    expect([again.status, again.ids]).toEqual([201, first.ids])
    expect(await shop.db.$count(handOvers, eq(handOvers.fittingId, ticket.fittingId))).toBe(1)
    expect((await handOver(shop, ticket)).code).toBe('handOvers.done')
  })

  it('two counters at once: one hands over', async () => {
    const ticket = await signedTicket(shop)
    const body = await handOverBody(shop, ticket)
    const both = await Promise.all([
      shop.as('counter').send(recordHandOver, body),
      shop.as('second_counter').send(recordHandOver, body),
    ])
    expect(both.map(({ status }) => status).sort()).toEqual([201, 409])
  })

  it.each(['counter', 'technician', 'head_technician', 'manager'] as const)('a %s may', async (who) => {
    expect((await handOver(shop, await signedTicket(shop), {}, who)).status).toBe(201)
  })

  it('a stranger and another shop may not', async () => {
    const ticket = await signedTicket(shop)
    const body = await handOverBody(shop, ticket)
    expect((await shop.stranger().send(recordHandOver, body)).status).toBe(401)
    const theirs = (await shop.another()).as('counter')
    expect((await theirs.send(recordHandOver, body)).params).toEqual({ state: 'unknown' })
    expect((await theirs.get(getHandOver.path.replace(':id', ticket.fittingId))).status).toBe(404)
  })

  it('a ticket that nobody signed is not handed over', async () => {
    const ticket = await newTicket(shop)
    expect((await handOver(shop, ticket)).code).toBe('fittings.unread')
    expect(await stateOf(skiPairs, ticket.pair.id)).toBe('claimed')
  })

  it('sets that are ready are listed by called name until they leave', async () => {
    const ticket = await signedTicket(shop, { firstName: 'Abeni', lastName: 'Quist' })
    const ready = async () =>
      (await shop.as('counter').get<AnswerOf<typeof getReadySets>>(getReadySets.path)).body.sets.find(
        (set) => set.fittingId === ticket.fittingId,
      )
    expect(await ready()).toMatchObject({
      name: 'Abeni Q.',
      pairCode: ticket.pair.code,
      recordId: ticket.recordId,
    })
    await handOver(shop, ticket)
    expect(await ready()).toBeUndefined()
  })
})

describe('what is scanned at hand-over', () => {
  it('a mixed pair is named: what was expected and what was scanned', async () => {
    const [ticket, other] = [await signedTicket(shop), await signedTicket(shop)]
    const [left, , ...shoes] = labelsOf(ticket)
    const refused = await handOver(shop, ticket, { labels: [left!, other.pair.skis.right.label, ...shoes] })
    expect(refused).toMatchObject({
      status: 409,
      code: 'handOvers.wrong_item',
      params: { expected: [`${ticket.pair.code}R`], scanned: [`${other.pair.code}R`] },
    })
    expect(await stateOf(skiPairs, ticket.pair.id)).toBe('prepared')
  })

  it('other boots, one ski twice, a boot too few and an unknown label are refused', async () => {
    const [ticket, other] = [await signedTicket(shop), await signedTicket(shop)]
    const [left, right, bootL, bootR] = labelsOf(ticket) as [string, string, string, string]
    const send = async (labels: string[]) => {
      const { code, params } = await handOver(shop, ticket, { labels })
      return { code, expected: params.expected, scanned: params.scanned }
    }
    const { code } = ticket.boots!
    expect(await send([left, right, ...labelsOf(other).slice(2)])).toEqual({
      code: 'handOvers.wrong_item',
      expected: [`${code}L`, `${code}R`],
      scanned: [`${other.boots!.code}L`, `${other.boots!.code}R`],
    })
    expect(await send([left, left, bootL, bootR])).toMatchObject({
      expected: [`${ticket.pair.code}R`],
      scanned: [],
    })
    expect(await send([left, right, bootL])).toMatchObject({ expected: [`${code}R`], scanned: [] })
    expect(await send([left, right, bootL, 'X1'])).toMatchObject({ scanned: ['X1'] })
    expect((await fittingRow(ticket.fittingId)).state).toBe('prepared')
  })

  it("of the renter's own boots the sole length is read and typed, and must be the one that was fitted", async () => {
    const ticket = await signedTicket(shop, { own: true })
    expect((await handOver(shop, ticket, { soleLengthReadMm: undefined })).code).toBe(
      'handOvers.sole_differs',
    )
    expect(await handOver(shop, ticket, { soleLengthReadMm: 306 })).toMatchObject({
      code: 'handOvers.sole_differs',
      params: { read: 306, expected: 305 },
    })
    expect((await handOver(shop, ticket)).status).toBe(201)
    expect((await out(ticket.rental.id)).map(({ itemKind }) => itemKind).sort()).toEqual([
      'own_boots',
      'ski_pair',
      'ski_pair',
    ])
    const [row] = await shop.db.select().from(handOvers).where(eq(handOvers.fittingId, ticket.fittingId))
    expect(row!.soleLengthReadMm).toBe(305)
  })
})

describe('who signs, and what', () => {
  it('for a minor a guardian signs', async () => {
    const ticket = await signedTicket(shop, { age: 15 })
    const { body } = await shop
      .as('counter')
      .get<AnswerOf<typeof getHandOver>>(getHandOver.path.replace(':id', ticket.fittingId))
    expect(body.guardianSigns).toBe(true)
    expect((await handOver(shop, ticket)).code).toBe('handOvers.guardian')
    expect((await handOver(shop, ticket, { signedAs: 'guardian', signedName: 'Ada Heath' })).status).toBe(201)
    const [row] = await shop.db.select().from(handOvers).where(eq(handOvers.fittingId, ticket.fittingId))
    expect(row!.signedAs).toBe('guardian')
  })

  it("the age of majority is the shop's, by the birth date where there is one", async () => {
    const birthDate = `${new Date().getFullYear() - 17}-01-01`
    const ticket = await signedTicket(shop, { birthDate, age: 34 })
    expect((await handOver(shop, ticket)).code).toBe('handOvers.guardian')
  })

  it('a text that was replaced since it was shown is read again', async () => {
    const ticket = await signedTicket(shop)
    const body = await handOverBody(shop, ticket)
    const wording = { kind: 'acknowledgement' as const, locale: 'en' as const }
    const words = 'I have read the numbers on my two skis.'
    await shop.as('manager').send(writeText, { ...wording, body: words })
    await shop.as('manager').send(reviewText, { ...wording, sha256: textSha256(words) })
    expect((await shop.as('counter').send(recordHandOver, body)).code).toBe('handOvers.text')
    expect((await handOver(shop, ticket)).status).toBe(201)
  })

  it('the text comes in the language asked for, marked while no manager signed it', async () => {
    await shop.db
      .update(shopTexts)
      .set({ reviewedBy: null, reviewedAt: null })
      .where(and(eq(shopTexts.shopId, shop.id), eq(shopTexts.locale, 'de')))
    const ticket = await signedTicket(shop)
    const { body } = await shop
      .as('counter')
      .get<AnswerOf<typeof getHandOver>>(getHandOver.path.replace(':id', ticket.fittingId), { locale: 'de' })
    expect(body.text).toMatchObject({ locale: 'de', reviewed: false })
    expect(body.text!.body).toContain('Ich habe die Werte gelesen')
  })
})

/** What the desk sends when nothing of the renter's data is different. */
const unchanged = ({ rental }: TestTicket): BodyOf<typeof changeInputs> => ({
  rentalId: rental.id,
  seenInputsId: rental.inputsId,
  birthDate: null,
  age: 34,
  mass: { unit: 'kg', value: 78 },
  massSource: 'declared',
  height: { unit: 'cm', value: 178 },
  heightSource: 'declared',
  skierType: 'II',
  skierTypeByRenter: true,
})
const change = (differs: Partial<BodyOf<typeof changeInputs>>) => (ticket: TestTicket) =>
  shop.as('counter').send(changeInputs, { ...unchanged(ticket), ...differs })

async function changeBootsOf(ticket: Signed, differs: Partial<BodyOf<typeof changeBoots>>) {
  const { id } = ticket.boots!
  const { body } = await shop.as('manager').get<AnswerOf<typeof getBoots>>(getBoots.path.replace(':id', id))
  const { model, mondo, soleLengthMm, soleType, season, version, homeSiteId, rackPlace } = body
  const now = {
    id,
    model,
    mondo,
    soleLengthMm,
    soleType,
    season,
    version,
    homeSiteId,
    rackPlace: rackPlace ?? '',
  }
  return shop.as('head_technician').send(changeBoots, { ...now, ...differs })
}

async function changeModelOf({ pair }: Signed) {
  const path = getBindingModel.path.replace(':id', pair.bindingModelId)
  const { body } = await shop.as('head_technician').get<AnswerOf<typeof getBindingModel>>(path)
  const { id, version, name, track, accepts, refuses, brakeMm, manualDocument, manualEdition, manualPage } =
    body
  return shop.as('head_technician').send(saveBindingModel, {
    ...{ id, version, name, track, accepts, refuses, brakeMm, manualDocument, manualEdition, manualPage },
    windowNote: 'The pointer stands flush with the housing.',
  } as BodyOf<typeof saveBindingModel>)
}

const readPresetOf = ({ pair }: Signed) =>
  shop
    .as('second_technician')
    .send(readPreset, { skiId: pair.skis.left.id, version: 2, toe: 4, heel: 4, turns: null })

async function refit(ticket: Signed, differs: { pair?: boolean; boots?: boolean }) {
  const skiPairId = differs.pair ? (await shop.rackedPair()).id : ticket.pair.id
  const bootsId = differs.boots ? (await shop.rackedBoots()).id : ticket.boots!.id
  const body = { rentalId: ticket.rental.id, skiPairId, bootsId, replacesFittingId: ticket.fittingId }
  return shop.as('counter').send(claimFitting, body)
}

describe('when something changed between the bench and the hand-over', () => {
  it.each<[string, (ticket: Signed) => Promise<{ status: number }>, string]>([
    ['mass', change({ mass: { unit: 'kg', value: 79 } }), 'renter_data_changed'],
    ['height', change({ height: { unit: 'cm', value: 179 } }), 'renter_data_changed'],
    ['age', change({ age: 51 }), 'renter_data_changed'],
    ['skier type', change({ skierType: 'III' }), 'renter_data_changed'],
    [
      'request',
      ({ rental }) =>
        shop.as('counter').send(requestRow, {
          rentalId: rental.id,
          seenInputsId: rental.inputsId,
          request: -1,
          signedName: 'Jara Heath',
          signature: signaturePng,
        }),
      'renter_data_changed',
    ],
    ['boots', (ticket) => refit(ticket, { boots: true }), 'refitted'],
    ['sole length', (ticket) => changeBootsOf(ticket, { soleLengthMm: 306 }), 'sole_changed'],
    ['sole type', (ticket) => changeBootsOf(ticket, { soleType: 'ISO 23223' }), 'sole_changed'],
    ['ski pair', (ticket) => refit(ticket, { pair: true }), 'refitted'],
    ['preset, by somebody else', readPresetOf, 'preset_changed'],
    [
      'record, by its correction',
      ({ recordId }) =>
        shop
          .as('head_technician')
          .send(correctRecord, { recordId, what: 'The heel was read wrong', parts: {} }),
      'record_error',
    ],
    ['binding model', changeModelOf, 'binding_model_changed'],
  ])('%s: the fitting is void and nothing leaves', async (what, changed, reason) => {
    // A model of its own would be changed for every other ticket of this track.
    const ticket = await signedTicket(shop, what === 'binding model' ? { track: 'ladder-12-s' } : {})
    expect((await changed(ticket)).status).toBe(201)
    expect(await fittingRow(ticket.fittingId)).toMatchObject({ state: 'void', endReason: reason })
    expect(await handOver(shop, ticket)).toMatchObject({ code: 'fittings.void', params: { reason } })
    expect(await shop.db.$count(handOvers, eq(handOvers.fittingId, ticket.fittingId))).toBe(0)
  })

  it('own boots that were read anew with another sole: void', async () => {
    const ticket = await signedTicket(shop, { own: true })
    await shop.as('head_technician').send(readOwnBoots, {
      rentalId: ticket.rental.id,
      description: 'own pair (invented)',
      soleLengthMm: 307,
      soleType: 'ISO 5355 A',
      wear: 'sound',
    })
    expect(await handOver(shop, ticket)).toMatchObject({
      code: 'fittings.void',
      params: { reason: 'sole_changed' },
    })
  })

  it.each([
    [
      "a unit's correction",
      'update skis set toe_correction = -0.5 where id = $1',
      'correction',
      'correction_changed',
    ],
    [
      'a preset',
      'update skis set preset_heel = 3, preset_version = preset_version + 1 where id = $1',
      'preset',
      'preset_changed',
    ],
  ])(
    "%s behind the program's back: refused with what changed, then void, items back in their places",
    async (_what, text, changed, reason) => {
      const ticket = await signedTicket(shop)
      await owner(text, [ticket.pair.skis.right.id])
      const body = await handOverBody(shop, ticket)
      const refused = await shop.as('counter').send(recordHandOver, body)
      expect(refused).toMatchObject({
        status: 409,
        code: 'handOvers.changed',
        params: { changed: [changed] },
      })
      expect(await fittingRow(ticket.fittingId)).toMatchObject({ state: 'void', endReason: reason })
      expect(await stateOf(skiPairs, ticket.pair.id)).toBe('racked')
      expect(await stateOf(boots, ticket.boots!.id)).toBe('racked')
      expect((await handOver(shop, ticket)).code).toBe('fittings.void')
      expect(await out(ticket.rental.id)).toEqual([])
    },
  )

  it("a preset that was read again and is the same still counts as somebody else's hand", async () => {
    const ticket = await signedTicket(shop)
    const [ski] = await shop.db.select().from(skis).where(eq(skis.id, ticket.pair.skis.left.id))
    await owner('update skis set preset_version = preset_version + 1 where id = $1', [ski!.id])
    expect((await handOver(shop, ticket)).params.changed).toEqual(['preset'])
  })

  it('another e-mail changes nothing: it is handed over', async () => {
    const ticket = await signedTicket(shop)
    const { renter } = await rentalDetail(ticket.rental.id)
    const { status } = await shop.as('counter').send(changeContact, {
      rentalId: ticket.rental.id,
      firstName: renter.firstName,
      lastName: renter.lastName,
      email: 'another@renter.test',
      phone: renter.phone ?? '',
      locale: renter.locale as 'en',
      guardian: null,
      version: renter.version,
    })
    expect(status).toBe(201)
    expect((await fittingRow(ticket.fittingId)).state).toBe('prepared')
    expect((await handOver(shop, ticket)).status).toBe(201)
  })
})
