import { and, eq, inArray, isNull, notInArray, sql } from 'drizzle-orm'
import type { BoardEvent, BoardFitting, BoardItem, BoardRental, BoardSnapshot } from '#shared/schemas/board'
import { openFittingStates } from '#shared/lifecycle/fittingStates'
import {
  boots,
  callBacks,
  fittings,
  rentalItems,
  rentals,
  renters,
  shopSequences,
  skiPairs,
} from '../schema/schema'
import type { Reader } from '../../deps'
import { iso, isoOrNull } from './lists'

/**
 * Sides of an item that are still out while the item itself came back. The tables are named by hand: in a select
 * from one table Drizzle leaves the names off, and `id` would be the inner table's.
 */
const missing = (table: typeof skiPairs | typeof boots) =>
  sql<('left' | 'right')[]>`case when ${table.state} in ('out', 'racked') then '{}'::text[] else coalesce(
    (select array_agg(o.side order by o.side) from ${rentalItems} o
     where o.item_id = ${table}.id and o.back_at is null), '{}'::text[]) end`

async function itemRows(
  db: Reader,
  kind: 'ski_pair' | 'boots',
  shopId: string,
  ids: string[] | 'all',
): Promise<BoardItem[]> {
  if (ids !== 'all' && ids.length === 0) return []
  const table = kind === 'ski_pair' ? skiPairs : boots
  const rows = await db
    .select({
      id: table.id,
      code: table.code,
      state: table.state,
      since: table.stateSince,
      siteId: table.siteId,
      rackPlace: table.rackPlace,
      missing: missing(table),
    })
    .from(table)
    .where(
      and(
        eq(table.shopId, shopId),
        ids === 'all' ? notInArray(table.state, ['retired', 'sold']) : inArray(table.id, ids),
      ),
    )
  return rows.map((row) => ({ ...row, kind, state: row.state as BoardItem['state'], since: iso(row.since) }))
}

async function fittingRows(db: Reader, shopId: string, ids: string[] | 'open'): Promise<BoardFitting[]> {
  if (ids !== 'open' && ids.length === 0) return []
  const rows = await db
    .select({
      id: fittings.id,
      number: fittings.number,
      rentalId: fittings.rentalId,
      skiPairId: fittings.skiPairId,
      bootsId: fittings.bootsId,
      siteId: fittings.siteId,
      state: fittings.state,
      promisedAt: fittings.promisedAt,
      claimedAt: fittings.claimedAt,
      claimedBy: fittings.claimedBy,
      heldBy: fittings.heldBy,
      heldSince: fittings.heldSince,
      preparedAt: fittings.preparedAt,
    })
    .from(fittings)
    .where(
      and(
        eq(fittings.shopId, shopId),
        ids === 'open' ? inArray(fittings.state, [...openFittingStates]) : inArray(fittings.id, ids),
      ),
    )
  return rows.map((row) => ({
    ...row,
    state: row.state as BoardFitting['state'],
    promisedAt: iso(row.promisedAt),
    claimedAt: iso(row.claimedAt),
    heldSince: isoOrNull(row.heldSince),
    preparedAt: isoOrNull(row.preparedAt),
  }))
}

async function rentalRows(db: Reader, shopId: string, ids: string[] | 'live'): Promise<BoardRental[]> {
  if (ids !== 'live' && ids.length === 0) return []
  const rows = await db
    .select({
      id: rentals.id,
      number: rentals.number,
      state: rentals.state,
      siteId: rentals.siteId,
      arrivedAt: rentals.arrivedAt,
      promisedAt: rentals.promisedAt,
      endsOn: rentals.endsOn,
      out: sql<number>`(select count(*)::int from ${rentalItems} o
        where o.rental_id = ${rentals}.id and o.back_at is null)`,
    })
    .from(rentals)
    .where(
      and(
        eq(rentals.shopId, shopId),
        ids === 'live' ? inArray(rentals.state, ['waiting', 'open', 'out']) : inArray(rentals.id, ids),
      ),
    )
  return rows.map((row) => ({
    ...row,
    state: row.state as BoardRental['state'],
    arrivedAt: iso(row.arrivedAt),
    promisedAt: iso(row.promisedAt),
  }))
}

async function openCallBacks(db: Reader, shopId: string): Promise<number> {
  return db.$count(callBacks, and(eq(callBacks.shopId, shopId), isNull(callBacks.closedAt)))
}

/** The board's rows of what a command touched. */
export async function boardRows(
  db: Reader,
  shopId: string,
  touched: {
    skiPairIds: string[]
    bootsIds: string[]
    fittingIds: string[]
    rentalIds: string[]
    callBacks: boolean
  },
): Promise<Omit<BoardEvent, 'seq' | 'kind' | 'at'>> {
  const pairs = await itemRows(db, 'ski_pair', shopId, touched.skiPairIds)
  const bootRows = await itemRows(db, 'boots', shopId, touched.bootsIds)
  return {
    items: [...pairs, ...bootRows],
    fittings: await fittingRows(db, shopId, touched.fittingIds),
    rentals: await rentalRows(db, shopId, touched.rentalIds),
    ...(touched.callBacks ? { callBacks: await openCallBacks(db, shopId) } : {}),
  }
}

/** The head of the shop's sequence. */
export async function headSequence(db: Reader, shopId: string): Promise<number> {
  const [row] = await db
    .select({ seq: shopSequences.seq })
    .from(shopSequences)
    .where(eq(shopSequences.shopId, shopId))
  return row?.seq ?? 0
}

/** The whole board as it stands, in one consistent view (repeatable read). */
export async function boardSnapshot(
  db: Extract<Reader, { $client: unknown }>,
  shopId: string,
  now: Date,
): Promise<BoardSnapshot> {
  return db.transaction(
    async (tx) => ({
      seq: await headSequence(tx, shopId),
      asOf: now.toISOString(),
      items: [
        ...(await itemRows(tx, 'ski_pair', shopId, 'all')),
        ...(await itemRows(tx, 'boots', shopId, 'all')),
      ],
      fittings: await fittingRows(tx, shopId, 'open'),
      rentals: await rentalRows(tx, shopId, 'live'),
      callBacks: await openCallBacks(tx, shopId),
    }),
    { isolationLevel: 'repeatable read', accessMode: 'read only' },
  )
}

/** First name and initial of everybody whose rental is on the board. */
export async function boardNames(db: Reader, shopId: string): Promise<{ rentalId: string; name: string }[]> {
  return db
    .select({
      rentalId: rentals.id,
      name: sql<string>`trim(${renters.firstName} || ' ' || coalesce(nullif(left(${renters.lastName}, 1), '') || '.', ''))`,
    })
    .from(rentals)
    .innerJoin(renters, eq(renters.id, rentals.renterId))
    .where(and(eq(rentals.shopId, shopId), inArray(rentals.state, ['waiting', 'open', 'out'])))
}
