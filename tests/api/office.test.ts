import { createRental } from '#shared/api/rentals'
import { filledForm } from '../support/forms'
import { beforeAll, describe, expect, test } from 'vitest'
import { eq } from 'drizzle-orm'
import type { AnswerOf } from '#shared/api/define'
import {
  changeShop,
  createSite,
  getShop,
  listTexts,
  renameSite,
  reviewText,
  writeText,
  type ShopSettings,
} from '#shared/api/shop'
import { approveTableEdition, getTableEdition, withdrawTableEdition } from '#shared/api/tableEdition'
import { releaseSetting } from '#shared/release/releaseSetting'
import { RULES_VERSION } from '#shared/release/rules'
import { shops, shopTexts } from '../../server/db/schema/schema'
import { currentText, requireUsable } from '../../server/services/texts'
import { tableApproval } from '../../server/db/queries/tableApproval'
import { handOver, signedTicket } from '../support/bench'
import { testShop, type TestShop } from '../support/shop'

let shop: TestShop
beforeAll(async () => {
  shop = await testShop()
})

const settings: ShopSettings = {
  name: 'Tarnside Hire',
  zone: 'Europe/Zurich',
  ageOfMajority: 18,
  promiseMinutes: 25,
  nearMassKg: 3,
  nearHeightCm: 4,
  claimAgesMinutes: 45,
}

describe('settings', () => {
  test('are what the manager says, for this shop only', async () => {
    const other = await shop.another()
    const read = async (at: TestShop) =>
      (await at.as('manager').get<AnswerOf<typeof getShop>>(getShop.path)).body
    const before = await read(other)
    expect((await shop.as('manager').send(changeShop, settings)).status).toBe(201)
    expect((await read(shop)).settings).toEqual(settings)
    expect(await read(other)).toEqual(before)
  })

  test.each([
    ['a zone that is none', { zone: 'Middle/Earth' }],
    ['an age of majority of three', { ageOfMajority: 3 }],
    ['a promise of no minutes', { promiseMinutes: 0 }],
    ['half a kilogram', { nearMassKg: 0.5 }],
    ['a shop without a name', { name: '  ' }],
  ])('%s is refused', async (_name, slip) => {
    const { code } = await shop.as('manager').send(changeShop, { ...settings, ...slip })
    expect(code).toBe('request.malformed')
  })
})

describe('sites', () => {
  test('are added and renamed; no two have one name', async () => {
    const { ids } = await shop.as('manager').send(createSite, { name: 'Upper Lift' })
    expect((await shop.as('manager').send(createSite, { name: 'Upper Lift' })).code).toBe('sites.name_taken')
    const renamed = { siteId: ids.siteId, name: 'Village Square' }
    expect((await shop.as('manager').send(renameSite, renamed)).code).toBe('sites.name_taken')
    expect((await shop.as('manager').send(renameSite, { ...renamed, name: 'Top Lift' })).status).toBe(201)
    const { body } = await shop.as('manager').get<AnswerOf<typeof getShop>>(getShop.path)
    expect(body.sites.map(({ name }) => name)).toEqual(['Lower Lift', 'Village Square', 'Top Lift'])
  })
})

describe('texts', () => {
  /** A shop as it is made: nobody has signed its texts yet. */
  async function unsigned(): Promise<TestShop> {
    const fresh = await shop.another()
    const open = { reviewedBy: null, reviewedAt: null }
    await fresh.db.update(shopTexts).set(open).where(eq(shopTexts.shopId, fresh.id))
    return fresh
  }
  const rows = async (at: TestShop) =>
    (await at.as('manager').get<AnswerOf<typeof listTexts>>(listTexts.path)).body.rows
  const text = async (at: TestShop, kind: string, locale = 'en') =>
    (await rows(at)).find(({ current }) => current.kind === kind && current.locale === locale)!

  test('the product brings its own in both languages, and nobody has signed them', async () => {
    const fresh = await unsigned()
    const all = await rows(fresh)
    expect(all.map(({ current }) => [current.kind, current.locale, current.reviewed])).toEqual([
      ['acknowledgement', 'en', null],
      ['acknowledgement', 'de', null],
      ['skier_types', 'en', null],
      ['skier_types', 'de', null],
    ])
  })

  test('a real shop cannot use what nobody signed; the demo shop can', async () => {
    const fresh = await unsigned()
    const current = await currentText(fresh.db, fresh.id, 'acknowledgement', 'en')
    await expect(requireUsable(fresh.db, fresh.id, current)).rejects.toMatchObject({
      code: 'texts.unreviewed',
    })
    await fresh.db.update(shops).set({ demo: true }).where(eq(shops.id, fresh.id))
    await expect(requireUsable(fresh.db, fresh.id, current)).resolves.toBeUndefined()
  })

  test('signed, it is usable, and says who signed it', async () => {
    const fresh = await unsigned()
    const { current } = await text(fresh, 'acknowledgement')
    const { kind, locale, sha256 } = current
    expect((await fresh.as('manager').send(reviewText, { kind, locale, sha256 })).status).toBe(201)
    const signed = await currentText(fresh.db, fresh.id, kind, locale)
    expect(signed.reviewed?.by).toBe(fresh.people.manager.name)
    await expect(requireUsable(fresh.db, fresh.id, signed)).resolves.toBeUndefined()
    // the other language is another text
    expect((await text(fresh, 'acknowledgement', 'de')).current.reviewed).toBeNull()
  })

  test('a new wording waits until it is signed; until then renters read the signed one', async () => {
    const fresh = await unsigned()
    const manager = fresh.as('manager')
    const { current } = await text(fresh, 'acknowledgement')
    await manager.send(reviewText, { kind: current.kind, locale: 'en', sha256: current.sha256 })
    const body = 'What I told the shop about me is true, and I read the numbers on my skis.'
    await manager.send(writeText, { kind: 'acknowledgement', locale: 'en', body })
    const { current: still, waiting } = await text(fresh, 'acknowledgement')
    expect([still.version, waiting?.version, waiting?.body]).toEqual([1, 2, body])
    const stale = { kind: current.kind, locale: 'en' as const, sha256: current.sha256 }
    expect((await manager.send(reviewText, stale)).code).toBe('texts.changed')
    await manager.send(reviewText, { ...stale, sha256: waiting!.sha256 })
    expect((await currentText(fresh.db, fresh.id, 'acknowledgement', 'en')).body).toBe(body)
    const kept = await fresh.db.select().from(shopTexts).where(eq(shopTexts.shopId, fresh.id))
    expect(
      kept
        .filter(({ kind, locale }) => kind === 'acknowledgement' && locale === 'en')
        .map(({ version }) => version)
        .sort(),
    ).toEqual([1, 2])
  })

  test('the sentences about skiing are signed as they stand in the program', async () => {
    const fresh = await unsigned()
    const { current } = await text(fresh, 'skier_types', 'de')
    expect(current.body).toContain('Langsam und bedacht')
    const { kind, locale, sha256 } = current
    await fresh.as('manager').send(reviewText, { kind, locale, sha256 })
    await fresh.as('manager').send(reviewText, { kind, locale, sha256 })
    const kept = await fresh.db.select().from(shopTexts).where(eq(shopTexts.kind, 'skier_types'))
    expect(kept.filter(({ shopId, locale: of }) => shopId === fresh.id && of === 'de')).toHaveLength(1)
    expect((await text(fresh, 'skier_types', 'de')).current.reviewed?.by).toBe(fresh.people.manager.name)
  })

  test('a real shop takes nobody in by sentences that nobody of it signed', async () => {
    const fresh = await unsigned()
    const body = {
      siteId: fresh.sites.lower,
      form: filledForm(),
      massSource: 'measured' as const,
      heightSource: 'declared' as const,
      skierTypeByRenter: true as const,
    }
    expect((await fresh.as('counter').send(createRental, body)).code).toBe('texts.unreviewed')
    const { current } = await text(fresh, 'skier_types')
    const { kind, locale, sha256 } = current
    await fresh.as('manager').send(reviewText, { kind, locale, sha256 })
    expect((await fresh.as('counter').send(createRental, body)).status).toBe(201)
  })

  test('ten wordings sent at once get ten versions', async () => {
    const fresh = await unsigned()
    const written = await Promise.all(
      Array.from({ length: 10 }, (_, n) =>
        fresh
          .as('manager')
          .send(writeText, { kind: 'acknowledgement', locale: 'en', body: `Wording number ${n}, read.` }),
      ),
    )
    expect(written.map(({ status }) => status)).toEqual(Array(10).fill(201))
    expect((await currentText(fresh.db, fresh.id, 'acknowledgement', 'en')).version).toBe(11)
  })
})

describe('the table edition', () => {
  const comparedWith = 'the standard that the shop owns, 2016 (invented)'
  const approval = { edition: 'eight-column' as const, rulesVersion: RULES_VERSION, comparedWith }
  const read = async (at: TestShop) =>
    (await at.as('counter').get<AnswerOf<typeof getTableEdition>>(getTableEdition.path)).body

  test('is shown cell by cell as it computes, with where each number comes from', async () => {
    const { rows, columns, standing, rules } = await read(shop)
    expect([rows.length, columns.length]).toEqual([16, 8])
    expect(standing.source).toMatch(/./)
    expect(rules.every(({ standing: { kind, source } }) => kind && source)).toBe(true)
    // a cell of the screen is the value that a renter gets: 72 kg, 172 cm, 305 mm, type I is row K
    const release = releaseSetting({
      mass: { unit: 'kg', value: 72 },
      height: { unit: 'cm', value: 172 },
      age: 30,
      skierType: 'I',
      soleLengthMm: 305,
    })
    const column = columns.findIndex(({ min, max }) => (min ?? 0) <= 305 && 305 <= (max ?? 999))
    expect(release).toMatchObject({ ok: true, value: rows.find(({ code }) => code === 'K')!.values[column] })
  })

  test('is approved by the head technician with what it was compared with, and withdrawn again', async () => {
    const fresh = await shop.another()
    expect((await read(fresh)).approval).toEqual({ approved: false, withdrawn: null })
    expect((await fresh.as('head_technician').send(approveTableEdition, approval)).status).toBe(201)
    const by = fresh.people.head_technician.name
    expect(await tableApproval(fresh.db, fresh.id)).toMatchObject({ approved: true, by, comparedWith })
    expect(await tableApproval(shop.db, shop.id)).toMatchObject({ approved: false })
    const reason = 'a new edition has come out'
    await fresh.as('second_head_technician').send(withdrawTableEdition, { edition: 'eight-column', reason })
    expect((await read(fresh)).approval).toMatchObject({
      approved: false,
      withdrawn: { by: fresh.people.second_head_technician.name, reason },
    })
    const again = await fresh
      .as('head_technician')
      .send(withdrawTableEdition, { edition: 'eight-column', reason })
    expect(again.code).toBe('tableEdition.changed')
  })

  test('of other rules than the program now computes with cannot be signed', async () => {
    const old = { ...approval, rulesVersion: 'before' }
    expect((await shop.as('head_technician').send(approveTableEdition, old)).code).toBe(
      'tableEdition.changed',
    )
    const six = { ...approval, edition: 'six-column' as const }
    expect((await shop.as('head_technician').send(approveTableEdition, six)).code).toBe(
      'tableEdition.changed',
    )
  })
})

describe('a hand-over with a text', () => {
  test('that nobody of a real shop signed is refused; signed, it goes; in the demo it goes with its mark', async () => {
    const fresh = await shop.another()
    const review = (by: string | null) =>
      fresh.db
        .update(shopTexts)
        .set({ reviewedBy: by, reviewedAt: by ? new Date() : null })
        .where(eq(shopTexts.shopId, fresh.id))
    await review(null)
    const ticket = await signedTicket(fresh)
    expect((await handOver(fresh, ticket)).code).toBe('texts.unreviewed')
    await review(fresh.people.manager.id)
    expect((await handOver(fresh, ticket)).status).toBe(201)

    await review(null)
    await fresh.db.update(shops).set({ demo: true }).where(eq(shops.id, fresh.id))
    expect((await handOver(fresh, await signedTicket(fresh))).status).toBe(201)
  })
})
