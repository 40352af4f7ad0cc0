import { eq } from 'drizzle-orm'
import { beforeAll, describe, expect, it } from 'vitest'
import { createBoots } from '#shared/api/boots'
import { makeFormLink } from '#shared/api/forms'
import { boardEvents, commandLog, formLinks } from '../../server/db/schema/schema'
import { purgeOld } from '../../server/jobs/jobs'
import { newToken, phone } from '../support/forms'
import { testShop, type TestShop } from '../support/shop'

const day = 86_400_000
const daysFromNow = (days: number) => new Date(Date.now() + days * day)

let shop: TestShop
beforeAll(async () => {
  shop = await testShop()
})

describe('what the server forgets by itself', () => {
  it('is what somebody typed into a form that was never sent, once its link is over', async () => {
    const token = newToken()
    const { ids } = await shop
      .as('counter')
      .send(makeFormLink, { siteId: shop.sites.lower, token, rentalId: null })
    await phone(shop.app.stranger, token).save(0, { firstName: 'Orla' })
    const draft = async () =>
      (await shop.db.select().from(formLinks).where(eq(formLinks.id, ids.linkId)))[0]!.draft
    await purgeOld({ db: shop.db, now: () => daysFromNow(0) })
    expect(await draft()).toEqual({ firstName: 'Orla' })
    await purgeOld({ db: shop.db, now: () => daysFromNow(3) })
    expect(await draft()).toBeNull()
  })

  it('is the log of commands and the events of the board after seven days, not before', async () => {
    const made = await shop.as('manager').send(createBoots, {
      code: 'B4170',
      model: 'Tarn 90',
      mondo: 265,
      soleLengthMm: 305,
      soleType: 'ISO 5355 A',
      season: 2025,
      homeSiteId: shop.sites.lower,
      rackPlace: 'K 1',
    })
    expect(made.status).toBe(201)
    const kept = async () => [
      await shop.db.$count(commandLog, eq(commandLog.shopId, shop.id)),
      await shop.db.$count(boardEvents, eq(boardEvents.shopId, shop.id)),
    ]
    await purgeOld({ db: shop.db, now: () => daysFromNow(6.9) })
    expect((await kept()).every((rows) => rows > 0)).toBe(true)
    await purgeOld({ db: shop.db, now: () => daysFromNow(7.1) })
    expect(await kept()).toEqual([0, 0])
  })
})
