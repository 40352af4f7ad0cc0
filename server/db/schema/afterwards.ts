import { date, index, integer, jsonb, pgTable, text, uniqueIndex, uuid } from 'drizzle-orm/pg-core'
import { sql } from 'drizzle-orm'
import type { InspectionChecks } from '#shared/schemas/inspections'
import { id, instant, millimetres, now } from '../columns'
import { fittings } from './fittings'
import { people } from './people'
import { fittingRecords } from './records'
import { rentals } from './renters'
import { shops, sites } from './shops'

/** A ski, a boot, or a renter's own boots came back: a fact, never refused. Added, never changed. */
export const returns = pgTable(
  'returns',
  {
    id: id(),
    shopId: uuid()
      .notNull()
      .references(() => shops.id),
    siteId: uuid()
      .notNull()
      .references(() => sites.id),
    itemKind: text().$type<'ski_pair' | 'boots' | 'own_boots'>().notNull(),
    itemId: uuid().notNull(),
    side: text().$type<'left' | 'right' | 'both'>().notNull(),
    /** The rental that it was out on; null when nothing was out. */
    rentalId: uuid().references(() => rentals.id),
    stateBefore: text(),
    soleLengthReadMm: millimetres(),
    personId: uuid().references(() => people.id),
    deviceId: uuid(),
    commandId: uuid(),
    occurredAt: instant().notNull(),
    recordedAt: now(),
  },
  (t) => [index('returns_item').on(t.itemId, t.recordedAt), index('returns_day').on(t.shopId, t.recordedAt)],
)

/** The list that was gone through before an item went to rack, service, or was withdrawn. Added, never changed. */
export const inspections = pgTable(
  'inspections',
  {
    id: id(),
    shopId: uuid()
      .notNull()
      .references(() => shops.id),
    itemKind: text().$type<'ski_pair' | 'boots'>().notNull(),
    itemId: uuid().notNull(),
    checks: jsonb().$type<InspectionChecks>().notNull(),
    verdict: text().$type<'rack' | 'service' | 'withdraw'>().notNull(),
    note: text().notNull().default(''),
    personId: uuid()
      .notNull()
      .references(() => people.id),
    deviceId: uuid(),
    commandId: uuid(),
    occurredAt: instant().notNull(),
    recordedAt: now(),
  },
  (t) => [index('inspections_item').on(t.itemId, t.recordedAt)],
)

/** An item held with a reason, an owner and a day on which it is looked at again. */
export const quarantines = pgTable(
  'quarantines',
  {
    id: id(),
    shopId: uuid()
      .notNull()
      .references(() => shops.id),
    itemKind: text().$type<'ski_pair' | 'boots'>().notNull(),
    itemId: uuid().notNull(),
    reason: text().notNull(),
    ownerId: uuid()
      .notNull()
      .references(() => people.id),
    reviewOn: date().notNull(),
    openedBy: uuid().references(() => people.id),
    openedAt: instant().notNull(),
    releasedBy: uuid().references(() => people.id),
    releasedAt: instant(),
    releasedTo: text(),
    releaseReason: text(),
  },
  (t) => [
    uniqueIndex('quarantines_open')
      .on(t.itemId)
      .where(sql`${t.releasedAt} is null`),
    index('quarantines_review').on(t.shopId, t.reviewOn),
  ],
)

/** Somebody is out, or was out, on something that we now doubt. */
export const callBacks = pgTable(
  'call_backs',
  {
    id: id(),
    shopId: uuid()
      .notNull()
      .references(() => shops.id),
    fittingId: uuid()
      .notNull()
      .references(() => fittings.id),
    rentalId: uuid()
      .notNull()
      .references(() => rentals.id),
    recordId: uuid().references(() => fittingRecords.id),
    cause: text().notNull(),
    detail: text().notNull().default(''),
    openedBy: uuid().references(() => people.id),
    openedAt: instant().notNull(),
    /** Projection of the steps, for the list. */
    lastStep: text(),
    lastStepAt: instant(),
    closedAt: instant(),
    stepCount: integer().notNull().default(0),
  },
  (t) => [
    index('call_backs_open').on(t.shopId, t.closedAt, t.openedAt),
    uniqueIndex('call_backs_once')
      .on(t.fittingId, t.cause)
      .where(sql`${t.closedAt} is null`),
  ],
)

/** What was done about a call-back: tried, reached, set checked, closed. Added, never changed. */
export const callBackSteps = pgTable(
  'call_back_steps',
  {
    id: id(),
    shopId: uuid()
      .notNull()
      .references(() => shops.id),
    callBackId: uuid()
      .notNull()
      .references(() => callBacks.id),
    step: text().$type<'tried' | 'reached' | 'set_checked' | 'closed'>().notNull(),
    note: text().notNull().default(''),
    personId: uuid()
      .notNull()
      .references(() => people.id),
    deviceId: uuid(),
    occurredAt: instant().notNull(),
    recordedAt: now(),
  },
  (t) => [index('call_back_steps_call_back').on(t.callBackId, t.recordedAt)],
)

/** What was erased of whom, when and why. Written by the eraser only. */
export const erasures = pgTable('erasures', {
  id: id(),
  shopId: uuid().notNull(),
  renterId: uuid().notNull(),
  reason: text().notNull(),
  personId: uuid(),
  erasedAt: now(),
  inputsErased: integer().notNull(),
})
