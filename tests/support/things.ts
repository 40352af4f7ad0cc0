import { randomUUID } from 'node:crypto'
import { eq } from 'drizzle-orm'
import { labelFor } from '#shared/labels/labels'
import type { ItemState } from '#shared/lifecycle/itemStates'
import type { SoleType } from '#shared/compatibility/soleFit'
import type { TrackModel } from '#shared/track/trackModel'
import { demoTrackModels } from '../../server/db/seed/trackModels'
import { windowPicture } from '../../server/db/seed/pictures'
import {
  bindingModelApprovals,
  bindingModels,
  boots,
  labels,
  presetChanges,
  quarantines,
  skiModels,
  skiPairs,
  skis,
  stateChanges,
} from '../../server/db/schema/schema'
import type { TestDatabase } from './database'

type Db = TestDatabase['db']
export type Track = keyof typeof demoTrackModels
export type Side = 'left' | 'right'
type InShop = { shopId: string; siteId: string; personId: string }

export interface TestPair {
  id: string
  code: string
  bindingModelId: string
  track: TrackModel
  skis: Record<Side, { id: string; label: string }>
}

export interface TestBoots {
  id: string
  code: string
  labels: Record<Side, string>
}

/** A binding with one of the four tracks; approved unless asked otherwise. */
export async function addBindingModel(
  db: Db,
  { shopId, personId }: InShop,
  track: Track,
  values: Partial<typeof bindingModels.$inferInsert> & { approved?: boolean } = {},
): Promise<string> {
  const { approved = true, ...others } = values
  const [model] = await db
    .insert(bindingModels)
    .values({
      shopId,
      name: track,
      track: demoTrackModels[track],
      accepts: track === 'pebble-20' ? ['ISO 5355 A', 'ISO 5355 C'] : ['ISO 5355 A', 'ISO 23223'],
      refuses: ['ISO 9523'],
      brakeMm: 85,
      manualDocument: 'Workshop manual (invented)',
      manualEdition: '4',
      manualPage: '12',
      windowNote: 'The pointer stands between the two edges.',
      windowPicture: windowPicture(0.5),
      windowPictureType: 'image/png',
      ...others,
    })
    .returning({ id: bindingModels.id, contentSha256: bindingModels.contentSha256 })
  const { id, contentSha256 } = model!
  if (approved) {
    await db
      .insert(bindingModelApprovals)
      .values({ shopId, bindingModelId: id, contentSha256, personId, occurredAt: new Date() })
  }
  return id
}

export async function addSkiModel(db: Db, shopId: string, name: string, waistMm = 74): Promise<string> {
  const [model] = await db.insert(skiModels).values({ shopId, name, waistMm }).returning({ id: skiModels.id })
  return model!.id
}

/** A ski pair with labels, still in commissioning; presets when given. */
export async function addPair(
  db: Db,
  shop: InShop & { skiModelId: string; bindingModelId: string; number: number },
  { lengthCm = 163, rackPlace = null, preset = null }: PairValues = {},
): Promise<TestPair> {
  const { shopId, siteId, skiModelId, bindingModelId } = shop
  const code = `S${shop.number}`
  const id = randomUUID()
  await db.insert(skiPairs).values({
    id,
    shopId,
    code,
    homeSiteId: siteId,
    siteId,
    rackPlace,
    skiModelId,
    bindingModelId,
    lengthCm,
    season: 2025,
  })
  const pair = {} as TestPair['skis']
  for (const side of ['left', 'right'] as const) {
    const skiId = randomUUID()
    const label = labelFor(code, side)
    await db.insert(skis).values({ id: skiId, shopId, skiPairId: id, side })
    await db.insert(labels).values({ shopId, text: label, itemKind: 'ski_pair', itemId: id, side })
    if (preset) await addPreset(db, shop, skiId, preset)
    pair[side] = { id: skiId, label }
  }
  const [model] = await db.select().from(bindingModels).where(eq(bindingModels.id, bindingModelId))
  return { id, code, bindingModelId, track: model!.track, skis: pair }
}
export interface PairValues {
  lengthCm?: number
  rackPlace?: string | null
  preset?: { toe: number; heel: number; turns?: number } | null
}

/** Somebody read where the units of a new ski stand. */
async function addPreset(
  db: Db,
  { shopId, personId }: InShop,
  skiId: string,
  { toe, heel, turns }: NonNullable<PairValues['preset']>,
) {
  await db.insert(presetChanges).values({
    shopId,
    skiId,
    presetToe: toe,
    presetHeel: heel,
    presetTurns: turns ?? null,
    presetVersion: 1,
    toeCorrection: 0,
    heelCorrection: 0,
    reason: 'read',
    personId,
    occurredAt: new Date(),
  })
}

/** Boots with labels, still in commissioning. */
export async function addBoots(
  db: Db,
  { shopId, siteId, number }: InShop & { number: number },
  { mondo = 265, soleLengthMm = 305, soleType = 'ISO 5355 A', rackPlace = null }: BootsValues = {},
): Promise<TestBoots> {
  const code = `B${number}`
  const id = randomUUID()
  await db.insert(boots).values({
    id,
    shopId,
    code,
    homeSiteId: siteId,
    siteId,
    rackPlace,
    model: 'Tarn 90',
    mondo,
    soleLengthMm,
    soleType,
    season: 2025,
  })
  const texts = { left: labelFor(code, 'left'), right: labelFor(code, 'right') }
  for (const side of ['left', 'right'] as const) {
    await db.insert(labels).values({ shopId, text: texts[side], itemKind: 'boots', itemId: id, side })
  }
  return { id, code, labels: texts }
}
export interface BootsValues {
  mondo?: number
  soleLengthMm?: number
  soleType?: SoleType
  rackPlace?: string | null
}

/** One step of the life cycle, written straight into the history as the server's role may. */
export async function addStateChange(
  db: Db,
  { shopId, siteId, personId }: InShop,
  item: { kind: 'ski_pair' | 'boots'; id: string },
  from: ItemState,
  to: ItemState,
  more: { subjectId?: string; rackPlace?: string; undoesId?: string } = {},
): Promise<string> {
  const [change] = await db
    .insert(stateChanges)
    .values({
      shopId,
      itemKind: item.kind,
      itemId: item.id,
      fromState: from,
      toState: to,
      siteId,
      personId,
      occurredAt: new Date(),
      ...more,
    })
    .returning({ id: stateChanges.id })
  return change!.id
}

/** Holds an item, whatever its state without an open fitting. */
export async function addHold(
  db: Db,
  shop: InShop,
  item: { kind: 'ski_pair' | 'boots'; id: string },
  from: ItemState,
): Promise<string> {
  const [hold] = await db
    .insert(quarantines)
    .values({
      shopId: shop.shopId,
      itemKind: item.kind,
      itemId: item.id,
      reason: 'Fell on hard snow, in doubt',
      ownerId: shop.personId,
      reviewOn: '2030-01-31',
      openedBy: shop.personId,
      openedAt: new Date(),
    })
    .returning({ id: quarantines.id })
  await addStateChange(db, shop, item, from, 'quarantine', { subjectId: hold!.id })
  return hold!.id
}
