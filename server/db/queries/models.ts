import { and, asc, count, desc, eq, sql } from 'drizzle-orm'
import type { BindingModel, SkiModel } from '#shared/api/models'
import { Problem } from '../../errors'
import type { Reader } from '../../deps'
import { bindingModelApprovals, bindingModels, people, skiModels, skiPairs } from '../schema/schema'
import { isoOrNull } from './lists'

export async function skiModelList(db: Reader, shopId: string): Promise<(SkiModel & { pairs: number })[]> {
  return db
    .select({
      id: skiModels.id,
      name: skiModels.name,
      waistMm: skiModels.waistMm,
      offsetMm: skiModels.offsetMm,
      junior: skiModels.junior,
      pairs: count(skiPairs.id),
    })
    .from(skiModels)
    .leftJoin(skiPairs, eq(skiPairs.skiModelId, skiModels.id))
    .where(eq(skiModels.shopId, shopId))
    .groupBy(skiModels.id)
    .orderBy(asc(skiModels.name))
}

/** Binding models with the latest approval of each sheet as it now stands, and how many pairs carry each. */
function joined(db: Reader, shopId: string) {
  const carried = db
    .select({ modelId: skiPairs.bindingModelId, pairs: count().as('pairs') })
    .from(skiPairs)
    .where(eq(skiPairs.shopId, shopId))
    .groupBy(skiPairs.bindingModelId)
    .as('carried')
  const signed = db
    .selectDistinctOn([bindingModelApprovals.bindingModelId, bindingModelApprovals.contentSha256], {
      modelId: bindingModelApprovals.bindingModelId,
      contentSha256: bindingModelApprovals.contentSha256,
      at: bindingModelApprovals.occurredAt,
      by: people.name,
    })
    .from(bindingModelApprovals)
    .innerJoin(people, eq(people.id, bindingModelApprovals.personId))
    .where(eq(bindingModelApprovals.shopId, shopId))
    .orderBy(
      bindingModelApprovals.bindingModelId,
      bindingModelApprovals.contentSha256,
      desc(bindingModelApprovals.recordedAt),
    )
    .as('signed')
  return db
    .select({
      id: bindingModels.id,
      name: bindingModels.name,
      track: bindingModels.track,
      accepts: bindingModels.accepts,
      refuses: bindingModels.refuses,
      brakeMm: bindingModels.brakeMm,
      manualDocument: bindingModels.manualDocument,
      manualEdition: bindingModels.manualEdition,
      manualPage: bindingModels.manualPage,
      windowNote: bindingModels.windowNote,
      hasWindowPicture: sql<boolean>`${bindingModels.windowPicture} is not null`,
      version: bindingModels.version,
      blockedReason: bindingModels.blockedReason,
      blockedAt: bindingModels.blockedAt,
      approvedBy: signed.by,
      approvedAt: signed.at,
      pairs: carried.pairs,
    })
    .from(bindingModels)
    .leftJoin(
      signed,
      and(eq(signed.modelId, bindingModels.id), eq(signed.contentSha256, bindingModels.contentSha256)),
    )
    .leftJoin(carried, eq(carried.modelId, bindingModels.id))
}

function asModel(row: Awaited<ReturnType<typeof joined>>[number]): BindingModel & { pairs: number } {
  const { blockedAt, ...rest } = row
  return {
    ...rest,
    approvedAt: isoOrNull(row.approvedAt),
    approved: row.approvedBy !== null && blockedAt === null,
    pairs: row.pairs ?? 0,
  }
}

export async function bindingModelList(db: Reader, shopId: string) {
  const rows = await joined(db, shopId)
    .where(eq(bindingModels.shopId, shopId))
    .orderBy(asc(bindingModels.name))
  return rows.map(asModel)
}

/** A binding model with the approval of its sheet as it now stands. */
export async function bindingModelById(
  db: Reader,
  shopId: string,
  id: string,
): Promise<BindingModel & { pairs: number }> {
  const [row] = await joined(db, shopId).where(
    and(eq(bindingModels.shopId, shopId), eq(bindingModels.id, id)),
  )
  if (!row) throw new Problem('items.unknown')
  return asModel(row)
}

/** The picture of what the forward-pressure window must look like. */
export async function windowPicture(db: Reader, shopId: string, id: string) {
  const [row] = await db
    .select({ picture: bindingModels.windowPicture, type: bindingModels.windowPictureType })
    .from(bindingModels)
    .where(and(eq(bindingModels.shopId, shopId), eq(bindingModels.id, id)))
  return row?.picture && row.type ? { picture: row.picture, type: row.type } : null
}
