import { boolean, date, index, integer, jsonb, pgTable, text, uniqueIndex, uuid } from 'drizzle-orm/pg-core'
import { sql } from 'drizzle-orm'
import type { Height, Mass } from '#shared/units/bodySchemas'
import { bytes, id, instant, millimetres, now } from '../columns'
import { people } from './people'
import { shops, sites } from './shops'

/** Personal data of a renter: the erasable layer. Records know a renter by id only. */
export const renters = pgTable(
  'renters',
  {
    id: id(),
    shopId: uuid()
      .notNull()
      .references(() => shops.id),
    firstName: text().notNull(),
    lastName: text().notNull(),
    email: text(),
    phone: text(),
    locale: text().notNull().default('en'),
    birthDate: date(),
    guardianName: text(),
    guardianRelation: text(),
    guardianPhone: text(),
    /** The inputs that count now; a fitting computed from others is void. */
    currentInputsId: uuid(),
    version: integer().notNull().default(1),
    createdAt: now(),
  },
  (t) => [index('renters_shop').on(t.shopId, t.lastName)],
)

/**
 * What a fitting is computed from. A change of any value is a new row. Erasable: deleting the row takes values and
 * salt with it, and what a record keeps is only `inputs_commitment`.
 */
export const fittingInputs = pgTable(
  'fitting_inputs',
  {
    id: id(),
    shopId: uuid()
      .notNull()
      .references(() => shops.id),
    renterId: uuid()
      .notNull()
      .references(() => renters.id),
    salt: bytes().notNull(),
    mass: jsonb().$type<Mass>().notNull(),
    massSource: text().$type<'declared' | 'measured'>().notNull(),
    massBy: uuid().references(() => people.id),
    height: jsonb().$type<Height>().notNull(),
    heightSource: text().$type<'declared' | 'measured'>().notNull(),
    heightBy: uuid().references(() => people.id),
    /** Whole years that the table is read with, on the rental's days. */
    age: integer().notNull(),
    skierType: text().notNull(),
    /** The renter's signed request: one row lower (-1), none (0), one row higher (1). */
    request: integer().notNull().default(0),
    requestSignature: bytes(),
    requestSignedName: text(),
    requestSignedAt: instant(),
    createdBy: uuid().references(() => people.id),
    createdAt: now(),
  },
  (t) => [index('fitting_inputs_renter').on(t.renterId, t.createdAt)],
)

/** One renter's period and set. */
export const rentals = pgTable(
  'rentals',
  {
    id: id(),
    shopId: uuid()
      .notNull()
      .references(() => shops.id),
    siteId: uuid()
      .notNull()
      .references(() => sites.id),
    renterId: uuid()
      .notNull()
      .references(() => renters.id),
    /** Short number of the day it arrived on. */
    day: date().notNull(),
    number: integer().notNull(),
    state: text().notNull(),
    startsOn: date().notNull(),
    endsOn: date().notNull(),
    ownBoots: boolean().notNull().default(false),
    /** Shoe size as typed with its system, and foot length: for advice only. */
    shoe: jsonb().$type<{ size: string; system: 'eu' | 'uk' | 'us' } | { footMm: number } | null>(),
    wishes: text().notNull().default(''),
    arrivedAt: instant().notNull(),
    promisedAt: instant().notNull(),
    takenBy: uuid().references(() => people.id),
    takenAt: instant(),
    version: integer().notNull().default(1),
    createdAt: now(),
  },
  (t) => [
    uniqueIndex('rentals_number').on(t.shopId, t.day, t.number),
    index('rentals_state').on(t.shopId, t.state, t.promisedAt),
    index('rentals_renter').on(t.renterId),
  ],
)

/** The day's code at the door: who opens it may begin one form. */
export const doorLinks = pgTable(
  'door_links',
  {
    id: id(),
    shopId: uuid()
      .notNull()
      .references(() => shops.id),
    siteId: uuid()
      .notNull()
      .references(() => sites.id),
    tokenSha256: bytes().notNull(),
    expiresAt: instant().notNull(),
    revokedAt: instant(),
    createdBy: uuid().references(() => people.id),
    createdAt: now(),
  },
  (t) => [uniqueIndex('door_links_token').on(t.tokenSha256)],
)

/** A renter's own link to a form; the draft survives a reload of it and nothing else shows it. */
export const formLinks = pgTable(
  'form_links',
  {
    id: id(),
    shopId: uuid()
      .notNull()
      .references(() => shops.id),
    siteId: uuid()
      .notNull()
      .references(() => sites.id),
    tokenSha256: bytes().notNull(),
    draft: jsonb(),
    draftVersion: integer().notNull().default(0),
    rentalId: uuid().references(() => rentals.id),
    submittedAt: instant(),
    expiresAt: instant().notNull(),
    revokedAt: instant(),
    createdAt: now(),
  },
  (t) => [uniqueIndex('form_links_token').on(t.tokenSha256), index('form_links_rental').on(t.rentalId)],
)

/** The renter's own boots as somebody read and judged them. A new reading is a new row; the latest counts. */
export const ownBoots = pgTable(
  'own_boots',
  {
    id: id(),
    shopId: uuid()
      .notNull()
      .references(() => shops.id),
    rentalId: uuid()
      .notNull()
      .references(() => rentals.id),
    description: text().notNull().default(''),
    soleLengthMm: millimetres().notNull(),
    soleType: text().notNull(),
    wear: text().$type<'sound' | 'worn'>().notNull(),
    judgedBy: uuid()
      .notNull()
      .references(() => people.id),
    /** A second look by somebody else of the workshop, or a head technician's own judgement. */
    secondLookBy: uuid().references(() => people.id),
    occurredAt: instant().notNull(),
    recordedAt: now(),
  },
  (t) => [index('own_boots_rental').on(t.rentalId, t.recordedAt)],
)

/** What of the set is out: one row per ski, boot, or pair of own boots. An item is out to one renter at a time. */
export const rentalItems = pgTable(
  'rental_items',
  {
    id: id(),
    shopId: uuid()
      .notNull()
      .references(() => shops.id),
    rentalId: uuid()
      .notNull()
      .references(() => rentals.id),
    fittingId: uuid().notNull(),
    itemKind: text().$type<'ski_pair' | 'boots' | 'own_boots'>().notNull(),
    itemId: uuid().notNull(),
    side: text().$type<'left' | 'right' | 'both'>().notNull(),
    outAt: instant().notNull(),
    backAt: instant(),
    returnId: uuid(),
  },
  (t) => [
    uniqueIndex('rental_items_out')
      .on(t.itemId, t.side)
      .where(sql`${t.backAt} is null`),
    index('rental_items_rental').on(t.rentalId),
  ],
)
