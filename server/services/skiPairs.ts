import { and, eq, sql } from 'drizzle-orm'
import type { changeSkiPair, createSkiPair, readPreset } from '#shared/api/skiPairs'
import type { BodyOf, IdsOf } from '#shared/api/define'
import { labelFor } from '#shared/labels/labels'
import { bindingModels, labels, skiModels, skiPairs, skis } from '../db/schema/schema'
import type { Tx } from '../deps'
import { isDuplicate, Problem } from '../errors'
import type { PersonActor } from './actor'
import type { Service } from './commands'
import { doubtFittings } from './doubt'
import { changedFields, noteOfficeChange } from './office'
import { lockOpenFittingOf } from './openFittings'
import { forgetPresets, skiWithTrack, writePreset } from './presets'
import { requireSite } from './shops'
import { lockItem } from './stateChanges'

type Does<C> = Service<BodyOf<C>, IdsOf<C>, PersonActor>

type OwnRefs = Pick<BodyOf<typeof createSkiPair>, 'skiModelId' | 'bindingModelId' | 'homeSiteId'>

/** Models and site must be of this shop. */
async function requireOwn(tx: Tx, shopId: string, { skiModelId, bindingModelId, homeSiteId }: OwnRefs) {
  const own = [
    await tx.$count(skiModels, and(eq(skiModels.id, skiModelId), eq(skiModels.shopId, shopId))),
    await tx.$count(
      bindingModels,
      and(eq(bindingModels.id, bindingModelId), eq(bindingModels.shopId, shopId)),
    ),
  ]
  if (own.some((count) => count === 0)) throw new Problem('items.unknown')
  await requireSite(tx, shopId, homeSiteId)
}

export const createSkiPairService: Does<typeof createSkiPair> = async (context, body) => {
  const { tx, actor } = context
  const { shopId } = actor
  await requireOwn(tx, shopId, body)
  try {
    const [pair] = await tx
      .insert(skiPairs)
      .values({
        ...body,
        rackPlace: body.rackPlace || null,
        shopId,
        siteId: body.homeSiteId,
        stateSince: context.occurredAt,
      })
      .returning({ id: skiPairs.id })
    const skiPairId = pair!.id
    for (const side of ['left', 'right'] as const) {
      await tx.insert(skis).values({ shopId, skiPairId, side })
      await tx
        .insert(labels)
        .values({ shopId, text: labelFor(body.code, side), itemKind: 'ski_pair', itemId: skiPairId, side })
    }
    await noteOfficeChange(context, 'skiPairs.create', skiPairId, Object.keys(body))
    context.touchItem('ski_pair', skiPairId)
    return { skiPairId }
  } catch (error) {
    if (isDuplicate(error, 'ski_pairs_code') || isDuplicate(error, 'labels_text')) {
      throw new Problem('items.code_taken', { code: body.code })
    }
    throw error
  }
}

export const changeSkiPairService: Does<typeof changeSkiPair> = async (
  context,
  { id, version, ...values },
) => {
  const { tx, actor } = context
  await lockOpenFittingOf(context, { kind: 'ski_pair', id })
  const [before] = await tx
    .select()
    .from(skiPairs)
    .where(and(eq(skiPairs.id, id), eq(skiPairs.shopId, actor.shopId)))
    .for('update')
  if (!before) throw new Problem('items.unknown')
  if (before.state === 'quarantine') throw new Problem('items.held', { code: before.code })
  if (before.version !== version) throw new Problem('items.changed', { code: before.code })
  await requireOwn(tx, actor.shopId, values)
  const otherBinding = values.bindingModelId !== before.bindingModelId
  if (otherBinding) await doubtFittings(context, { skiPairId: id }, 'binding_model_changed')
  // Another model may have its mounting mark elsewhere.
  if (values.skiModelId !== before.skiModelId)
    await doubtFittings(context, { skiPairId: id }, 'ski_pair_changed')
  const now = { ...values, rackPlace: values.rackPlace || null }
  await tx
    .update(skiPairs)
    .set({ ...now, version: sql`${skiPairs.version} + 1` })
    .where(eq(skiPairs.id, id))
  if (otherBinding) await forgetPresets(context, id)
  await noteOfficeChange(context, 'skiPairs.change', id, changedFields(before, now))
  context.touchItem('ski_pair', id)
  return { skiPairId: id }
}

/**
 * Where one ski's units stand, read outside of any ticket. A preset is part of what was signed: another one makes a
 * fitting that is prepared void, and one that is out a call-back; the same one leaves it as it is.
 */
export const readPresetService: Does<typeof readPreset> = async (context, { skiId, version, ...stands }) => {
  const found = await skiWithTrack(context, skiId, version)
  const { ski, skiPairId } = found
  const fitting = await lockOpenFittingOf(context, { kind: 'ski_pair', id: skiPairId })
  const pair = await lockItem(context.tx, context.actor.shopId, { kind: 'ski_pair', id: skiPairId })
  if (pair.state === 'quarantine') throw new Problem('items.held', { code: pair.code })
  const same =
    ski.presetToe === stands.toe && ski.presetHeel === stands.heel && ski.presetTurns === stands.turns
  const signed = fitting?.state === 'prepared' || pair.state === 'out'
  if (signed && same) return { skiId }
  if (signed) await doubtFittings(context, { skiPairId }, 'preset_changed')
  await writePreset(context, found, stands, 'read')
  context.touchItem('ski_pair', skiPairId)
  return { skiId }
}
