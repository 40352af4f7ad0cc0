import { and, asc, desc, eq, inArray, isNotNull } from 'drizzle-orm'
import { alias } from 'drizzle-orm/pg-core'
import type { AnswerOf } from '#shared/api/define'
import type { getTicket, QueuedTicket } from '#shared/api/tickets'
import { notchDistance } from '#shared/track/moves'
import type { Reader } from '../../deps'
import {
  boots,
  fittingDecisions,
  fittings,
  people,
  rentals,
  renters,
  shops,
  skiPairs,
  skiReadings,
  skis,
} from '../schema/schema'
import { fittingDetail } from './fittingDetail'
import { calledName } from './names'

const clerk = alias(people, 'clerk')
const holder = alias(people, 'holder')

/** When an unfinished claim begins to age. */
const agesAt = (claimedAt: Date, minutes: number) =>
  new Date(claimedAt.getTime() + minutes * 60_000).toISOString()

/** Open tickets, those promised first on top. */
export async function benchQueue(db: Reader, shopId: string, siteId: string | null): Promise<QueuedTicket[]> {
  const rows = await db
    .select({
      fitting: fittings,
      number: rentals.number,
      renter: { firstName: renters.firstName, lastName: renters.lastName },
      pair: { code: skiPairs.code, rackPlace: skiPairs.rackPlace },
      bootsCode: boots.code,
      clerk: clerk.name,
      holder: holder.name,
      agesMinutes: shops.claimAgesMinutes,
    })
    .from(fittings)
    .innerJoin(shops, eq(shops.id, fittings.shopId))
    .innerJoin(rentals, eq(rentals.id, fittings.rentalId))
    .innerJoin(renters, eq(renters.id, fittings.renterId))
    .innerJoin(skiPairs, eq(skiPairs.id, fittings.skiPairId))
    .leftJoin(boots, eq(boots.id, fittings.bootsId))
    .innerJoin(clerk, eq(clerk.id, fittings.claimedBy))
    .leftJoin(holder, eq(holder.id, fittings.heldBy))
    .where(
      and(
        eq(fittings.shopId, shopId),
        eq(fittings.state, 'claimed'),
        siteId ? eq(fittings.siteId, siteId) : undefined,
      ),
    )
    .orderBy(asc(fittings.promisedAt), asc(fittings.number))
  const bySki = await standing(
    db,
    rows.map(({ fitting }) => fitting),
  )
  return rows.map(({ fitting, renter, pair, ...row }) => ({
    fittingId: fitting.id,
    number: row.number,
    name: calledName(renter),
    pairCode: pair.code,
    rackPlace: pair.rackPlace,
    bootsCode: row.bootsCode,
    promisedAt: fitting.promisedAt.toISOString(),
    claimedAt: fitting.claimedAt.toISOString(),
    claimedBy: row.clerk,
    agesAt: agesAt(fitting.claimedAt, row.agesMinutes),
    heldBy: fitting.heldBy && row.holder ? { id: fitting.heldBy, name: row.holder } : null,
    heldSince: fitting.heldSince?.toISOString() ?? null,
    ...bySki(fitting),
  }))
}

type Fitting = typeof fittings.$inferSelect

/** How far both skis of each fitting are from their targets, and which of them were read and stand so still. */
async function standing(db: Reader, of: Fitting[]) {
  const pairIds = of.map((fitting) => fitting.skiPairId)
  const fittingIds = of.map((fitting) => fitting.id)
  const skiRows = pairIds.length
    ? await db.select().from(skis).where(inArray(skis.skiPairId, pairIds)).orderBy(asc(skis.side))
    : []
  const readRows = fittingIds.length
    ? await db
        .select({
          fittingId: skiReadings.fittingId,
          skiId: skiReadings.skiId,
          presetVersion: skiReadings.presetVersion,
        })
        .from(skiReadings)
        .where(inArray(skiReadings.fittingId, fittingIds))
    : []
  return (fitting: Fitting) => {
    const both = skiRows.filter((ski) => ski.skiPairId === fitting.skiPairId)
    const read = both.filter((ski) =>
      readRows.some(
        (each) =>
          each.fittingId === fitting.id && each.skiId === ski.id && each.presetVersion === ski.presetVersion,
      ),
    )
    // A ski that was read stands where it was decided to stand: nothing is left to move on it.
    const distances = both
      .filter((ski) => !read.includes(ski))
      .map(({ presetToe: toe, presetHeel: heel }) =>
        notchDistance(toe === null || heel === null ? null : { toe, heel }, fitting.track),
      )
    return {
      notches: distances.reduce<number | null>(
        (sum, each) => (sum === null || each === null ? null : sum + each),
        0,
      ),
      read: read.map((ski) => ski.side),
    }
  }
}

const decider = alias(people, 'decider')

/** A fitting as the bench needs it. */
export async function ticketDetail(
  db: Reader,
  shopId: string,
  fittingId: string,
): Promise<AnswerOf<typeof getTicket>> {
  const fitting = await fittingDetail(db, shopId, fittingId)
  const [shop] = await db.select({ minutes: shops.claimAgesMinutes }).from(shops).where(eq(shops.id, shopId))
  const decided = await db
    .select({
      id: fittingDecisions.id,
      side: skis.side,
      reading: fittingDecisions.reading,
      reason: fittingDecisions.reason,
      by: decider.name,
      at: fittingDecisions.occurredAt,
    })
    .from(fittingDecisions)
    .innerJoin(skis, eq(skis.id, fittingDecisions.skiId))
    .innerJoin(decider, eq(decider.id, fittingDecisions.personId))
    .where(and(eq(fittingDecisions.fittingId, fittingId), isNotNull(fittingDecisions.reading)))
    .orderBy(desc(fittingDecisions.recordedAt), desc(fittingDecisions.id))
  return {
    fitting,
    agesAt: agesAt(new Date(fitting.claimedAt), shop?.minutes ?? 0),
    decided: decided.flatMap(({ reading, at, ...row }) =>
      reading ? [{ ...row, reading, at: at.toISOString() }] : [],
    ),
  }
}
