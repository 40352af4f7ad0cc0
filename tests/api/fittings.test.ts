import { beforeAll, describe, expect, it } from 'vitest'
import { eq, sql } from 'drizzle-orm'
import {
  claimFitting,
  decideFitting,
  getFitting,
  getFittingWhy,
  giveBackFitting,
  suggestPairs,
} from '#shared/api/fittings'
import type { AnswerOf, BodyOf } from '#shared/api/define'
import { readOwnBoots, secondLook } from '#shared/api/rentals'
import { computeFitting } from '#shared/fitting/computeFitting'
import {
  boots,
  fittingDecisions,
  fittings,
  fittingInputs,
  skiPairs,
  stateChanges,
} from '../../server/db/schema/schema'
import { testShop, type TestShop } from '../support/shop'
import { staff } from '../support/people'
import { addBindingModel, addPair } from '../support/things'

let shop: TestShop
/** An enrolled desk: PINs are asked for nowhere else. */
let device: Awaited<ReturnType<TestShop['enrol']>>
beforeAll(async () => {
  shop = await testShop()
  device = await shop.enrol('counter')
})

/** A renter of 78 kg, racked boots with a sole of 305 mm, a racked pair that takes them. */
async function ready(values: Parameters<TestShop['rental']>[0] = {}) {
  const [rental, pair, made] = [await shop.rental(values), await shop.rackedPair(), await shop.rackedBoots()]
  const body: BodyOf<typeof claimFitting> = { rentalId: rental.id, skiPairId: pair.id, bootsId: made.id }
  return { rental, pair, boots: made, body }
}

const claim = (body: BodyOf<typeof claimFitting>, who: Parameters<TestShop['as']>[0] = 'counter') =>
  shop.as(who).send(claimFitting, body)
const decide = (
  body: BodyOf<typeof decideFitting>,
  who: Parameters<TestShop['as']>[0] = 'head_technician',
  pin?: string,
) => shop.as(who, pin ? device : undefined).send(decideFitting, body, { pin })
const detail = async (fittingId: string) =>
  (await shop.as('technician').get<AnswerOf<typeof getFitting>>(getFitting.path.replace(':id', fittingId)))
    .body
const stateOf = async (table: typeof skiPairs | typeof boots, id: string) =>
  (await shop.db.select({ state: table.state }).from(table).where(eq(table.id, id)))[0]?.state

describe('taking boots and a pair for a renter', () => {
  it('claims both and stores value, marks and targets, without body values', async () => {
    const { body, rental, pair, boots: made } = await ready()
    const { status, ids } = await claim(body)
    expect(status).toBe(201)
    expect(await stateOf(skiPairs, pair.id)).toBe('claimed')
    expect(await stateOf(boots, made.id)).toBe('claimed')
    const [row] = await shop.db.select().from(fittings).where(eq(fittings.id, ids.fittingId))
    // 78 kg and 178 cm are row K each, type II one row down: L; sole 305 mm: 6.5 (selection table of the reference tests)
    expect(row).toMatchObject({ state: 'claimed', value: 6.5, edition: 'eight-column', approved: false })
    expect(row?.release).toEqual({
      row: 'L',
      value: 6.5,
      sideways: false,
      twistNm: 50,
      forwardLeanNm: 194,
      rowSteps: [
        { rule: 'type', rows: 1 },
        { rule: 'age', rows: 0 },
        { rule: 'request', rows: 0 },
      ],
    })
    expect(row?.targets).toEqual({ left: { toe: 6.5, heel: 6.5 }, right: { toe: 6.5, heel: 6.5 } })
    expect(row?.rentalId).toBe(rental.id)
    const [change] = await shop.db
      .select()
      .from(stateChanges)
      .where(eq(stateChanges.itemId, pair.id))
      .orderBy(sql`item_seq desc`)
    expect(change).toMatchObject({ toState: 'claimed', subjectId: ids.fittingId })
  })

  it.each(['counter', 'technician', 'head_technician', 'manager'] as const)('is for the %s', async (who) => {
    expect((await claim((await ready()).body, who)).status).toBe(201)
  })

  it('is for nobody who is not signed in', async () => {
    const { body } = await ready()
    expect(await shop.stranger().send(claimFitting, body)).toMatchObject({ status: 401 })
  })

  it('numbers fittings upwards', async () => {
    const first = await detail((await claim((await ready()).body)).ids.fittingId)
    const second = await detail((await claim((await ready()).body)).ids.fittingId)
    expect(second.number).toBeGreaterThan(first.number)
  })

  it("knows nothing of another shop's rental, pair or boots", async () => {
    const other = await shop.another()
    const [rental, pair, made] = [await other.rental(), await other.rackedPair(), await other.rackedBoots()]
    const { body } = await ready()
    for (const foreign of [{ rentalId: rental.id }, { skiPairId: pair.id }, { bootsId: made.id }])
      expect((await claim({ ...body, ...foreign })).status).toBe(404)
    expect(await stateOf(skiPairs, body.skiPairId)).toBe('racked')
  })

  it('takes effect once however often it is sent', async () => {
    const { body } = await ready()
    const envelope = { id: crypto.randomUUID(), occurredAt: new Date().toISOString() }
    const send = () => shop.as('counter').send(claimFitting, body, { envelope })
    const [first, again] = [await send(), await send()]
    expect(again.ids).toEqual(first.ids)
    expect(again.seq).toBe(first.seq)
    expect(await shop.db.$count(fittings, eq(fittings.rentalId, body.rentalId))).toBe(1)
  })

  it('is refused to a rental whose renter sent the form and nobody took', async () => {
    const { body } = await ready({ state: 'waiting' })
    expect(await claim(body)).toMatchObject({ status: 422, params: { reasons: ['rental_not_open'] } })
  })
})

describe('changing what was taken', () => {
  it('ends the fitting that is replaced, racks its things and takes the others, in one step', async () => {
    const { body, pair, boots: kept } = await ready()
    const first = await claim(body)
    const other = await shop.rackedPair()
    const second = await claim({ ...body, skiPairId: other.id, replacesFittingId: first.ids.fittingId })
    expect(second.status).toBe(201)
    expect(await detail(first.ids.fittingId)).toMatchObject({ state: 'void', endReason: 'refitted' })
    expect(await stateOf(skiPairs, pair.id)).toBe('racked')
    expect(await stateOf(skiPairs, other.id)).toBe('claimed')
    expect(await stateOf(boots, kept.id)).toBe('claimed')
    const { event } = second.body as { event: { fittings: { id: string; state: string }[] } }
    expect(event.fittings.map(({ state }) => state).sort()).toEqual(['claimed', 'void'])
  })

  it('leaves everything as it was when the new pair is taken', async () => {
    const [mine, theirs] = [await ready(), await ready()]
    const first = await claim(mine.body)
    await claim(theirs.body, 'second_counter')
    const wanted = { ...mine.body, skiPairId: theirs.pair.id, replacesFittingId: first.ids.fittingId }
    expect(await claim(wanted)).toMatchObject({
      code: 'items.taken',
      params: { by: staff.second_counter.name },
    })
    expect(await detail(first.ids.fittingId)).toMatchObject({ state: 'claimed' })
    expect(await stateOf(skiPairs, mine.pair.id)).toBe('claimed')
  })

  it('refuses a second fitting that does not say which one it replaces', async () => {
    const { body } = await ready()
    await claim(body)
    const other = await shop.rackedPair()
    expect(await claim({ ...body, skiPairId: other.id })).toMatchObject({ code: 'fittings.open' })
  })

  it('gives boots and pair back to the rack, once', async () => {
    const { body, pair } = await ready()
    const { ids } = await claim(body)
    const back = { fittingId: ids.fittingId, reason: 'no_show' as const }
    expect((await shop.as('counter').send(giveBackFitting, back)).status).toBe(201)
    expect(await stateOf(skiPairs, pair.id)).toBe('racked')
    expect(await detail(ids.fittingId)).toMatchObject({ state: 'given_back', endReason: 'no_show' })
    expect(await shop.as('counter').send(giveBackFitting, back)).toMatchObject({ code: 'fittings.not_open' })
    const other = await shop.another()
    expect((await other.as('counter').send(giveBackFitting, back)).status).toBe(409)
  })
})

describe('what keeps a fitting from the bench', () => {
  const refused = async (body: BodyOf<typeof claimFitting>) => {
    const { code, params } = await claim(body)
    expect(await stateOf(skiPairs, body.skiPairId)).not.toBe('claimed')
    return [code, ...(params.reasons as string[])]
  }

  it('is a sole type that the binding refuses, which nobody decides away', async () => {
    const { body, pair, rental } = await ready()
    const touring = await shop.rackedBoots({ soleType: 'ISO 9523' })
    const wanted = { ...body, bootsId: touring.id }
    expect(await refused(wanted)).toEqual(['fittings.stop', 'sole_type_refused'])
    const tried = {
      rentalId: rental.id,
      skiPairId: pair.id,
      bootsId: touring.id,
      kind: 'unknown_sole' as const,
      reason: 'looks alike',
    }
    expect(await decide(tried)).toMatchObject({ status: 422, code: 'fittings.nothing_to_decide' })
  })

  it('is an unknown sole, until a head technician decides about these boots on this pair', async () => {
    const { body } = await ready()
    const unread = await shop.rackedBoots({ soleType: 'unknown' })
    const wanted = { ...body, bootsId: unread.id }
    expect(await refused(wanted)).toEqual(['fittings.needs_decision', 'sole_type_unknown'])
    const decision = { ...wanted, kind: 'unknown_sole' as const, reason: 'read under the liner: 5355 A' }
    const { ids } = await decide(decision)
    const claimed = await claim(wanted)
    expect(claimed.status).toBe(201)
    const found = await detail(claimed.ids.fittingId)
    expect(found.decisions).toMatchObject([{ id: ids.decisionId, by: staff.head_technician.name }])
    const other = await shop.rackedPair()
    const elsewhere = { ...wanted, skiPairId: other.id, replacesFittingId: claimed.ids.fittingId }
    expect(await claim(elsewhere)).toMatchObject({ params: { reasons: ['sole_type_unknown'] } })
  })

  it('is a sole outside the track', async () => {
    const { body } = await ready()
    const short = await shop.rackedBoots({ soleLengthMm: 250 })
    expect(await refused({ ...body, bootsId: short.id })).toEqual([
      'fittings.stop',
      'sole_shorter_than_track',
    ])
  })

  it('is a value outside the scale of a unit', async () => {
    const { body } = await ready()
    const junior = await shop.rackedPair('pebble-20', { preset: { toe: 5, heel: 10 } })
    expect(
      await refused({
        ...body,
        skiPairId: junior.id,
        bootsId: (await shop.rackedBoots({ soleLengthMm: 295 })).id,
      }),
    ).toContain('value_above_scale')
  })

  it('is what the table refuses; no body value is in the answer', async () => {
    const { body } = await ready({
      mass: { unit: 'kg', value: 21 },
      height: { unit: 'cm', value: 120 },
      age: 12,
      skierType: 'III',
    })
    const answer = await claim(body)
    expect(answer.params).toEqual({ reasons: ['type_not_allowed_under_22_kg'], decides: ['nobody'] })
    expect(JSON.stringify(answer.body)).not.toMatch(/21|120/)
  })

  it('is a pair that came back and nobody cleared', async () => {
    const { body, pair } = await ready()
    await shop.change({ kind: 'ski_pair', id: pair.id }, 'racked', 'unchecked')
    expect(await refused(body)).toEqual(['fittings.stop', 'item_state'])
  })

  it('is a pair that is held', async () => {
    const { body, pair } = await ready()
    await shop.hold({ kind: 'ski_pair', id: pair.id }, 'racked')
    expect(await refused(body)).toEqual(['fittings.stop', 'item_state'])
  })

  it('is a binding model whose sheet was changed after it was approved', async () => {
    const { body } = await ready()
    const bindingModelId = await addBindingModel(shop.db, shop.inShop, 'ladder-16', {
      name: 'ladder, changed',
    })
    const skiModelId = await shop.skiModel()
    const pair = await addPair(
      shop.db,
      { ...shop.inShop, skiModelId, bindingModelId, number: 9001 },
      { preset: { toe: 5, heel: 5 } },
    )
    await shop.change({ kind: 'ski_pair', id: pair.id }, 'commissioning', 'racked', { rackPlace: 'Z 1' })
    await shop.db.execute(sql`update binding_models set manual_page = '13' where id = ${bindingModelId}`)
    expect(await refused({ ...body, skiPairId: pair.id })).toEqual([
      'fittings.needs_decision',
      'binding_model_not_approved',
    ])
  })

  it('is a period of 15 days without a note of the individual test', async () => {
    const { body } = await ready({ days: 15 })
    expect(await refused(body)).toEqual(['fittings.needs_decision', 'period_needs_test'])
    const note = {
      ...body,
      bootsId: body.bootsId,
      kind: 'individual_test' as const,
      reason: 'measured on the device, both units inside',
    }
    expect((await decide(note)).status).toBe(201)
    expect((await claim(body)).status).toBe(201)
    expect((await claim((await ready({ days: 14 })).body)).status).toBe(201)
  })

  it("is the renter's own boots until somebody else of the workshop looked", async () => {
    const { body, rental } = await ready({ ownBoots: true })
    const own = { ...body, bootsId: null }
    expect(await refused(own)).toEqual(['fittings.stop', 'boots'])
    const read = {
      rentalId: rental.id,
      description: 'red',
      soleLengthMm: 305,
      soleType: 'ISO 5355 A' as const,
      wear: 'sound' as const,
    }
    const judged = await shop.as('counter').send(readOwnBoots, read)
    expect(await refused(own)).toEqual(['fittings.needs_decision', 'own_boots_unseen'])
    await shop.as('technician').send(secondLook, { ownBootsId: judged.ids.ownBootsId })
    const claimed = await claim(own)
    expect(claimed.status).toBe(201)
    expect(await detail(claimed.ids.fittingId)).toMatchObject({
      boots: { kind: 'own', soleLengthMm: 305, secondLookBy: staff.technician.name },
    })
  })

  it("is a worn sole of the renter's own boots, until a head technician decides", async () => {
    const { body, rental } = await ready({ ownBoots: true })
    const own = { ...body, bootsId: null }
    const read = {
      rentalId: rental.id,
      description: '',
      soleLengthMm: 305,
      soleType: 'ISO 5355 A' as const,
      wear: 'worn' as const,
    }
    await shop.as('technician').send(readOwnBoots, read)
    expect(await refused(own)).toEqual(['fittings.needs_decision', 'own_boots_worn'])
    expect(
      (await decide({ ...own, kind: 'own_boots', reason: 'worn at the edge, flat in the middle' })).status,
    ).toBe(201)
    expect((await claim(own)).status).toBe(201)
  })
})

describe("a head technician's decision", () => {
  const override = { kind: 'value_override' as const, reason: 'asked for twice, skis hard' }

  it.each(['counter', 'technician', 'manager'] as const)('is not for the %s', async (who) => {
    const { body } = await ready()
    expect((await decide({ ...body, ...override, rows: 1 }, who)).status).toBe(403)
  })

  it('sets another value, one row up, and is stored with the fitting', async () => {
    const { body } = await ready()
    const { ids } = await decide({ ...body, ...override, rows: 1 })
    const claimed = await claim(body)
    const found = await detail(claimed.ids.fittingId)
    // row M at 305 mm: 8 (selection table of the reference tests)
    expect(found).toMatchObject({ value: 8, release: { row: 'M', value: 8 }, targets: { left: { toe: 8 } } })
    expect(found.decisions).toMatchObject([{ id: ids.decisionId, rows: 1, value: 8, secondBy: null }])
  })

  it('needs a second name, proved by PIN, for more than one row up', async () => {
    const { body } = await ready()
    const two = { ...body, ...override, rows: 2 as const }
    expect(await decide(two)).toMatchObject({ code: 'fittings.second_name' })
    const own = { ...two, secondPersonId: shop.people.head_technician.id }
    expect(await decide(own, 'head_technician', staff.head_technician.pin)).toMatchObject({
      code: 'fittings.second_name',
    })
    const clerk = { ...two, secondPersonId: shop.people.counter.id }
    expect(await decide(clerk, 'head_technician', staff.counter.pin)).toMatchObject({
      code: 'fittings.second_name',
    })
    const second = { ...two, secondPersonId: shop.people.technician.id }
    expect(await decide(second, 'head_technician', '000000')).toMatchObject({
      status: 403,
      code: 'pin.wrong',
    })
    const { ids } = await decide(second, 'head_technician', staff.technician.pin)
    const [row] = await shop.db.select().from(fittingDecisions).where(eq(fittingDecisions.id, ids.decisionId))
    expect(row).toMatchObject({ rows: 2, value: 9.5, secondPersonId: shop.people.technician.id })
  })

  it('never goes up for a child', async () => {
    const rental = await shop.rental({
      mass: { unit: 'kg', value: 30 },
      height: { unit: 'cm', value: 135 },
      age: 9,
      skierType: 'II',
    })
    const pair = await shop.rackedPair('pebble-20', { preset: { toe: 5, heel: 10 } })
    const made = await shop.rackedBoots({ soleLengthMm: 265, soleType: 'ISO 5355 C' })
    const about = { rentalId: rental.id, skiPairId: pair.id, bootsId: made.id, ...override }
    expect(await decide({ ...about, rows: 1 })).toMatchObject({
      code: 'fittings.value_not_decidable',
      params: { why: 'not_for_children' },
    })
    expect((await decide({ ...about, rows: -1 })).status).toBe(201)
  })

  it('cannot be made about what stands open nowhere, and never without a reason', async () => {
    const { body } = await ready()
    expect(await decide({ ...body, kind: 'individual_test', reason: 'to be sure' })).toMatchObject({
      code: 'fittings.nothing_to_decide',
    })
    expect((await decide({ ...body, ...override, rows: 1, reason: ' ' })).status).toBe(400)
    expect((await decide({ ...body, ...override })).status).toBe(400)
  })

  it('is added and never changed', async () => {
    const { body } = await ready()
    const { ids } = await decide({ ...body, ...override, rows: -1 })
    const change = shop.db.execute(
      sql`update fitting_decisions set reason = 'other' where id = ${ids.decisionId}`,
    )
    await expect(change).rejects.toThrow()
  })
})

describe('looking at a fitting', () => {
  it('shows no body value to bench and hand-over, and every value to who asks why', async () => {
    const { body } = await ready({
      mass: { unit: 'kg', value: 77.5 },
      height: { unit: 'ft-in', feet: 5, inches: 9.5 },
    })
    const { ids } = await claim(body)
    const shown = JSON.stringify(await detail(ids.fittingId))
    expect(shown).not.toMatch(/77\.5|ft-in|skierType/)
    const why = await shop
      .as('counter')
      .get<AnswerOf<typeof getFittingWhy>>(getFittingWhy.path.replace(':id', ids.fittingId))
    expect(why.body).toMatchObject({
      input: {
        mass: { unit: 'kg', value: 77.5 },
        height: { feet: 5, inches: 9.5 },
        soleLengthMm: 305,
        edition: 'eight-column',
      },
      same: true,
    })
  })

  it('gives what was stored when it is computed again, with a request and with decisions', async () => {
    const same = async (fittingId: string) =>
      (
        await shop
          .as('counter')
          .get<AnswerOf<typeof getFittingWhy>>(getFittingWhy.path.replace(':id', fittingId))
      ).body.same
    const asked = await ready()
    await shop.db.execute(
      sql`update renters set current_inputs_id = ${await lowered(asked.rental)} where id = ${asked.rental.renterId}`,
    )
    const first = await claim(asked.body)
    expect((await detail(first.ids.fittingId)).value).toBe(5.5)
    expect(await same(first.ids.fittingId)).toBe(true)
    const decided = await ready()
    await decide({ ...decided.body, kind: 'value_override', rows: -2, reason: 'long away from snow' })
    const second = await claim(decided.body)
    expect((await detail(second.ids.fittingId)).value).toBe(4.5)
    expect(await same(second.ids.fittingId)).toBe(true)
  })

  it('keeps what it was computed from in sight: a sole that was read anew is named', async () => {
    const { body, boots: made } = await ready()
    const { ids } = await claim(body)
    expect((await detail(ids.fittingId)).changed).toEqual([])
    await shop.db.update(boots).set({ soleLengthMm: 307 }).where(eq(boots.id, made.id))
    expect((await detail(ids.fittingId)).changed).toEqual(['sole'])
  })

  it('is marked as approved once the head technician signed the table edition', async () => {
    const here = await testShop()
    const rental = await here.rental()
    const body = {
      rentalId: rental.id,
      skiPairId: (await here.rackedPair()).id,
      bootsId: (await here.rackedBoots()).id,
    }
    await here.approveTable()
    const { ids } = await here.as('counter').send(claimFitting, body)
    const found = await here.as('counter').get<AnswerOf<typeof getFitting>>(`/api/fittings/${ids.fittingId}`)
    expect(found.body.approved).toBe(true)
  })

  it("does not find another shop's", async () => {
    const { ids } = await claim((await ready()).body)
    const other = await shop.another()
    for (const path of ['', '/why'])
      expect((await other.as('counter').get(`/api/fittings/${ids.fittingId}${path}`)).status).toBe(404)
  })

  /** The renter's signed request for one row lower, as new inputs. */
  async function lowered(rental: { renterId: string; inputsId: string }): Promise<string> {
    const [before] = await shop.db.select().from(fittingInputs).where(eq(fittingInputs.id, rental.inputsId))
    const [row] = await shop.db
      .insert(fittingInputs)
      .values({
        ...before!,
        id: crypto.randomUUID(),
        request: -1,
        requestSignature: Buffer.from('signed'),
        requestSignedName: 'Jara Heath',
      })
      .returning({ id: fittingInputs.id })
    return row!.id
  }
})

describe('what the counter is shown before it takes anything', () => {
  it('is computed on the screen from the same facts and gives what the claim stores', async () => {
    const { body } = await ready()
    const query = { rentalId: body.rentalId, skiPairId: body.skiPairId, bootsId: body.bootsId! }
    const { body: facts } = await shop
      .as('counter')
      .get<Parameters<typeof computeFitting>[0]>('/api/fittings/facts', query)
    const shown = computeFitting(facts)
    const { ids } = await claim(body)
    const stored = await detail(ids.fittingId)
    expect(stored.release).toEqual(shown.outcome)
    expect(stored.targets).toEqual(shown.targets)
    expect(stored.track).toMatchObject({
      toe: shown.plan?.ok && shown.plan.toe,
      heel: shown.plan?.ok && shown.plan.heel,
    })
  })

  it('lists free pairs by the notches that both skis have to be moved, with their places', async () => {
    const here = await testShop()
    const rental = await here.rental()
    const made = await here.rackedBoots()
    const far = await here.rackedPair('ladder-16', { preset: { toe: 2, heel: 2 } })
    const near = await here.rackedPair('ladder-16', { preset: { toe: 7, heel: 7 } })
    const unread = await here.rackedPair('ladder-16', { preset: null })
    const gone = await here.rackedPair()
    await here.change({ kind: 'ski_pair', id: gone.id }, 'racked', 'service')
    const long = await here.rackedPair('ladder-16', { preset: { toe: 7, heel: 7 }, lengthCm: 205 })
    const refuses = await here.rackedPair('pebble-20', { preset: { toe: 5, heel: 10 } })
    const { body } = await here
      .as('counter')
      .get<AnswerOf<typeof suggestPairs>>('/api/fittings/suggest', { rentalId: rental.id, bootsId: made.id })
    expect(body.pairs.map(({ code }) => code)).toEqual([near.code, far.code, unread.code, long.code])
    expect(body.pairs.map(({ code }) => code)).not.toContain(refuses.code)
    const [first] = body.pairs
    // sole 305 mm on this track: 126 + 4n = 152.5 to either side of the middle, n = 6.625: heel or toe 6 and 7
    expect(first).toMatchObject({
      notches: 2,
      rackPlace: expect.stringMatching(/^A /),
      inAdvisedLength: true,
    })
    expect(body.pairs.map(({ notches }) => notches)).toEqual([2, 18, null, 2])
  })

  it('lists free boots near a size, and finds nothing of another shop', async () => {
    const here = await shop.another()
    const rental = await here.rental()
    const made = await here.rackedBoots({ mondo: 265 })
    await here.rackedBoots({ mondo: 290 })
    const codes = async (query: Record<string, string | number>) => {
      const answer = await here.as('counter').get<{ boots: { code: string }[] }>('/api/boots-for', query)
      return answer.body.boots.map(({ code }) => code)
    }
    expect(await codes({ rentalId: rental.id, mondo: 270 })).toEqual([made.code])
    expect(await codes({ rentalId: rental.id })).toEqual([])
    // EU 42 is 26.5 (unit test of the advice)
    await here.db.execute(
      sql`update rentals set shoe = '{"size": "42", "system": "eu"}' where id = ${rental.id}`,
    )
    expect(await codes({ rentalId: rental.id })).toEqual([made.code])
    expect((await shop.as('counter').get('/api/boots-for', { rentalId: rental.id })).status).toBe(404)
    expect((await shop.as('counter').get('/api/fittings/facts', { rentalId: rental.id })).status).toBe(404)
  })
})
