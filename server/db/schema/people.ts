import { index, integer, pgTable, primaryKey, text, uniqueIndex, uuid } from 'drizzle-orm/pg-core'
import { sql } from 'drizzle-orm'
import { bytes, id, instant, now } from '../columns'
import { shops, sites } from './shops'

export const people = pgTable(
  'people',
  {
    id: id(),
    email: text().notNull(),
    name: text().notNull(),
    passwordHash: text().notNull(),
    locale: text().notNull().default('en'),
    disabledAt: instant(),
    createdAt: now(),
  },
  (t) => [uniqueIndex('people_email').on(sql`lower(${t.email})`)],
)

export const memberships = pgTable(
  'memberships',
  {
    shopId: uuid()
      .notNull()
      .references(() => shops.id),
    personId: uuid()
      .notNull()
      .references(() => people.id),
    roles: text().array().notNull(),
    /** Argon2id of the six digits; null until the person chose them. */
    pinHash: text(),
    pinTries: integer().notNull().default(0),
    endedAt: instant(),
    createdAt: now(),
  },
  (t) => [primaryKey({ columns: [t.shopId, t.personId] })],
)

/** What is enrolled at a station. A device is known by a token in a cookie; only its hash is kept. */
export const devices = pgTable(
  'devices',
  {
    id: id(),
    shopId: uuid()
      .notNull()
      .references(() => shops.id),
    siteId: uuid()
      .notNull()
      .references(() => sites.id),
    name: text().notNull(),
    station: text().notNull(),
    tokenSha256: bytes().notNull(),
    enrolledBy: uuid()
      .notNull()
      .references(() => people.id),
    enrolledAt: now(),
    revokedAt: instant(),
  },
  (t) => [uniqueIndex('devices_token').on(t.tokenSha256), index('devices_shop').on(t.shopId, t.name)],
)

/** Office changes that are not state changes of an item: who changed what of people, devices, models, settings. */
export const officeChanges = pgTable(
  'office_changes',
  {
    id: id(),
    shopId: uuid()
      .notNull()
      .references(() => shops.id),
    kind: text().notNull(),
    subjectId: uuid().notNull(),
    /** Names of the fields that changed; never personal values. */
    fields: text().array().notNull(),
    personId: uuid(),
    deviceId: uuid(),
    commandId: uuid(),
    occurredAt: instant().notNull(),
    recordedAt: now(),
  },
  (t) => [index('office_changes_subject').on(t.shopId, t.subjectId, t.recordedAt)],
)
