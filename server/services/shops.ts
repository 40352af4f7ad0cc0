import { eq } from 'drizzle-orm'
import { dayInZone } from '#shared/dates/days'
import { shops } from '../db/schema/schema'
import type { Reader } from '../deps'
import { Problem } from '../errors'

/** The shop's settings. */
export async function shopById(db: Reader, shopId: string) {
  const [shop] = await db.select().from(shops).where(eq(shops.id, shopId))
  if (!shop) throw new Problem('session.shop')
  return shop
}

/** The shop's day now. */
export const shopDay = (shop: { zone: string }, now: Date) => dayInZone(now, shop.zone)
