import { and, asc, eq } from 'drizzle-orm'
import type { AnswerOf, BodyOf, IdsOf } from '#shared/api/define'
import type { changeShop, createSite, getShop, renameSite, ShopSettings } from '#shared/api/shop'
import { dayInZone } from '#shared/dates/days'
import { shops, sites } from '../db/schema/schema'
import type { Reader, Tx } from '../deps'
import { isDuplicate, Problem } from '../errors'
import type { PersonActor } from './actor'
import type { Service } from './commands'
import { changedFields, noteOfficeChange } from './office'

type Does<C> = Service<BodyOf<C>, IdsOf<C>, PersonActor>

/** The shop's settings. */
export async function shopById(db: Reader, shopId: string) {
  const [shop] = await db.select().from(shops).where(eq(shops.id, shopId))
  if (!shop) throw new Problem('session.shop')
  return shop
}

/**
 * The shop's settings, and its office work one at a time from here to the end of the transaction. Rows that refer to
 * the shop are added meanwhile: a lock that those would wait for is one that two commands can wait for in a circle.
 */
export async function lockShop(tx: Tx, shopId: string) {
  const [shop] = await tx.select().from(shops).where(eq(shops.id, shopId)).for('no key update')
  if (!shop) throw new Problem('session.shop')
  return shop
}

/** Refuses a site that is not of this shop. */
export async function requireSite(tx: Tx, shopId: string, siteId: string) {
  const own = await tx.$count(sites, and(eq(sites.id, siteId), eq(sites.shopId, shopId)))
  if (own === 0) throw new Problem('sites.unknown')
}

/** The shop's day now. */
export const shopDay = (shop: { zone: string }, now: Date) => dayInZone(now, shop.zone)

/** Settings and sites, for the office. */
export async function shopForOffice(db: Reader, shopId: string): Promise<AnswerOf<typeof getShop>> {
  const shop = await shopById(db, shopId)
  const siteRows = await db
    .select({ id: sites.id, name: sites.name })
    .from(sites)
    .where(eq(sites.shopId, shopId))
    .orderBy(asc(sites.createdAt), asc(sites.name))
  return { settings: settingsOf(shop), demo: shop.demo, sites: siteRows }
}

export const changeShopService: Does<typeof changeShop> = async (context, body) => {
  const { tx, actor } = context
  const shop = await lockShop(tx, actor.shopId)
  await tx.update(shops).set(body).where(eq(shops.id, actor.shopId))
  await noteOfficeChange(context, 'shop.change', actor.shopId, changedFields(settingsOf(shop), body))
  return { shopId: actor.shopId }
}

export const createSiteService: Does<typeof createSite> = async (context, { name }) => {
  const { tx, actor } = context
  const [site] = await orTaken(
    tx.insert(sites).values({ shopId: actor.shopId, name }).returning({ id: sites.id }),
  )
  await noteOfficeChange(context, 'sites.create', site!.id, ['name'])
  return { siteId: site!.id }
}

export const renameSiteService: Does<typeof renameSite> = async (context, { siteId, name }) => {
  const { tx, actor } = context
  const [site] = await orTaken(
    tx
      .update(sites)
      .set({ name })
      .where(and(eq(sites.id, siteId), eq(sites.shopId, actor.shopId)))
      .returning({ id: sites.id }),
  )
  if (!site) throw new Problem('sites.unknown')
  await noteOfficeChange(context, 'sites.rename', siteId, ['name'])
  return { siteId }
}

function settingsOf(shop: typeof shops.$inferSelect): ShopSettings {
  const { name, zone, ageOfMajority, promiseMinutes, nearMassKg, nearHeightCm, claimAgesMinutes } = shop
  return { name, zone, ageOfMajority, promiseMinutes, nearMassKg, nearHeightCm, claimAgesMinutes }
}

async function orTaken<T>(work: PromiseLike<T>): Promise<T> {
  try {
    return await work
  } catch (error) {
    throw isDuplicate(error, 'sites_name') ? new Problem('sites.name_taken') : error
  }
}
