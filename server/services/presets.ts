import { and, eq, isNotNull } from 'drizzle-orm'
import { markOf, notchOfMark } from '#shared/track/marks'
import type { TrackModel } from '#shared/track/trackModel'
import { malformedPreset, type Preset } from '#shared/track/trackPlan'
import { bindingModels, presetChanges, skiPairs, skis } from '../db/schema/schema'
import { Problem } from '../errors'
import { deviceIdOf, personIdOf } from './actor'
import type { CommandContext } from './commands'

type Ski = typeof skis.$inferSelect
type Stands = { toe: number | null; heel: number | null; turns: number | null }
type Corrections = { toeCorrection: number; heelCorrection: number }

/** Why a preset changed; `marks_changed` and `binding_changed` are the office's, the others somebody's reading. */
export type PresetReason = 'read' | 'read_back' | 'stood_elsewhere' | 'binding_changed' | 'marks_changed'

/** The ski with its track, as the reader saw it; `items.changed` when its preset was changed meanwhile. */
export async function skiWithTrack(context: CommandContext, skiId: string, version: number) {
  const [found] = await context.tx
    .select({ ski: skis, track: bindingModels.track, skiPairId: skiPairs.id, code: skiPairs.code })
    .from(skis)
    .innerJoin(skiPairs, eq(skiPairs.id, skis.skiPairId))
    .innerJoin(bindingModels, eq(bindingModels.id, skiPairs.bindingModelId))
    .where(and(eq(skis.id, skiId), eq(skis.shopId, context.actor.shopId)))
  if (!found) throw new Problem('items.unknown')
  if (found.ski.presetVersion !== version) throw new Problem('items.changed')
  return found
}

/** Adds a change of where a ski's units stand; the database projects it and refuses one that came second. */
async function addPresetChange(
  context: CommandContext,
  ski: Ski,
  stands: Stands,
  reason: PresetReason,
  { toeCorrection, heelCorrection }: Corrections = ski,
  fittingId?: string,
): Promise<number> {
  const presetVersion = ski.presetVersion + 1
  await context.tx.insert(presetChanges).values({
    shopId: context.actor.shopId,
    skiId: ski.id,
    presetToe: stands.toe,
    presetHeel: stands.heel,
    presetTurns: stands.turns,
    presetVersion,
    toeCorrection,
    heelCorrection,
    reason,
    fittingId,
    personId: personIdOf(context.actor),
    deviceId: deviceIdOf(context.actor),
    occurredAt: context.occurredAt,
  })
  return presetVersion
}

/** Writes where somebody read a ski's units to stand; `skis.not_on_rail` for what its rails do not have. */
export async function writePreset(
  context: CommandContext,
  { ski, track }: { ski: Ski; track: TrackModel },
  stands: { toe: number; heel: number; turns: number | null },
  reason: 'read' | 'read_back' | 'stood_elsewhere',
  fittingId?: string,
): Promise<number> {
  requireOnRails(track, stands)
  return addPresetChange(context, ski, stands, reason, ski, fittingId)
}

function requireOnRails(track: TrackModel, preset: Preset) {
  const refused = malformedPreset(track, preset)
  if (refused) throw new Problem('skis.not_on_rail', { part: String(refused.path.at(-1)) })
}

/** Whether somebody knows where this ski's units stand, or how their indicators are off. */
const knows = (ski: Ski) =>
  ski.presetToe !== null || ski.presetHeel !== null || ski.toeCorrection !== 0 || ski.heelCorrection !== 0

/** Other bindings stand on this pair now: what was read on the old ones, and their corrections, is forgotten. */
export async function forgetPresets(context: CommandContext, skiPairId: string) {
  const rows = await context.tx.select().from(skis).where(eq(skis.skiPairId, skiPairId)).orderBy(skis.id)
  for (const ski of rows.filter(knows)) {
    const nothing = { toeCorrection: 0, heelCorrection: 0 }
    await addPresetChange(context, ski, { toe: null, heel: null, turns: null }, 'binding_changed', nothing)
  }
}

/**
 * A model's rails were described anew. What people read is the mark, so a preset goes with its mark to the notch
 * that carries it now, and becomes unknown where no notch does. Pairs on hold are not edited: then it is refused.
 */
export async function carryPresets(
  context: CommandContext,
  bindingModelId: string,
  before: TrackModel,
  after: TrackModel,
) {
  const rows = await context.tx
    .select({ ski: skis, code: skiPairs.code, state: skiPairs.state })
    .from(skis)
    .innerJoin(skiPairs, eq(skiPairs.id, skis.skiPairId))
    .where(and(eq(skiPairs.bindingModelId, bindingModelId), isNotNull(skis.presetToe)))
    .orderBy(skis.id)
  for (const { ski, code, state } of rows) {
    const stands = carried(before, after, ski)
    const same =
      stands.toe === ski.presetToe && stands.heel === ski.presetHeel && stands.turns === ski.presetTurns
    if (same) continue
    if (state === 'quarantine') throw new Problem('items.held', { code })
    await addPresetChange(context, ski, stands, 'marks_changed')
  }
}

function carried(before: TrackModel, after: TrackModel, ski: Ski): Stands {
  const notch = (unit: 'toe' | 'heel', stood: number | null) => {
    const mark = stood === null ? null : markOf(before, unit, stood)
    return mark === null ? null : notchOfMark(after, unit, mark)
  }
  const [toe, heel] = [notch('toe', ski.presetToe), notch('heel', ski.presetHeel)]
  if (toe === null || heel === null) return { toe: null, heel: null, turns: null }
  const keepsTurns = after.fineScrew && Math.abs(ski.presetTurns ?? 0) <= after.fineScrew.maxTurns
  return { toe, heel, turns: keepsTurns ? ski.presetTurns : null }
}
