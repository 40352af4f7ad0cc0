import {
  boolean,
  doublePrecision,
  index,
  integer,
  jsonb,
  pgTable,
  text,
  uniqueIndex,
  uuid,
} from 'drizzle-orm/pg-core'
import type { RowStep } from '#shared/schemas/fittings'
import type { PartReading } from '#shared/schemas/records'
import { bytes, id, instant, millimetres, now } from '../columns'
import { fittings } from './fittings'
import { people } from './people'
import { rentals, renters } from './renters'
import { shops } from './shops'
import { skis } from './things'

/** The signed, unalterable facts of a fitting. No name and no body data. A correction is a new record. */
export const fittingRecords = pgTable(
  'fitting_records',
  {
    id: id(),
    shopId: uuid()
      .notNull()
      .references(() => shops.id),
    siteId: uuid().notNull(),
    fittingId: uuid()
      .notNull()
      .references(() => fittings.id),
    number: integer().notNull(),
    renterId: uuid().notNull(),
    inputsCommitment: text().notNull(),
    inputsHash: text().notNull(),
    edition: text().notNull(),
    rulesVersion: text().notNull(),
    approved: boolean().notNull(),
    row: text().notNull(),
    value: doublePrecision().notNull(),
    sideways: boolean().notNull(),
    twistNm: integer().notNull(),
    forwardLeanNm: integer().notNull(),
    /** Rows moved by rule (type, age, request, decision), without the body values. */
    rowSteps: jsonb().$type<RowStep[]>().notNull(),
    skiPairId: uuid().notNull(),
    skiPairCode: text().notNull(),
    bindingModelId: uuid().notNull(),
    bindingModelName: text().notNull(),
    bindingContentSha256: text().notNull(),
    bootsId: uuid(),
    bootsCode: text(),
    bootsOwner: text().$type<'shop' | 'renter'>().notNull(),
    soleLengthMm: millimetres().notNull(),
    soleType: text().notNull(),
    targetToe: integer().notNull(),
    targetHeel: integer().notNull(),
    targetTurns: doublePrecision(),
    decisionIds: uuid().array().notNull(),
    correctsId: uuid(),
    correctionReason: text(),
    signedBy: uuid()
      .notNull()
      .references(() => people.id),
    signedDeviceId: uuid(),
    signedAt: instant().notNull(),
    recordedAt: now(),
  },
  (t) => [
    index('fitting_records_fitting').on(t.fittingId),
    index('fitting_records_pair').on(t.skiPairId, t.signedAt),
    uniqueIndex('fitting_records_corrects').on(t.correctsId),
  ],
)

/** The part of a record that belongs to one ski. */
export const fittingRecordParts = pgTable(
  'fitting_record_parts',
  {
    id: id(),
    shopId: uuid()
      .notNull()
      .references(() => shops.id),
    recordId: uuid()
      .notNull()
      .references(() => fittingRecords.id),
    skiId: uuid()
      .notNull()
      .references(() => skis.id),
    side: text().$type<'left' | 'right'>().notNull(),
    label: text().notNull(),
    targetToeValue: doublePrecision().notNull(),
    targetHeelValue: doublePrecision().notNull(),
    reading: jsonb().$type<PartReading>().notNull(),
    verdict: text().notNull(),
    decisionId: uuid(),
    presetVersion: integer().notNull(),
    readBy: uuid()
      .notNull()
      .references(() => people.id),
    readAt: instant().notNull(),
  },
  (t) => [uniqueIndex('fitting_record_parts_side').on(t.recordId, t.side)],
)

/** A set left with a renter who read the numbers and signed. Added, never changed. */
export const handOvers = pgTable(
  'hand_overs',
  {
    id: id(),
    shopId: uuid()
      .notNull()
      .references(() => shops.id),
    siteId: uuid().notNull(),
    fittingId: uuid()
      .notNull()
      .references(() => fittings.id),
    recordId: uuid()
      .notNull()
      .references(() => fittingRecords.id),
    rentalId: uuid()
      .notNull()
      .references(() => rentals.id),
    signatureSha256: text().notNull(),
    /** Who signed: the renter, or the guardian of a minor. */
    signedAs: text().$type<'renter' | 'guardian'>().notNull(),
    textId: uuid().notNull(),
    textVersion: integer().notNull(),
    textSha256: text().notNull(),
    /** The sole length typed at hand-over, for the renter's own boots. */
    soleLengthReadMm: millimetres(),
    personId: uuid()
      .notNull()
      .references(() => people.id),
    deviceId: uuid(),
    occurredAt: instant().notNull(),
    recordedAt: now(),
  },
  (t) => [uniqueIndex('hand_overs_fitting').on(t.fittingId), index('hand_overs_rental').on(t.rentalId)],
)

/** The picture of a signature: kept with the erasable layer, its hash is in the hand-over. */
export const signatures = pgTable(
  'signatures',
  {
    id: id(),
    shopId: uuid()
      .notNull()
      .references(() => shops.id),
    renterId: uuid()
      .notNull()
      .references(() => renters.id),
    handOverId: uuid()
      .notNull()
      .references(() => handOvers.id),
    picture: bytes().notNull(),
    signedName: text().notNull(),
    createdAt: now(),
  },
  (t) => [uniqueIndex('signatures_hand_over').on(t.handOverId)],
)
