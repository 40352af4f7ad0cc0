import { and, desc, eq, inArray } from 'drizzle-orm'
import type { Reader } from '../../deps'
import { stateChanges } from '../schema/schema'

/** The site at which each item was last put on a rack: its rack place means a place there and nowhere else. */
export async function lastRackedSites(db: Reader, itemIds: string[]): Promise<Map<string, string>> {
  if (itemIds.length === 0) return new Map()
  const rows = await db
    .selectDistinctOn([stateChanges.itemId], { itemId: stateChanges.itemId, siteId: stateChanges.siteId })
    .from(stateChanges)
    .where(and(inArray(stateChanges.itemId, itemIds), eq(stateChanges.toState, 'racked')))
    .orderBy(stateChanges.itemId, desc(stateChanges.itemSeq))
  return new Map(rows.map(({ itemId, siteId }) => [itemId, siteId]))
}
