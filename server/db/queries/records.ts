import { and, desc, eq } from 'drizzle-orm'
import { alias } from 'drizzle-orm/pg-core'
import type { AnswerOf } from '#shared/api/define'
import type { getRecord } from '#shared/api/records'
import type { Reader } from '../../deps'
import { Problem } from '../../errors'
import {
  bindingModels,
  devices,
  fittingRecordParts,
  fittingRecords,
  fittings,
  handOvers,
  people,
  renters,
  shops,
  signatures,
  sites,
  skiPairs,
  tableApprovals,
} from '../schema/schema'
import { inputsFact } from './fittingFacts'
import { decisionFacts } from './fittingParts'

type RecordAnswer = AnswerOf<typeof getRecord>
type RecordRow = typeof fittingRecords.$inferSelect

/** A record with what it refers to; `records.unknown` for what is not this shop's. */
export async function recordById(db: Reader, shopId: string, id: string): Promise<RecordAnswer> {
  const [found] = await db
    .select({
      record: fittingRecords,
      shop: { name: shops.name, zone: shops.zone },
      site: sites.name,
      signedBy: people.name,
      device: devices.name,
      lengthCm: skiPairs.lengthCm,
      track: bindingModels.track,
      sheet: bindingModels.contentSha256,
      inputsId: fittings.inputsId,
      renter: { firstName: renters.firstName, lastName: renters.lastName },
    })
    .from(fittingRecords)
    .innerJoin(shops, eq(shops.id, fittingRecords.shopId))
    .innerJoin(sites, eq(sites.id, fittingRecords.siteId))
    .innerJoin(people, eq(people.id, fittingRecords.signedBy))
    .leftJoin(devices, eq(devices.id, fittingRecords.signedDeviceId))
    .innerJoin(skiPairs, eq(skiPairs.id, fittingRecords.skiPairId))
    .innerJoin(bindingModels, eq(bindingModels.id, fittingRecords.bindingModelId))
    .innerJoin(fittings, eq(fittings.id, fittingRecords.fittingId))
    .innerJoin(renters, eq(renters.id, fittingRecords.renterId))
    .where(and(eq(fittingRecords.id, id), eq(fittingRecords.shopId, shopId)))
  if (!found) throw new Problem('records.unknown')
  const { record, renter } = found
  const inputs = found.inputsId ? await inputsFact(db, found.inputsId) : null
  const { row, value, twistNm, forwardLeanNm, rowSteps, edition, rulesVersion, approved } = record
  const decisions = await decisionFacts(db, { ids: record.decisionIds })
  return {
    id,
    number: record.number,
    fittingId: record.fittingId,
    shop: found.shop,
    site: found.site,
    signedBy: found.signedBy,
    signedDevice: found.device,
    signedAt: record.signedAt.toISOString(),
    // An erased renter's row stays, without a name.
    renter: renter.firstName || renter.lastName ? renter : null,
    inputs,
    boots: { code: record.bootsCode, soleLengthMm: record.soleLengthMm, soleType: record.soleType },
    skiPair: { code: record.skiPairCode, lengthCm: found.lengthCm, binding: record.bindingModelName },
    track: found.track,
    sheetUnchanged: found.sheet === record.bindingContentSha256,
    row,
    value,
    twistNm,
    forwardLeanNm,
    rowSteps,
    target: { toe: record.targetToe, heel: record.targetHeel, turns: record.targetTurns },
    edition,
    rulesVersion,
    approved,
    approvedBy: approved ? await approvalOf(db, record) : null,
    decisions: decisions.map(({ kind, reason, by }) => ({ kind, reason, by })),
    parts: await partsOf(db, id),
    handOver: await handOverOf(db, record.fittingId),
    correctsId: record.correctsId,
    correctionReason: record.correctionReason,
    correctedById: await correctionOf(db, id),
  }
}

async function partsOf(db: Reader, recordId: string): Promise<RecordAnswer['parts']> {
  const rows = await db
    .select({ part: fittingRecordParts, readBy: people.name })
    .from(fittingRecordParts)
    .innerJoin(people, eq(people.id, fittingRecordParts.readBy))
    .where(eq(fittingRecordParts.recordId, recordId))
    .orderBy(fittingRecordParts.side)
  return rows.map(({ part, readBy }) => ({ ...part, readBy, readAt: part.readAt.toISOString() }))
}

/** What was corrected, however often, was handed over once. */
async function handOverOf(db: Reader, fittingId: string): Promise<RecordAnswer['handOver']> {
  const [row] = await db
    .select({ handOver: handOvers, name: signatures.signedName, picture: signatures.picture })
    .from(handOvers)
    .leftJoin(signatures, eq(signatures.handOverId, handOvers.id))
    .where(eq(handOvers.fittingId, fittingId))
  if (!row) return null
  const { occurredAt, signedAs, textVersion } = row.handOver
  return {
    at: occurredAt.toISOString(),
    signedAs,
    textVersion,
    signedName: row.name,
    signaturePng: row.picture ? `data:image/png;base64,${row.picture.toString('base64')}` : null,
  }
}

const approver = alias(people, 'approver')

/** Who had signed these numbers when the record was: the latest word before it. */
async function approvalOf(db: Reader, record: RecordRow): Promise<RecordAnswer['approvedBy']> {
  const rows = await db
    .select({ name: approver.name, at: tableApprovals.occurredAt })
    .from(tableApprovals)
    .innerJoin(approver, eq(approver.id, tableApprovals.personId))
    .where(
      and(
        eq(tableApprovals.shopId, record.shopId),
        eq(tableApprovals.edition, record.edition),
        eq(tableApprovals.rulesVersion, record.rulesVersion),
        eq(tableApprovals.approved, true),
      ),
    )
    .orderBy(desc(tableApprovals.recordedAt))
  const signed = rows.find(({ at }) => at <= record.signedAt)
  return signed ? { name: signed.name, at: signed.at.toISOString() } : null
}

async function correctionOf(db: Reader, recordId: string): Promise<string | null> {
  const [row] = await db
    .select({ id: fittingRecords.id })
    .from(fittingRecords)
    .where(eq(fittingRecords.correctsId, recordId))
  return row?.id ?? null
}
