import { and, asc, desc, eq, gte, inArray, isNull, lte, or, sql } from 'drizzle-orm'
import type { AnswerOf } from '#shared/api/define'
import type { DueSet, getReturnsToday, ReturnSet, ScannedToday } from '#shared/api/returns'
import { dayInZone } from '#shared/dates/days'
import { dayStart } from '#shared/dates/dayStart'
import type { RentalState } from '#shared/lifecycle/fittingStates'
import type { ItemState } from '#shared/lifecycle/itemStates'
import type { Reader } from '../../deps'
import { Problem } from '../../errors'
import { boots, fittings, rentalItems, rentals, renters, returns, shops, skiPairs } from '../schema/schema'
import { iso, isoOrNull } from './lists'
import { calledName } from './names'

const codeOf = sql<string | null>`coalesce(${skiPairs.code}, ${boots.code})`

/** The shop's day now, and the instant at which it began. */
async function dayOfShop(db: Reader, shopId: string, now: Date) {
  const [shop] = await db.select({ zone: shops.zone }).from(shops).where(eq(shops.id, shopId))
  const today = dayInZone(now, shop!.zone)
  return { today, start: dayStart(today, shop!.zone) }
}

/** What was scanned in today, newest first, and the sets that are due, at one site or at all of them. */
export async function returnsToday(
  db: Reader,
  shopId: string,
  siteId: string | null,
  now: Date,
): Promise<AnswerOf<typeof getReturnsToday>> {
  const { today, start } = await dayOfShop(db, shopId, now)
  return {
    today,
    scans: await scansSince(db, shopId, siteId, start),
    sets: await dueSets(db, shopId, siteId, today, start),
  }
}

async function scansSince(
  db: Reader,
  shopId: string,
  siteId: string | null,
  start: Date,
): Promise<ScannedToday[]> {
  const rows = await db
    .select({
      scan: returns,
      code: codeOf,
      state: sql<ItemState | null>`coalesce(${skiPairs.state}, ${boots.state})`,
      rackPlace: sql<string | null>`coalesce(${skiPairs.rackPlace}, ${boots.rackPlace})`,
      rentalNumber: rentals.number,
      renter: { firstName: renters.firstName, lastName: renters.lastName },
      fittedSoleLengthMm: sql<number | null>`case when ${returns.itemKind} = 'own_boots' then
        (select f.sole_length_mm from fittings f join rental_items i on i.fitting_id = f.id
          where i.item_id = ${returns.itemId} order by i.out_at desc limit 1) end`,
    })
    .from(returns)
    .leftJoin(skiPairs, and(eq(returns.itemKind, 'ski_pair'), eq(skiPairs.id, returns.itemId)))
    .leftJoin(boots, and(eq(returns.itemKind, 'boots'), eq(boots.id, returns.itemId)))
    .leftJoin(rentals, eq(rentals.id, returns.rentalId))
    .leftJoin(renters, eq(renters.id, rentals.renterId))
    .where(
      and(
        eq(returns.shopId, shopId),
        gte(returns.recordedAt, start),
        siteId ? eq(returns.siteId, siteId) : undefined,
      ),
    )
    .orderBy(desc(returns.recordedAt), desc(returns.id))
    .limit(500)
  const missing = await sidesOutOf(
    db,
    rows.map(({ scan }) => scan.itemId),
  )
  return rows.map(({ scan, renter, ...row }) => ({
    ...row,
    id: scan.id,
    itemKind: scan.itemKind,
    itemId: scan.itemId,
    side: scan.side,
    at: iso(scan.occurredAt),
    stateBefore: scan.stateBefore,
    missing: missingIn(row.state, missing.get(scan.itemId)),
    rentalId: scan.rentalId,
    renter: scan.rentalId && renter ? calledName(renter) : null,
    soleLengthReadMm: scan.soleLengthReadMm,
  }))
}

/** Sides of these items that are with a renter now. */
export async function sidesOutOf(db: Reader, itemIds: string[]): Promise<Map<string, ('left' | 'right')[]>> {
  const out = new Map<string, ('left' | 'right')[]>()
  if (itemIds.length === 0) return out
  const rows = await db
    .select({ itemId: rentalItems.itemId, side: rentalItems.side })
    .from(rentalItems)
    .where(and(inArray(rentalItems.itemId, [...new Set(itemIds)]), isNull(rentalItems.backAt)))
    .orderBy(asc(rentalItems.side))
  for (const { itemId, side } of rows)
    if (side !== 'both') out.set(itemId, [...(out.get(itemId) ?? []), side])
  return out
}

/** Nothing of an item is missing while all of it is out, or hangs on its rack. */
const missingIn = (state: ItemState | null, sides: ('left' | 'right')[] = []) =>
  state === 'out' || state === 'racked' ? [] : sides

/** Sets whose last day is today or was before: those still out, and those of which something came back today. */
async function dueSets(
  db: Reader,
  shopId: string,
  siteId: string | null,
  today: string,
  start: Date,
): Promise<DueSet[]> {
  const cameToday = db
    .select({ rentalId: returns.rentalId })
    .from(returns)
    .where(and(eq(returns.shopId, shopId), gte(returns.recordedAt, start)))
  const rows = await db
    .select({
      rentalId: rentals.id,
      number: rentals.number,
      endsOn: rentals.endsOn,
      siteId: rentals.siteId,
      renter: { firstName: renters.firstName, lastName: renters.lastName },
      parts: sql<number>`count(${rentalItems.id})::int`,
      out: sql<number>`(count(*) filter (where ${rentalItems.backAt} is null))::int`,
    })
    .from(rentals)
    .innerJoin(renters, eq(renters.id, rentals.renterId))
    .innerJoin(rentalItems, eq(rentalItems.rentalId, rentals.id))
    .where(
      and(
        eq(rentals.shopId, shopId),
        lte(rentals.endsOn, today),
        siteId ? eq(rentals.siteId, siteId) : undefined,
        or(
          eq(rentals.state, 'out'),
          and(inArray(rentals.state, ['open', 'returned']), inArray(rentals.id, cameToday)),
        ),
      ),
    )
    .groupBy(rentals.id, renters.id)
    .orderBy(asc(rentals.endsOn), asc(rentals.number))
  return rows.map((row) => ({ ...row, renter: calledName(row.renter) }))
}

/** A renter's set with what of it is back. */
export async function returnSet(db: Reader, shopId: string, rentalId: string): Promise<ReturnSet> {
  const [rental] = await db
    .select({
      rentalId: rentals.id,
      number: rentals.number,
      state: rentals.state,
      endsOn: rentals.endsOn,
      renter: { firstName: renters.firstName, lastName: renters.lastName },
    })
    .from(rentals)
    .innerJoin(renters, eq(renters.id, rentals.renterId))
    .where(and(eq(rentals.id, rentalId), eq(rentals.shopId, shopId)))
  if (!rental) throw new Problem('request.not_found')
  const parts = await db
    .select({
      itemKind: rentalItems.itemKind,
      itemId: rentalItems.itemId,
      code: codeOf,
      side: rentalItems.side,
      backAt: rentalItems.backAt,
    })
    .from(rentalItems)
    .leftJoin(skiPairs, and(eq(rentalItems.itemKind, 'ski_pair'), eq(skiPairs.id, rentalItems.itemId)))
    .leftJoin(boots, and(eq(rentalItems.itemKind, 'boots'), eq(boots.id, rentalItems.itemId)))
    .where(eq(rentalItems.rentalId, rentalId))
    .orderBy(desc(rentalItems.itemKind), asc(rentalItems.outAt), asc(rentalItems.side))
  return {
    ...rental,
    state: rental.state as RentalState,
    renter: calledName(rental.renter),
    parts: parts.map((part) => ({ ...part, back: part.backAt !== null, backAt: isoOrNull(part.backAt) })),
    ownBoots: await ownBootsRead(db, rentalId),
  }
}

async function ownBootsRead(db: Reader, rentalId: string): Promise<ReturnSet['ownBoots']> {
  const [row] = await db
    .select({ readMm: returns.soleLengthReadMm, fittedMm: fittings.soleLengthMm })
    .from(returns)
    .innerJoin(rentalItems, and(eq(rentalItems.itemId, returns.itemId), eq(rentalItems.rentalId, rentalId)))
    .innerJoin(fittings, eq(fittings.id, rentalItems.fittingId))
    .where(and(eq(returns.rentalId, rentalId), eq(returns.itemKind, 'own_boots')))
    .orderBy(desc(returns.recordedAt), desc(returns.id), desc(rentalItems.outAt))
    .limit(1)
  return row?.readMm ? { readMm: row.readMm, fittedMm: row.fittedMm } : null
}
