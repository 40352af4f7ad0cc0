import { and, asc, desc, eq, inArray, isNull, or } from 'drizzle-orm'
import type { ItemKind } from '#shared/lifecycle/itemStates'
import type { HistoryLine, PresetLine } from '#shared/schemas/items'
import { openFittingStates } from '#shared/lifecycle/fittingStates'
import type { Reader } from '../../deps'
import {
  devices,
  fittings,
  labels,
  people,
  quarantines,
  rentalItems,
  sites,
  skis,
  stateChanges,
} from '../schema/schema'
import { iso, isoOrNull } from './lists'

const newest = 60

/** An item's state changes, newest first, with who and where. */
export async function historyOf(db: Reader, itemId: string): Promise<HistoryLine[]> {
  const rows = await db
    .select({ change: stateChanges, person: people.name, device: devices.name, site: sites.name })
    .from(stateChanges)
    .innerJoin(sites, eq(sites.id, stateChanges.siteId))
    .leftJoin(people, eq(people.id, stateChanges.personId))
    .leftJoin(devices, eq(devices.id, stateChanges.deviceId))
    .where(eq(stateChanges.itemId, itemId))
    .orderBy(desc(stateChanges.itemSeq))
    .limit(newest)
  return rows.map(({ change, person, device, site }) => ({
    id: change.id,
    from: change.fromState as HistoryLine['from'],
    to: change.toState as HistoryLine['to'],
    at: iso(change.occurredAt),
    person,
    device,
    site,
    rackPlace: change.rackPlace,
    reason: change.reason,
  }))
}

export async function labelsOf(db: Reader, itemId: string) {
  const rows = await db
    .select()
    .from(labels)
    .where(eq(labels.itemId, itemId))
    .orderBy(asc(labels.side), desc(labels.since))
  return rows.map(({ text, side, since, until }) => ({
    text,
    side,
    since: iso(since),
    until: isoOrNull(until),
  }))
}

/** Where the units of these pairs stand, by pair id, left before right. */
export async function presetsOf(db: Reader, skiPairIds: string[]): Promise<Map<string, PresetLine[]>> {
  const byPair = new Map<string, PresetLine[]>()
  if (skiPairIds.length === 0) return byPair
  const rows = await db.select().from(skis).where(inArray(skis.skiPairId, skiPairIds)).orderBy(asc(skis.side))
  for (const ski of rows) {
    const line: PresetLine = {
      skiId: ski.id,
      side: ski.side,
      toe: ski.presetToe,
      heel: ski.presetHeel,
      turns: ski.presetTurns,
      version: ski.presetVersion,
      readAt: isoOrNull(ski.presetReadAt),
      toeCorrection: ski.toeCorrection,
      heelCorrection: ski.heelCorrection,
    }
    byPair.set(ski.skiPairId, [...(byPair.get(ski.skiPairId) ?? []), line])
  }
  return byPair
}

export async function fittingsOf(db: Reader, kind: ItemKind, itemId: string) {
  const rows = await db
    .select()
    .from(fittings)
    .where(kind === 'ski_pair' ? eq(fittings.skiPairId, itemId) : eq(fittings.bootsId, itemId))
    .orderBy(desc(fittings.claimedAt))
    .limit(20)
  return rows.map((row) => ({
    id: row.id,
    number: row.number,
    state: row.state,
    value: row.value,
    soleLengthMm: row.soleLengthMm,
    at: iso(row.claimedAt),
    recordId: row.recordId,
  }))
}

/** Sides that are with a renter now. */
export async function sidesOut(db: Reader, itemId: string): Promise<('left' | 'right')[]> {
  const rows = await db
    .select({ side: rentalItems.side })
    .from(rentalItems)
    .where(and(eq(rentalItems.itemId, itemId), isNull(rentalItems.backAt)))
  return rows.map(({ side }) => side).filter((side) => side !== 'both')
}

export async function openHold(db: Reader, itemId: string): Promise<string | null> {
  const [row] = await db
    .select({ id: quarantines.id })
    .from(quarantines)
    .where(and(eq(quarantines.itemId, itemId), isNull(quarantines.releasedAt)))
  return row?.id ?? null
}

/** The open fitting that has an item, with the clerk who took it. */
export async function openFittingOf(db: Reader, itemId: string) {
  const [row] = await db
    .select({
      id: fittings.id,
      number: fittings.number,
      rentalId: fittings.rentalId,
      by: people.name,
      since: fittings.claimedAt,
      state: fittings.state,
    })
    .from(fittings)
    .innerJoin(people, eq(people.id, fittings.claimedBy))
    .where(
      and(
        inArray(fittings.state, [...openFittingStates]),
        or(eq(fittings.skiPairId, itemId), eq(fittings.bootsId, itemId)),
      ),
    )
  return row ? { ...row, since: iso(row.since) } : null
}
