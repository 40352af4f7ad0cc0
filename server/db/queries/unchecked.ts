import { and, desc, eq, isNotNull } from 'drizzle-orm'
import type { AnswerOf } from '#shared/api/define'
import type { getClearing, UncheckedItem } from '#shared/api/inspections'
import type { ItemKind, ItemState } from '#shared/lifecycle/itemStates'
import type { Reader } from '../../deps'
import { Problem } from '../../errors'
import {
  bindingModels,
  boots,
  inspections,
  people,
  rentals,
  returns,
  sites,
  skiModels,
  skiPairs,
} from '../schema/schema'
import { presetsOf } from './items'
import { iso } from './lists'
import { lastRackedSites } from './rackPlaces'
import { sidesOutOf } from './returns'

interface ItemRow extends Omit<UncheckedItem, 'since' | 'missing'> {
  since: Date
  state: ItemState
}

async function pairRows(db: Reader, where: ReturnType<typeof and>): Promise<ItemRow[]> {
  const rows = await db
    .select({
      itemId: skiPairs.id,
      code: skiPairs.code,
      size: skiPairs.lengthCm,
      model: skiModels.name,
      state: skiPairs.state,
      since: skiPairs.stateSince,
      siteId: skiPairs.siteId,
      rackPlace: skiPairs.rackPlace,
    })
    .from(skiPairs)
    .innerJoin(skiModels, eq(skiModels.id, skiPairs.skiModelId))
    .where(where)
  return rows.map((row) => ({ ...row, itemKind: 'ski_pair', state: row.state as ItemState }))
}

async function bootRows(db: Reader, where: ReturnType<typeof and>): Promise<ItemRow[]> {
  const rows = await db
    .select({
      itemId: boots.id,
      code: boots.code,
      size: boots.mondo,
      model: boots.model,
      state: boots.state,
      since: boots.stateSince,
      siteId: boots.siteId,
      rackPlace: boots.rackPlace,
    })
    .from(boots)
    .where(where)
  return rows.map((row) => ({ ...row, itemKind: 'boots', state: row.state as ItemState }))
}

async function withPlaces<Row extends ItemRow>(db: Reader, rows: Row[]) {
  const ids = rows.map((row) => row.itemId)
  const racked = await lastRackedSites(db, ids)
  const missing = await sidesOutOf(db, ids)
  return rows.map((row) => ({
    ...row,
    since: iso(row.since),
    rackPlace: racked.get(row.itemId) === row.siteId ? row.rackPlace : null,
    missing: row.state === 'out' ? [] : (missing.get(row.itemId) ?? []),
  }))
}

/** What is unchecked at a site or in the whole shop, the longest waiting first. */
export async function uncheckedItems(
  db: Reader,
  shopId: string,
  siteId: string | null,
): Promise<UncheckedItem[]> {
  const here = (table: typeof skiPairs | typeof boots) =>
    and(eq(table.shopId, shopId), eq(table.state, 'unchecked'), siteId ? eq(table.siteId, siteId) : undefined)
  const rows = [...(await pairRows(db, here(skiPairs))), ...(await bootRows(db, here(boots)))]
  return withPlaces(
    db,
    rows.sort((a, b) => a.since.getTime() - b.since.getTime()),
  )
}

/** One item with everything that its clearing screen shows. */
export async function clearingOf(
  db: Reader,
  shopId: string,
  kind: ItemKind,
  itemId: string,
): Promise<AnswerOf<typeof getClearing>> {
  const table = kind === 'ski_pair' ? skiPairs : boots
  const one = and(eq(table.shopId, shopId), eq(table.id, itemId))
  const [item] = await withPlaces(db, kind === 'ski_pair' ? await pairRows(db, one) : await bootRows(db, one))
  if (!item) throw new Problem('items.unknown')
  const [site] = await db.select({ name: sites.name }).from(sites).where(eq(sites.id, item.siteId))
  return {
    ...item,
    site: site!.name,
    rentalNumber: await cameBackFrom(db, itemId),
    track: kind === 'ski_pair' ? await trackOf(db, itemId) : null,
    presets: (await presetsOf(db, [itemId])).get(itemId) ?? [],
    lastInspection: await lastInspection(db, itemId),
  }
}

async function cameBackFrom(db: Reader, itemId: string): Promise<number | null> {
  const [row] = await db
    .select({ number: rentals.number })
    .from(returns)
    .innerJoin(rentals, eq(rentals.id, returns.rentalId))
    .where(and(eq(returns.itemId, itemId), isNotNull(returns.rentalId)))
    .orderBy(desc(returns.recordedAt))
    .limit(1)
  return row?.number ?? null
}

async function trackOf(db: Reader, skiPairId: string) {
  const [row] = await db
    .select({ track: bindingModels.track })
    .from(skiPairs)
    .innerJoin(bindingModels, eq(bindingModels.id, skiPairs.bindingModelId))
    .where(eq(skiPairs.id, skiPairId))
  return row?.track ?? null
}

async function lastInspection(db: Reader, itemId: string) {
  const [row] = await db
    .select({ inspection: inspections, by: people.name })
    .from(inspections)
    .innerJoin(people, eq(people.id, inspections.personId))
    .where(eq(inspections.itemId, itemId))
    .orderBy(desc(inspections.recordedAt))
    .limit(1)
  if (!row) return null
  const { verdict, note, checks, occurredAt } = row.inspection
  return { at: iso(occurredAt), by: row.by, verdict, note, checks }
}
