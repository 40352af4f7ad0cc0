import { and, asc, desc, eq, sql } from 'drizzle-orm'
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
      pairs: sql<number>`(select count(*)::int from ${skiPairs} where ${skiPairs.skiModelId} = ${skiModels.id})`,
    })
    .from(skiModels)
    .where(eq(skiModels.shopId, shopId))
    .orderBy(asc(skiModels.name))
}

const approval = (column: 'person' | 'at') => sql<string | null>`(
  select ${column === 'person' ? sql`${people.name}` : sql`to_json(${bindingModelApprovals.occurredAt}) #>> '{}'`}
  from ${bindingModelApprovals} join ${people} on ${people.id} = ${bindingModelApprovals.personId}
  where ${bindingModelApprovals.bindingModelId} = ${bindingModels.id} and ${bindingModelApprovals.contentSha256} = ${bindingModels.contentSha256}
  order by ${bindingModelApprovals.recordedAt} desc limit 1)`

const joined = (db: Reader) =>
  db
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
      approvedBy: approval('person'),
      approvedAt: approval('at'),
      pairs: sql<number>`(select count(*)::int from ${skiPairs} where ${skiPairs.bindingModelId} = ${bindingModels.id})`,
    })
    .from(bindingModels)

function asModel(row: Awaited<ReturnType<typeof joined>>[number]): BindingModel & { pairs: number } {
  const { blockedAt, ...rest } = row
  return {
    ...rest,
    approvedAt: row.approvedAt === null ? null : isoOrNull(new Date(row.approvedAt)),
    approved: row.approvedBy !== null && blockedAt === null,
  }
}

export async function bindingModelList(db: Reader, shopId: string) {
  const rows = await joined(db).where(eq(bindingModels.shopId, shopId)).orderBy(asc(bindingModels.name))
  return rows.map(asModel)
}

/** A binding model with the approval of its sheet as it now stands. */
export async function bindingModelById(db: Reader, shopId: string, id: string): Promise<BindingModel> {
  const [row] = await joined(db).where(and(eq(bindingModels.shopId, shopId), eq(bindingModels.id, id)))
  if (!row) throw new Problem('items.unknown')
  return asModel(row)
}

/** The picture of what the forward-pressure window must look like. */
export async function windowPicture(db: Reader, shopId: string, id: string) {
  const [row] = await db
    .select({ picture: bindingModels.windowPicture, type: bindingModels.windowPictureType })
    .from(bindingModels)
    .where(and(eq(bindingModels.shopId, shopId), eq(bindingModels.id, id)))
    .orderBy(desc(bindingModels.version))
  return row?.picture && row.type ? { picture: row.picture, type: row.type } : null
}
