import { beforeAll, describe, expect, it } from 'vitest'
import { eq, sql } from 'drizzle-orm'
import { claimFitting, getFitting } from '#shared/api/fittings'
import type { AnswerOf, BodyOf } from '#shared/api/define'
import { trackPlan } from '#shared/track/trackPlan'
import type { Tx } from '../../server/deps'
import { boots, fittings, renters, skiModels, skiPairs } from '../../server/db/schema/schema'
import { testShop, type TestShop } from '../support/shop'
import { someoneWaits } from '../support/waits'
import { staff } from '../support/people'
import { addSkiModel } from '../support/things'

let shop: TestShop
beforeAll(async () => {
  shop = await testShop()
})

/** A renter of 78 kg, racked boots with a sole of 305 mm, a racked pair that takes them. */
async function ready(values: Parameters<TestShop['rental']>[0] = {}) {
  const [rental, pair, made] = [await shop.rental(values), await shop.rackedPair(), await shop.rackedBoots()]
  const body: BodyOf<typeof claimFitting> = { rentalId: rental.id, skiPairId: pair.id, bootsId: made.id }
  return { rental, pair, boots: made, body }
}

const claim = (body: BodyOf<typeof claimFitting>, who: Parameters<TestShop['as']>[0] = 'counter') =>
  shop.as(who).send(claimFitting, body)
const detail = async (fittingId: string) =>
  (await shop.as('technician').get<AnswerOf<typeof getFitting>>(getFitting.path.replace(':id', fittingId)))
    .body
const stateOf = async (table: typeof skiPairs | typeof boots, id: string) =>
  (await shop.db.select({ state: table.state }).from(table).where(eq(table.id, id)))[0]?.state

describe('taking boots and a pair while somebody changes what it is computed from', () => {
  /** Sends the claim while a change stands unconfirmed, confirms that once the claim waits for it. */
  async function claimDuring(change: (tx: Tx) => Promise<unknown>, body: BodyOf<typeof claimFitting>) {
    let sent: ReturnType<typeof claim> | undefined
    await shop.db.transaction(async (tx) => {
      await change(tx)
      sent = claim(body)
      await someoneWaits(shop.db)
    })
    const answer = await sent!
    const [row] = await shop.db.select().from(fittings).where(eq(fittings.rentalId, body.rentalId))
    return { answer, row }
  }

  it('waits for the renter’s new data and is computed from them', async () => {
    const { body, rental } = await ready()
    const inputsId = crypto.randomUUID()
    const { answer, row } = await claimDuring(async (tx) => {
      await tx.execute(sql`insert into fitting_inputs (id, shop_id, renter_id, salt, mass, mass_source, height, height_source, age, skier_type)
        select ${inputsId}, shop_id, renter_id, salt, mass, mass_source, height, height_source, age, 'III' from fitting_inputs where id = ${rental.inputsId}`)
      await tx.update(renters).set({ currentInputsId: inputsId }).where(eq(renters.id, rental.renterId))
    }, body)
    expect(answer.status).toBe(201)
    // 78 kg and 178 cm are row K, type III two rows down: M; sole 305 mm: 8 (selection table of the reference tests)
    expect(row).toMatchObject({ inputsId, value: 8 })
  })

  it('waits for the model’s new mounting mark and is computed with it', async () => {
    const { body, pair } = await ready()
    const skiModelId = await addSkiModel(shop.db, shop.id, 'Fellwind 81')
    await shop.db.update(skiPairs).set({ skiModelId }).where(eq(skiPairs.id, pair.id))
    const { answer, row } = await claimDuring(
      (tx) => tx.update(skiModels).set({ offsetMm: 8 }).where(eq(skiModels.id, skiModelId)),
      body,
    )
    expect(answer.status).toBe(201)
    const planned = trackPlan(pair.track, 305, { offsetMm: 8 })
    const unmoved = trackPlan(pair.track, 305, { offsetMm: 0 })
    if (!planned.ok || !unmoved.ok) throw new Error('this sole fits this track')
    expect([planned.toe, planned.heel]).not.toEqual([unmoved.toe, unmoved.heel])
    expect(row?.track).toMatchObject({ toe: planned.toe, heel: planned.heel })
  })
})

describe('two clerks and one pair', () => {
  it('gives it to exactly one; the other learns who has it and since when', async () => {
    for (let round = 0; round < 5; round += 1) {
      const [mine, theirs] = [await ready(), await ready()]
      const wanted = mine.pair.id
      const answers = await Promise.all([
        claim({ ...mine.body, skiPairId: wanted }, 'counter'),
        claim({ ...theirs.body, skiPairId: wanted }, 'second_counter'),
      ])
      const won = answers.filter(({ status }) => status === 201)
      const lost = answers.filter(({ status }) => status === 409)
      expect([won.length, lost.length]).toEqual([1, 1])
      const holder = answers[0]!.status === 201 ? staff.counter.name : staff.second_counter.name
      const since = (await detail(won[0]!.ids.fittingId)).claimedAt
      expect(lost[0]).toMatchObject({
        code: 'items.taken',
        params: { code: mine.pair.code, by: holder, since },
      })
      const open = sql`ski_pair_id = ${wanted} and state = 'claimed'`
      expect(await shop.db.$count(fittings, open)).toBe(1)
      const losersBoots = answers[0]!.status === 201 ? theirs.boots.id : mine.boots.id
      expect(await stateOf(boots, losersBoots)).toBe('racked')
    }
  })

  it('gives one renter one fitting when two clerks serve the same renter', async () => {
    const { body } = await ready()
    const other = await ready()
    const answers = await Promise.all([
      claim(body, 'counter'),
      claim({ ...other.body, rentalId: body.rentalId }, 'second_counter'),
    ])
    expect(answers.map(({ status }) => status).sort()).toEqual([201, 409])
    expect(answers.find(({ status }) => status === 409)?.code).toBe('fittings.open')
  })
})
