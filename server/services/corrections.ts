import { and, eq, isNull } from 'drizzle-orm'
import type { BodyOf, IdsOf } from '#shared/api/define'
import type { CorrectedReading, correctRecord } from '#shared/api/callBacks'
import type { TrackModel } from '#shared/track/trackModel'
import { malformedPreset } from '#shared/track/trackPlan'
import {
  bindingModels,
  callBacks,
  fittingRecordParts,
  fittingRecords,
  presetChanges,
  rentalItems,
  skis,
} from '../db/schema/schema'
import { Problem } from '../errors'
import type { PersonActor } from './actor'
import type { CommandContext, Service } from './commands'
import { endFitting, lockFitting, openCallBack } from './doubt'
import { lockItem } from './stateChanges'

type Body = BodyOf<typeof correctRecord>
type RecordRow = typeof fittingRecords.$inferSelect
type PartRow = typeof fittingRecordParts.$inferSelect

/**
 * An error on a record: a new record that points to the old one and says what was wrong. A set that is still out
 * becomes a call-back, a fitting that waits for its hand-over is void, and a unit that was read last by this record
 * is from now on believed to stand where it really stood.
 */
export const correctRecordService: Service<Body, IdsOf<typeof correctRecord>, PersonActor> = async (
  context,
  body,
) => {
  const record = await recordOf(context, body.recordId)
  const fitting = await lockFitting(context, record.fittingId)
  await requireLatest(context, record.id)
  const parts = await partsOf(context, record.id)
  await requireOnRail(context, record, body)
  const recordId = await writeCorrection(context, record, body.what)
  await writeParts(context, recordId, parts, body.parts)
  if (fitting.state === 'prepared')
    await endFitting(context, fitting, { state: 'void', reason: 'record_error' })
  await believeCorrected(context, record, parts, body.parts)
  const callBackId = await callBackIfOut(context, { ...fitting, recordId }, body.what)
  return { recordId, callBackId }
}

async function recordOf({ tx, actor }: CommandContext, recordId: string): Promise<RecordRow> {
  const [record] = await tx
    .select()
    .from(fittingRecords)
    .where(and(eq(fittingRecords.id, recordId), eq(fittingRecords.shopId, actor.shopId)))
  if (!record) throw new Problem('records.unknown', {})
  return record
}

/** Only the newest of a chain is corrected; the fitting's lock keeps two corrections apart. */
async function requireLatest({ tx }: CommandContext, recordId: string) {
  const corrections = await tx.$count(fittingRecords, eq(fittingRecords.correctsId, recordId))
  if (corrections > 0) throw new Problem('records.corrected', {})
}

const partsOf = ({ tx }: CommandContext, recordId: string): Promise<PartRow[]> =>
  tx
    .select()
    .from(fittingRecordParts)
    .where(eq(fittingRecordParts.recordId, recordId))
    .orderBy(fittingRecordParts.side)

/** A notch that the track does not have was read nowhere. */
async function requireOnRail({ tx }: CommandContext, record: RecordRow, { parts }: Body) {
  const [row] = await tx
    .select({ track: bindingModels.track })
    .from(bindingModels)
    .where(eq(bindingModels.id, record.bindingModelId))
  for (const reading of Object.values(parts)) {
    if (row && !standsOnRail(row.track, reading)) throw new Problem('records.not_on_rail', {})
  }
}

/** A correction of a track with a screw says where that stands too. */
const standsOnRail = (track: TrackModel, reading: CorrectedReading): boolean =>
  !malformedPreset(track, reading) && (track.fineScrew === null || reading.turns !== null)

async function writeCorrection(context: CommandContext<PersonActor>, record: RecordRow, what: string) {
  const { id: correctsId, recordedAt: _recordedAt, ...facts } = record
  const [row] = await context.tx
    .insert(fittingRecords)
    .values({
      ...facts,
      correctsId,
      correctionReason: what,
      signedBy: context.actor.personId,
      signedDeviceId: context.actor.deviceId,
      signedAt: context.occurredAt,
    })
    .returning({ id: fittingRecords.id })
  return row!.id
}

async function writeParts(
  context: CommandContext<PersonActor>,
  recordId: string,
  parts: PartRow[],
  corrected: Body['parts'],
) {
  for (const { id: _id, ...part } of parts) {
    const reading = corrected[part.side]
    await context.tx.insert(fittingRecordParts).values({
      ...part,
      recordId,
      ...(reading
        ? {
            reading: { ...part.reading, ...reading },
            verdict: 'corrected',
            readBy: context.actor.personId,
            readAt: context.occurredAt,
          }
        : {}),
    })
  }
}

/** Where nobody read the ski since, the preset follows the corrected reading; what is held is not touched. */
async function believeCorrected(
  context: CommandContext<PersonActor>,
  record: RecordRow,
  parts: PartRow[],
  corrected: Body['parts'],
) {
  const { tx, actor } = context
  if (!corrected.left && !corrected.right) return
  const pair = await lockItem(tx, actor.shopId, { kind: 'ski_pair', id: record.skiPairId })
  if (pair.state === 'quarantine') return
  for (const part of parts) {
    const reading = corrected[part.side]
    const [ski] = await tx.select().from(skis).where(eq(skis.id, part.skiId))
    if (!reading || ski?.presetVersion !== part.presetVersion) continue
    if (ski.presetToe === reading.toe && ski.presetHeel === reading.heel && ski.presetTurns === reading.turns)
      continue
    await tx.insert(presetChanges).values({
      shopId: actor.shopId,
      skiId: ski.id,
      presetToe: reading.toe,
      presetHeel: reading.heel,
      presetTurns: reading.turns,
      presetVersion: ski.presetVersion + 1,
      toeCorrection: ski.toeCorrection,
      heelCorrection: ski.heelCorrection,
      reason: 'record_corrected',
      fittingId: record.fittingId,
      personId: actor.personId,
      deviceId: actor.deviceId,
      occurredAt: context.occurredAt,
    })
  }
}

/** The entry of a set that is still out; an entry that is open already for such an error is the same one. */
async function callBackIfOut(
  context: CommandContext,
  fitting: { id: string; rentalId: string; recordId: string },
  what: string,
): Promise<string | null> {
  const { tx } = context
  const stillOut = await tx.$count(
    rentalItems,
    and(eq(rentalItems.fittingId, fitting.id), isNull(rentalItems.backAt)),
  )
  if (stillOut === 0) return null
  const made = await openCallBack(context, fitting, 'record_error', what)
  if (made) return made
  const [open] = await tx
    .select({ id: callBacks.id })
    .from(callBacks)
    .where(
      and(
        eq(callBacks.fittingId, fitting.id),
        eq(callBacks.cause, 'record_error'),
        isNull(callBacks.closedAt),
      ),
    )
  return open?.id ?? null
}
