import { and, eq } from 'drizzle-orm'
import type {
  approveBindingModel,
  saveBindingModel,
  saveSkiModel,
  setWindowPicture,
} from '#shared/api/models'
import type { BodyOf, IdsOf } from '#shared/api/define'
import { trackModelProblems } from '#shared/track/trackModelProblems'
import { bindingModelApprovals, bindingModels, skiModels, skiPairs } from '../db/schema/schema'
import { isDuplicate, Problem } from '../errors'
import type { PersonActor } from './actor'
import type { CommandContext, Service } from './commands'
import { doubtFittings } from './doubt'
import { changedFields, noteOfficeChange } from './office'
import { imageFromDataUrl } from './pictures'
import { carryPresets } from './presets'

type Does<C> = Service<BodyOf<C>, IdsOf<C>, PersonActor>

type SkiModelValues = Omit<BodyOf<typeof saveSkiModel>, 'id'>

export const saveSkiModelService: Does<typeof saveSkiModel> = async (context, { id, ...values }) => {
  try {
    const skiModelId = id ? await changeSkiModel(context, id, values) : await addSkiModel(context, values)
    return { skiModelId }
  } catch (error) {
    if (isDuplicate(error, 'ski_models_name')) throw new Problem('models.name_taken', { name: values.name })
    throw error
  }
}

async function addSkiModel(context: CommandContext, values: SkiModelValues): Promise<string> {
  const [made] = await context.tx
    .insert(skiModels)
    .values({ ...values, shopId: context.actor.shopId })
    .returning({ id: skiModels.id })
  await noteOfficeChange(context, 'skiModels.save', made!.id, Object.keys(values))
  return made!.id
}

/** Another offset of the mounting mark is another track position for every boot on these skis. */
async function changeSkiModel(context: CommandContext, id: string, values: SkiModelValues): Promise<string> {
  const own = and(eq(skiModels.id, id), eq(skiModels.shopId, context.actor.shopId))
  const [before] = await context.tx.select().from(skiModels).where(own).for('update')
  if (!before) throw new Problem('items.unknown')
  await context.tx.update(skiModels).set(values).where(own)
  await noteOfficeChange(context, 'skiModels.save', id, changedFields(before, values))
  if (before.offsetMm !== values.offsetMm) await doubtPairs(context, skiPairs.skiModelId, id)
  return id
}

/** The model's row, locked, as the editor saw it; `items.changed` when somebody else was faster. */
async function lockModel(context: CommandContext, id: string, version: number | null) {
  const [row] = await context.tx
    .select()
    .from(bindingModels)
    .where(and(eq(bindingModels.id, id), eq(bindingModels.shopId, context.actor.shopId)))
    .for('update')
  if (!row) throw new Problem('items.unknown')
  if (row.version !== version) throw new Problem('items.changed')
  return row
}

/** What these pairs' fittings were computed with has changed: they are void, or are called back. */
async function doubtPairs(
  context: CommandContext,
  of: typeof skiPairs.skiModelId | typeof skiPairs.bindingModelId,
  modelId: string,
) {
  const pairs = await context.tx.select({ id: skiPairs.id }).from(skiPairs).where(eq(of, modelId))
  const reason = of === skiPairs.bindingModelId ? 'binding_model_changed' : 'ski_pair_changed'
  await doubtFittings(context, { skiPairIds: pairs.map((pair) => pair.id) }, reason)
}

/** Doubts the fittings of a binding model whose sheet is no longer what it was. */
async function doubtSheet(context: CommandContext, bindingModelId: string, before: string) {
  const [now] = await context.tx
    .select({ sha: bindingModels.contentSha256 })
    .from(bindingModels)
    .where(eq(bindingModels.id, bindingModelId))
  if (now?.sha !== before) await doubtPairs(context, skiPairs.bindingModelId, bindingModelId)
}

export const saveBindingModelService: Does<typeof saveBindingModel> = async (
  context,
  { id, version, ...values },
) => {
  const { tx, actor } = context
  const wrong = trackModelProblems(values.track)
  if (wrong.length > 0)
    throw new Problem('models.geometry', { problems: wrong.map(({ problem }) => problem) })
  try {
    if (!id) {
      const [made] = await tx
        .insert(bindingModels)
        .values({ ...values, shopId: actor.shopId })
        .returning({ id: bindingModels.id })
      await noteOfficeChange(context, 'bindingModels.save', made!.id, Object.keys(values))
      return { bindingModelId: made!.id }
    }
    const before = await lockModel(context, id, version)
    await tx
      .update(bindingModels)
      .set({ ...values, version: before.version + 1 })
      .where(eq(bindingModels.id, id))
    await noteOfficeChange(context, 'bindingModels.save', id, changedFields(before, values))
    await doubtSheet(context, id, before.contentSha256)
    await carryPresets(context, id, before.track, values.track)
    return { bindingModelId: id }
  } catch (error) {
    if (isDuplicate(error, 'binding_models_name'))
      throw new Problem('models.name_taken', { name: values.name })
    throw error
  }
}

export const setWindowPictureService: Does<typeof setWindowPicture> = async (
  context,
  { id, version, picture },
) => {
  const before = await lockModel(context, id, version)
  const { bytes, type } = imageFromDataUrl(picture)
  await context.tx
    .update(bindingModels)
    .set({ windowPicture: bytes, windowPictureType: type, version: before.version + 1 })
    .where(eq(bindingModels.id, id))
  await noteOfficeChange(context, 'bindingModels.setWindowPicture', id, ['windowPicture'])
  await doubtSheet(context, id, before.contentSha256)
  return { bindingModelId: id }
}

/** A head technician signs the sheet as it stands; what is missing of it is named. */
export const approveBindingModelService: Does<typeof approveBindingModel> = async (
  context,
  { id, version },
) => {
  const model = await lockModel(context, id, version)
  const missing = (
    ['manualDocument', 'manualEdition', 'manualPage', 'windowNote', 'windowPicture'] as const
  ).filter((field) => !model[field])
  if (missing.length > 0) throw new Problem('models.sheet_unfinished', { missing })
  const [row] = await context.tx
    .insert(bindingModelApprovals)
    .values({
      shopId: context.actor.shopId,
      bindingModelId: id,
      contentSha256: model.contentSha256,
      personId: context.actor.personId,
      occurredAt: context.occurredAt,
    })
    .returning({ id: bindingModelApprovals.id })
  return { approvalId: row!.id }
}
