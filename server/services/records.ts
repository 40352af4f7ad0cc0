import { and, desc, eq, isNull } from 'drizzle-orm'
import type { BodyOf, IdsOf } from '#shared/api/define'
import type { signRecord } from '#shared/api/records'
import { labelFor } from '#shared/labels/labels'
import {
  bindingModels,
  boots,
  fittingInputs,
  fittingRecordParts,
  fittingRecords,
  fittings,
  labels,
  ownBoots,
  skiPairs,
  skiReadings,
  skis,
} from '../db/schema/schema'
import { Problem } from '../errors'
import type { PersonActor } from './actor'
import type { CommandContext, Service } from './commands'
import { inputsCommitment } from './commitment'
import { itemsOf } from './doubt'
import { requirePin } from './pins'
import { changeState, lockItems } from './stateChanges'
import { holdTicket, lockTicket } from './tickets'

type Fitting = typeof fittings.$inferSelect
type Context = CommandContext<PersonActor>

const sides = ['left', 'right'] as const

/**
 * Signs, by the PIN of whoever does, what was last read at both skis. The record holds no name and no body value:
 * the renter is an id, the inputs are a commitment. The database refuses it when anything that the fitting was
 * computed from has changed.
 */
export const signRecordService: Service<
  BodyOf<typeof signRecord>,
  IdsOf<typeof signRecord>,
  PersonActor
> = async (context, { fittingId }) => {
  await requirePin(context)
  const fitting = await lockTicket(context, fittingId)
  await holdTicket(context, fitting)
  const items = await lockItems(context.tx, context.actor.shopId, itemsOf(fitting))
  const readings = await readingsThatStand(context, fitting)
  const recordId = await insertRecord(context, fitting, readings)
  await insertParts(context, fitting, recordId, readings)
  await context.tx
    .update(fittings)
    .set({
      state: 'prepared',
      recordId,
      preparedAt: context.occurredAt,
      heldBy: null,
      heldDeviceId: null,
      heldSince: null,
    })
    .where(eq(fittings.id, fittingId))
  for (const item of items) {
    const { siteId, state: from } = item
    await changeState(context, item, { from, to: 'prepared', siteId, subjectId: fittingId })
  }
  context.touchFitting(fittingId)
  context.touchRental(fitting.rentalId)
  return { recordId }
}

type StandingReading = { ski: typeof skis.$inferSelect; read: typeof skiReadings.$inferSelect; label: string }

/** The latest reading of each ski, as long as nobody wrote since where it stands; `fittings.unread` otherwise. */
async function readingsThatStand({ tx }: Context, fitting: Fitting): Promise<StandingReading[]> {
  const found: StandingReading[] = []
  const unread: string[] = []
  for (const side of sides) {
    const [row] = await tx
      .select({ ski: skis, read: skiReadings, code: skiPairs.code, label: labels.text })
      .from(skiReadings)
      .innerJoin(skis, eq(skis.id, skiReadings.skiId))
      .innerJoin(skiPairs, eq(skiPairs.id, skis.skiPairId))
      .leftJoin(labels, and(eq(labels.itemId, skiPairs.id), eq(labels.side, skis.side), isNull(labels.until)))
      .where(and(eq(skiReadings.fittingId, fitting.id), eq(skiReadings.side, side)))
      .orderBy(desc(skiReadings.recordedAt), desc(skiReadings.id))
      .limit(1)
    if (!row || row.read.presetVersion !== row.ski.presetVersion) unread.push(side)
    else found.push({ ...row, label: row.label ?? labelFor(row.code, side) })
  }
  if (unread.length > 0) throw new Problem('fittings.unread', { sides: unread })
  return found
}

async function insertRecord(context: Context, fitting: Fitting, readings: StandingReading[]) {
  const { tx, actor } = context
  const { shopId, siteId, number, renterId, inputsHash, edition, rulesVersion, approved } = fitting
  const { row, sideways, twistNm, forwardLeanNm, rowSteps } = fitting.release
  const { toe: targetToe, heel: targetHeel, turns: targetTurns } = fitting.track
  const decisions = readings.flatMap(({ read }) => (read.decisionId ? [read.decisionId] : []))
  const [record] = await tx
    .insert(fittingRecords)
    .values({
      ...(await thingsOf(context, fitting)),
      shopId,
      siteId,
      fittingId: fitting.id,
      number,
      renterId,
      inputsCommitment: await commitmentOf(context, fitting),
      inputsHash,
      edition,
      rulesVersion,
      approved,
      row,
      value: fitting.value,
      sideways,
      twistNm,
      forwardLeanNm,
      rowSteps,
      soleLengthMm: fitting.soleLengthMm,
      targetToe,
      targetHeel,
      targetTurns,
      decisionIds: [...fitting.decisionIds, ...decisions],
      signedBy: actor.personId,
      signedDeviceId: actor.deviceId,
      signedAt: context.occurredAt,
    })
    .returning({ id: fittingRecords.id })
  return record!.id
}

/** Pair, binding and boots as they are called now: a record can be read when they are long gone. */
async function thingsOf({ tx }: Context, fitting: Fitting) {
  const [pair] = await tx
    .select({
      skiPairId: skiPairs.id,
      skiPairCode: skiPairs.code,
      bindingModelId: bindingModels.id,
      bindingModelName: bindingModels.name,
      bindingContentSha256: bindingModels.contentSha256,
    })
    .from(skiPairs)
    .innerJoin(bindingModels, eq(bindingModels.id, skiPairs.bindingModelId))
    .where(eq(skiPairs.id, fitting.skiPairId))
  return { ...pair!, ...(await bootsOf(tx, fitting)) }
}

async function bootsOf(tx: Context['tx'], { bootsId, ownBootsId }: Fitting) {
  if (bootsId) {
    const [row] = await tx
      .select({ bootsCode: boots.code, soleType: boots.soleType })
      .from(boots)
      .where(eq(boots.id, bootsId))
    return { bootsId, ...row!, bootsOwner: 'shop' as const }
  }
  const [row] = await tx
    .select({ soleType: ownBoots.soleType })
    .from(ownBoots)
    .where(eq(ownBoots.id, ownBootsId!))
  return { bootsId: null, bootsCode: null, ...row!, bootsOwner: 'renter' as const }
}

async function commitmentOf({ tx }: Context, { inputsId }: Fitting): Promise<string> {
  const [inputs] = inputsId ? await tx.select().from(fittingInputs).where(eq(fittingInputs.id, inputsId)) : []
  // Erased between claim and signature: there is nobody left to hand this over to.
  if (!inputs) throw new Problem('handOvers.changed', { changed: ['renter_data'] })
  return inputsCommitment(inputs.salt, inputs)
}

async function insertParts(
  { tx }: Context,
  { targets }: Fitting,
  recordId: string,
  readings: StandingReading[],
) {
  await tx.insert(fittingRecordParts).values(
    readings.map(({ ski, read, label }) => ({
      shopId: ski.shopId,
      recordId,
      skiId: ski.id,
      side: ski.side,
      label,
      targetToeValue: targets[ski.side].toe,
      targetHeelValue: targets[ski.side].heel,
      reading: read.reading,
      verdict: read.verdict,
      decisionId: read.decisionId,
      presetVersion: read.presetVersion,
      readBy: read.personId,
      readAt: read.occurredAt,
    })),
  )
}
