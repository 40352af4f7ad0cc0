import { and, asc, desc, eq, inArray, isNotNull, isNull } from 'drizzle-orm'
import { alias } from 'drizzle-orm/pg-core'
import type { CallBackRow } from '#shared/api/callBacks'
import type { Reader } from '../../deps'
import {
  boots,
  callBacks,
  callBackSteps,
  fittings,
  people,
  rentalItems,
  rentals,
  renters,
  skiPairs,
} from '../schema/schema'
import { iso, isoOrNull } from './lists'

const opener = alias(people, 'opener')

/** Open call-backs, the oldest first; or the closed ones, the latest first. */
export async function callBackRows(
  db: Reader,
  shopId: string,
  state: 'open' | 'closed',
): Promise<CallBackRow[]> {
  const rows = await db
    .select({
      entry: callBacks,
      openedBy: opener.name,
      fittingNumber: fittings.number,
      rental: { id: rentals.id, number: rentals.number, endsOn: rentals.endsOn },
      renter: {
        firstName: renters.firstName,
        lastName: renters.lastName,
        phone: renters.phone,
        guardianName: renters.guardianName,
        guardianPhone: renters.guardianPhone,
      },
    })
    .from(callBacks)
    .innerJoin(fittings, eq(fittings.id, callBacks.fittingId))
    .innerJoin(rentals, eq(rentals.id, callBacks.rentalId))
    .innerJoin(renters, eq(renters.id, rentals.renterId))
    .leftJoin(opener, eq(opener.id, callBacks.openedBy))
    .where(
      and(
        eq(callBacks.shopId, shopId),
        state === 'open' ? isNull(callBacks.closedAt) : isNotNull(callBacks.closedAt),
      ),
    )
    .orderBy(state === 'open' ? asc(callBacks.openedAt) : desc(callBacks.closedAt))
    .limit(200)
  const steps = await stepsOf(
    db,
    rows.map(({ entry }) => entry.id),
  )
  const out = await stillOut(
    db,
    rows.map(({ rental }) => rental.id),
  )
  return rows.map(({ entry, ...row }) => ({
    ...row,
    id: entry.id,
    cause: entry.cause,
    detail: entry.detail,
    openedAt: iso(entry.openedAt),
    closedAt: isoOrNull(entry.closedAt),
    fittingId: entry.fittingId,
    recordId: entry.recordId,
    steps: steps.filter((step) => step.callBackId === entry.id).map(({ callBackId: _, ...step }) => step),
    out: out.filter((part) => part.rentalId === row.rental.id).map(({ rentalId: _, ...part }) => part),
  }))
}

async function stepsOf(db: Reader, callBackIds: string[]) {
  if (callBackIds.length === 0) return []
  const rows = await db
    .select({ step: callBackSteps, by: people.name })
    .from(callBackSteps)
    .innerJoin(people, eq(people.id, callBackSteps.personId))
    .where(inArray(callBackSteps.callBackId, callBackIds))
    .orderBy(asc(callBackSteps.recordedAt), asc(callBackSteps.id))
  return rows.map(({ step, by }) => ({
    id: step.id,
    callBackId: step.callBackId,
    step: step.step,
    note: step.note,
    by,
    at: iso(step.occurredAt),
  }))
}

/** What these rentals have out now. */
async function stillOut(db: Reader, rentalIds: string[]) {
  if (rentalIds.length === 0) return []
  const rows = await db
    .select({
      rentalId: rentalItems.rentalId,
      pair: skiPairs.code,
      boots: boots.code,
      side: rentalItems.side,
      since: rentalItems.outAt,
    })
    .from(rentalItems)
    .leftJoin(skiPairs, and(eq(rentalItems.itemKind, 'ski_pair'), eq(skiPairs.id, rentalItems.itemId)))
    .leftJoin(boots, and(eq(rentalItems.itemKind, 'boots'), eq(boots.id, rentalItems.itemId)))
    .where(and(inArray(rentalItems.rentalId, rentalIds), isNull(rentalItems.backAt)))
    .orderBy(desc(rentalItems.itemKind), asc(rentalItems.side))
  return rows.map(({ pair, boots: bootsCode, since, ...row }) => ({
    ...row,
    code: pair ?? bootsCode,
    since: iso(since),
  }))
}
