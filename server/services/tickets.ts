import { and, desc, eq } from 'drizzle-orm'
import type { BodyOf, IdsOf } from '#shared/api/define'
import type {
  cannotBeSet,
  decideReading,
  leaveTicket,
  openTicket,
  readSki,
  standsElsewhere,
} from '#shared/api/tickets'
import type { ProblemParams } from '#shared/errors'
import { judgeSki, mismatchOf, sameReading, type Mismatch } from '#shared/fitting/readBack'
import type { Side } from '#shared/schemas/common'
import { partReading, type SeenReading } from '#shared/schemas/records'
import { markOf } from '#shared/track/marks'
import type { TrackModel } from '#shared/track/trackModel'
import { malformedPreset, type Preset } from '#shared/track/trackPlan'
import {
  bindingModels,
  fittingDecisions,
  fittings,
  people,
  skiPairs,
  skiReadings,
  skis,
  ticketHolds,
} from '../db/schema/schema'
import { Problem } from '../errors'
import type { PersonActor } from './actor'
import type { CommandContext, Service } from './commands'
import { endFitting, lockFitting } from './doubt'
import { writePreset } from './presets'
import { lockItem } from './stateChanges'

type Does<C> = Service<BodyOf<C>, IdsOf<C>, PersonActor>
type Context = CommandContext<PersonActor>
type Fitting = typeof fittings.$inferSelect

export const openTicketService: Does<typeof openTicket> = async (context, { fittingId, takeOver }) => {
  const fitting = await lockTicket(context, fittingId)
  await holdTicket(context, fitting, { takeOver })
  return { fittingId }
}

export const leaveTicketService: Does<typeof leaveTicket> = async (context, { fittingId }) => {
  const fitting = await lockTicket(context, fittingId)
  if (fitting.heldBy && fitting.heldBy !== context.actor.personId)
    throw await heldBySomebody(context, fitting)
  await context.tx
    .update(fittings)
    .set({ heldBy: null, heldDeviceId: null, heldSince: null })
    .where(eq(fittings.id, fittingId))
  context.touchFitting(fittingId)
  return { fittingId }
}

export const standsElsewhereService: Does<typeof standsElsewhere> = async (context, body) => {
  const fitting = await lockTicket(context, body.fittingId)
  await holdTicket(context, fitting)
  const found = await skiOf(context, fitting, { skiId: body.skiId })
  requireSeen(found, body.presetVersion)
  const { ski, track } = found
  const { toe, heel } = body
  const turns = track.fineScrew ? body.turns : null
  requireOnRail(track, body)
  if (ski.presetToe === toe && ski.presetHeel === heel && ski.presetTurns === turns) {
    throw new Problem('fittings.stands_there')
  }
  await writePreset(context, found, { toe, heel, turns }, 'stood_elsewhere', fitting.id)
  touchTicket(context, fitting)
  return { skiId: ski.id }
}

/** Judges what a ski shows and stores it when it may stand: from then on this is where its units stand. */
export const readSkiService: Does<typeof readSki> = async (context, body) => {
  const { fittingId, side, reading: seen } = body
  const fitting = await lockTicket(context, fittingId)
  await holdTicket(context, fitting)
  const found = await skiOf(context, fitting, { side })
  requireSeen(found, body.presetVersion)
  requireOnRail(found.track, seen)
  const { verdict, decisionId } = await allowed(context, fitting, found, side, seen)
  const presetVersion = await writePreset(context, found, seen, 'read_back', fittingId)
  const [row] = await context.tx
    .insert(skiReadings)
    .values({
      shopId: context.actor.shopId,
      fittingId,
      skiId: found.ski.id,
      side,
      reading: partReading.parse(seen),
      verdict,
      decisionId,
      presetVersion,
      personId: context.actor.personId,
      deviceId: context.actor.deviceId,
      occurredAt: context.occurredAt,
    })
    .returning({ id: skiReadings.id })
  touchTicket(context, fitting)
  return { readingId: row!.id }
}

/** The verdict under which a reading is stored; a mismatch that nobody decided is refused with what differs. */
async function allowed(
  context: Context,
  fitting: Fitting,
  { ski, track: model }: FoundSki,
  side: Side,
  seen: SeenReading,
): Promise<{ verdict: string; decisionId: string | null }> {
  const judged = judgeSki({ model, track: fitting.track, targets: fitting.targets }, side, seen)
  const mismatch = mismatchOf(judged, fitting, seen)
  if (!mismatch) return { verdict: judged.verdict, decisionId: null }
  if (mismatch.decides === 'head_technician') {
    const decisionId = await decisionAbout(context, fitting.id, ski.id, seen)
    if (decisionId) return { verdict: 'head_technician', decisionId }
  }
  throw new Problem('fittings.mismatch', { side, ...mismatch, ...marksOf(model, mismatch) })
}

/** The marks that people read, where notches differ. */
function marksOf(model: TrackModel, { what, part, target, read }: Mismatch): ProblemParams {
  if (what !== 'mark' || target === null || read === null) return {}
  const unit = part === 'heel' ? 'heel' : 'toe'
  return { targetMark: markOf(model, unit, target), readMark: markOf(model, unit, read) }
}

async function decisionAbout({ tx }: Context, fittingId: string, skiId: string, seen: SeenReading) {
  const decisions = await tx
    .select({ id: fittingDecisions.id, reading: fittingDecisions.reading })
    .from(fittingDecisions)
    .where(and(eq(fittingDecisions.fittingId, fittingId), eq(fittingDecisions.skiId, skiId)))
    .orderBy(desc(fittingDecisions.recordedAt), desc(fittingDecisions.id))
  return decisions.find(({ reading }) => reading && sameReading(seen, reading))?.id ?? null
}

export const decideReadingService: Does<typeof decideReading> = async (context, body) => {
  const { tx, actor, occurredAt } = context
  const { fittingId, side, reading, reason } = body
  const fitting = await lockTicket(context, fittingId)
  const found = await skiOf(context, fitting, { side })
  const { ski, track: model } = found
  requireOnRail(model, reading)
  const verdict = judgeSki({ model, track: fitting.track, targets: fitting.targets }, side, reading)
  const mismatch = mismatchOf(verdict, fitting, reading)
  if (!mismatch) throw new Problem('fittings.nothing_to_decide', { kind: 'read_mismatch' })
  if (mismatch.decides !== 'head_technician') {
    throw new Problem('fittings.value_not_decidable', { why: mismatch.what })
  }
  const [row] = await tx
    .insert(fittingDecisions)
    .values({
      shopId: actor.shopId,
      rentalId: fitting.rentalId,
      fittingId,
      skiPairId: fitting.skiPairId,
      skiId: ski.id,
      bootsId: fitting.bootsId,
      ownBootsId: fitting.ownBootsId,
      kind: mismatch.part === 'toe' ? 'toe_mark' : 'read_mismatch',
      reason,
      reading,
      personId: actor.personId,
      deviceId: actor.deviceId,
      occurredAt,
    })
    .returning({ id: fittingDecisions.id })
  context.touchFitting(fittingId)
  return { decisionId: row!.id }
}

/** Boots go back to their place; the pair goes where somebody looks at it. Its presets stay as last read. */
export const cannotBeSetService: Does<typeof cannotBeSet> = async (context, { fittingId, reason, to }) => {
  const fitting = await lockFitting(context, fittingId)
  if (fitting.state === 'claimed') await holdTicket(context, fitting)
  await endFitting(context, fitting, {
    state: 'void',
    reason: 'cannot_be_set',
    to: { [fitting.skiPairId]: to },
    why: reason,
  })
  return { fittingId }
}

/** The ticket of a fitting that waits for the bench; one that was signed or has ended is none any more. */
export async function lockTicket(context: Context, fittingId: string): Promise<Fitting> {
  const fitting = await lockFitting(context, fittingId)
  if (fitting.state === 'void') throw new Problem('fittings.void', { reason: fitting.endReason })
  if (fitting.state !== 'claimed') throw new Problem('fittings.not_open', { state: fitting.state })
  return fitting
}

/**
 * Whoever works on a ticket has it: a free one is taken, one's own goes on, somebody else's is refused with name
 * and since when, unless it is taken over.
 */
export async function holdTicket(
  context: Context,
  fitting: Fitting,
  { takeOver = false }: { takeOver?: boolean } = {},
) {
  const { tx, actor, occurredAt } = context
  if (fitting.heldBy === actor.personId) return
  if (fitting.heldBy && !takeOver) throw await heldBySomebody(context, fitting)
  await tx
    .update(fittings)
    .set({ heldBy: actor.personId, heldDeviceId: actor.deviceId, heldSince: occurredAt })
    .where(eq(fittings.id, fitting.id))
  await tx.insert(ticketHolds).values({
    shopId: actor.shopId,
    fittingId: fitting.id,
    personId: actor.personId,
    deviceId: actor.deviceId,
    tookOverFrom: fitting.heldBy,
    occurredAt,
  })
  context.touchFitting(fitting.id)
}

async function heldBySomebody({ tx }: Context, fitting: Fitting): Promise<Problem> {
  const [holder] = await tx.select({ name: people.name }).from(people).where(eq(people.id, fitting.heldBy!))
  return new Problem('fittings.held_by', {
    by: holder?.name ?? '',
    since: fitting.heldSince?.toISOString() ?? null,
  })
}

type FoundSki = { ski: typeof skis.$inferSelect; track: TrackModel }

/** A ski of the fitting's own pair, the pair locked so that its presets stand still. */
async function skiOf(
  { tx, actor }: Context,
  fitting: Fitting,
  which: { skiId: string } | { side: Side },
): Promise<FoundSki> {
  await lockItem(tx, actor.shopId, { kind: 'ski_pair', id: fitting.skiPairId })
  const [found] = await tx
    .select({ ski: skis, track: bindingModels.track })
    .from(skis)
    .innerJoin(skiPairs, eq(skiPairs.id, skis.skiPairId))
    .innerJoin(bindingModels, eq(bindingModels.id, skiPairs.bindingModelId))
    .where(
      and(
        eq(skis.skiPairId, fitting.skiPairId),
        'skiId' in which ? eq(skis.id, which.skiId) : eq(skis.side, which.side),
      ),
    )
  if (!found) throw new Problem('items.unknown')
  return found
}

/** Somebody else wrote where this ski stands since the screen was drawn: look again before going on. */
function requireSeen({ ski }: FoundSki, presetVersion: number) {
  if (ski.presetVersion !== presetVersion) throw new Problem('fittings.preset_moved', { side: ski.side })
}

function requireOnRail(track: TrackModel, read: Preset) {
  if (malformedPreset(track, read)) throw new Problem('records.not_on_rail')
}

/** A reading moves presets and the queue's notches: item and ticket both are told. */
function touchTicket(context: Context, fitting: Fitting) {
  context.touchFitting(fitting.id)
  context.touchItem('ski_pair', fitting.skiPairId)
}
