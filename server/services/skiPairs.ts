import { and, eq } from 'drizzle-orm'
import type { changeSkiPair, createSkiPair, readPreset } from '#shared/api/skiPairs'
import type { BodyOf, IdsOf } from '#shared/api/define'
import { labelFor } from '#shared/labels/labels'
import { malformedPreset } from '#shared/track/trackPlan'
import { bindingModels, labels, presetChanges, sites, skiModels, skiPairs, skis } from '../db/schema/schema'
import type { Tx } from '../deps'
import { isDuplicate, Problem } from '../errors'
import type { PersonActor } from './actor'
import type { CommandContext, Service } from './commands'
import { doubtFittings } from './doubt'
import { changedFields, noteOfficeChange } from './office'

type Does<C> = Service<BodyOf<C>, IdsOf<C>, PersonActor>

/** Models and site must be of this shop. */
async function requireOwn(
  tx: Tx,
  shopId: string,
  { skiModelId, bindingModelId, homeSiteId }: BodyOf<typeof createSkiPair>,
) {
  const own = await Promise.all([
    tx.$count(skiModels, and(eq(skiModels.id, skiModelId), eq(skiModels.shopId, shopId))),
    tx.$count(bindingModels, and(eq(bindingModels.id, bindingModelId), eq(bindingModels.shopId, shopId))),
    tx.$count(sites, and(eq(sites.id, homeSiteId), eq(sites.shopId, shopId))),
  ])
  if (own.some((count) => count === 0)) throw new Problem('items.unknown')
}

export const createSkiPairService: Does<typeof createSkiPair> = async (context, body) => {
  const { tx, actor } = context
  const { shopId } = actor
  await requireOwn(tx, shopId, body)
  try {
    const [pair] = await tx
      .insert(skiPairs)
      .values({ ...body, shopId, siteId: body.homeSiteId, stateSince: context.occurredAt })
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
  const [before] = await tx
    .select()
    .from(skiPairs)
    .where(and(eq(skiPairs.id, id), eq(skiPairs.shopId, actor.shopId)))
    .for('update')
  if (!before) throw new Problem('items.unknown')
  if (before.version !== version) throw new Problem('items.changed')
  await requireOwn(tx, actor.shopId, { ...values, code: before.code })
  await tx
    .update(skiPairs)
    .set({ ...values, version: version + 1 })
    .where(eq(skiPairs.id, id))
  await noteOfficeChange(context, 'skiPairs.change', id, changedFields(before, values))
  if (values.bindingModelId !== before.bindingModelId) {
    await doubtFittings(context, { skiPairId: id }, 'binding_model_changed')
  }
  context.touchItem('ski_pair', id)
  return { skiPairId: id }
}

/** The ski with its track, as the reader saw it; `items.changed` when its preset was changed meanwhile. */
export async function skiWithTrack(context: CommandContext, skiId: string, version: number) {
  const [found] = await context.tx
    .select({ ski: skis, track: bindingModels.track, skiPairId: skiPairs.id })
    .from(skis)
    .innerJoin(skiPairs, eq(skiPairs.id, skis.skiPairId))
    .innerJoin(bindingModels, eq(bindingModels.id, skiPairs.bindingModelId))
    .where(and(eq(skis.id, skiId), eq(skis.shopId, context.actor.shopId)))
  if (!found) throw new Problem('items.unknown')
  if (found.ski.presetVersion !== version) throw new Problem('items.changed')
  return found
}

/** Writes where a ski's units stand; the database projects it onto the ski. */
export async function writePreset(
  context: CommandContext<PersonActor>,
  { ski, track }: Pick<Awaited<ReturnType<typeof skiWithTrack>>, 'ski' | 'track'>,
  stands: { toe: number; heel: number; turns: number | null },
  reason: 'read' | 'read_back' | 'stood_elsewhere',
  fittingId?: string,
): Promise<number> {
  const preset = track.fineScrew ? stands : { toe: stands.toe, heel: stands.heel }
  if (malformedPreset(track, preset)) throw new Problem('request.malformed')
  const presetVersion = ski.presetVersion + 1
  await context.tx.insert(presetChanges).values({
    shopId: context.actor.shopId,
    skiId: ski.id,
    presetToe: stands.toe,
    presetHeel: stands.heel,
    presetTurns: track.fineScrew ? stands.turns : null,
    presetVersion,
    toeCorrection: ski.toeCorrection,
    heelCorrection: ski.heelCorrection,
    reason,
    fittingId,
    personId: context.actor.personId,
    deviceId: context.actor.deviceId,
    occurredAt: context.occurredAt,
  })
  return presetVersion
}

export const readPresetService: Does<typeof readPreset> = async (context, { skiId, version, ...stands }) => {
  const found = await skiWithTrack(context, skiId, version)
  await writePreset(context, found, stands, 'read')
  // The preset of a prepared pair is part of what was signed.
  await doubtPrepared(context, found.skiPairId)
  context.touchItem('ski_pair', found.skiPairId)
  return { skiId }
}

async function doubtPrepared(context: CommandContext, skiPairId: string) {
  const [pair] = await context.tx
    .select({ state: skiPairs.state })
    .from(skiPairs)
    .where(eq(skiPairs.id, skiPairId))
  if (pair?.state === 'prepared' || pair?.state === 'out')
    await doubtFittings(context, { skiPairId }, 'preset_changed')
}
