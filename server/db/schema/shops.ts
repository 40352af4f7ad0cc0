import {
  boolean,
  date,
  index,
  integer,
  jsonb,
  pgTable,
  primaryKey,
  text,
  uniqueIndex,
  uuid,
} from 'drizzle-orm/pg-core'
import { sql } from 'drizzle-orm'
import { bytes, id, instant, now, sequence } from '../columns'

export const shops = pgTable('shops', {
  id: id(),
  name: text().notNull(),
  /** IANA zone in which the shop's days begin and end. */
  zone: text().notNull(),
  locale: text().notNull().default('en'),
  ageOfMajority: integer().notNull().default(18),
  /** Promised time of a walk-in: arrival plus this. */
  promiseMinutes: integer().notNull().default(20),
  /** "Measure this" within these distances of a row border. Invented starting values. */
  nearMassKg: integer().notNull().default(2),
  nearHeightCm: integer().notNull().default(3),
  /** After this many minutes an unfinished claim is shown as ageing. */
  claimAgesMinutes: integer().notNull().default(30),
  demo: boolean().notNull().default(false),
  createdAt: now(),
})

/** One counter a shop; incremented last in a command's transaction, so numbers are dense and in commit order. */
export const shopSequences = pgTable('shop_sequences', {
  shopId: uuid()
    .primaryKey()
    .references(() => shops.id),
  seq: sequence().notNull().default(0),
  /** The last fitting number given out; numbers may have holes, the sequence may not. */
  lastFittingNumber: integer().notNull().default(0),
})

export const sites = pgTable(
  'sites',
  {
    id: id(),
    shopId: uuid()
      .notNull()
      .references(() => shops.id),
    name: text().notNull(),
    createdAt: now(),
  },
  (t) => [uniqueIndex('sites_name').on(t.shopId, t.name)],
)

/** A text shown before signing. Versions are added, never changed. */
export const shopTexts = pgTable(
  'shop_texts',
  {
    id: id(),
    shopId: uuid()
      .notNull()
      .references(() => shops.id),
    kind: text().notNull(),
    locale: text().notNull(),
    version: integer().notNull(),
    body: text().notNull(),
    sha256: text().notNull(),
    createdAt: now(),
    reviewedBy: uuid(),
    reviewedAt: instant(),
  },
  (t) => [uniqueIndex('shop_texts_version').on(t.shopId, t.kind, t.locale, t.version)],
)

/** A head technician compared the table edition with the standard the shop owns, and signed. Added, never changed. */
export const tableApprovals = pgTable(
  'table_approvals',
  {
    id: id(),
    shopId: uuid()
      .notNull()
      .references(() => shops.id),
    edition: text().notNull(),
    rulesVersion: text().notNull(),
    comparedWith: text().notNull(),
    approved: boolean().notNull(),
    personId: uuid().notNull(),
    occurredAt: instant().notNull(),
    recordedAt: now(),
  },
  (t) => [index('table_approvals_latest').on(t.shopId, t.edition, t.recordedAt)],
)

/** The last short number given out on a day; a short number ties a person to the queue without a name. */
export const dayNumbers = pgTable(
  'day_numbers',
  {
    shopId: uuid()
      .notNull()
      .references(() => shops.id),
    day: date().notNull(),
    last: integer().notNull().default(0),
  },
  (t) => [primaryKey({ columns: [t.shopId, t.day] })],
)

/** Every command that took effect or was finally refused, for seven days. The answer is a reference, not a copy. */
export const commandLog = pgTable(
  'command_log',
  {
    shopId: uuid()
      .notNull()
      .references(() => shops.id),
    commandId: uuid().notNull(),
    kind: text().notNull(),
    bodySha256: text().notNull(),
    status: integer().notNull(),
    /** Ids of what was made, or the code and parameters of the refusal. No personal data. */
    result: jsonb().notNull(),
    seq: sequence(),
    personId: uuid(),
    deviceId: uuid(),
    recordedAt: now(),
  },
  (t) => [primaryKey({ columns: [t.shopId, t.commandId] }), index('command_log_age').on(t.recordedAt)],
)

/** What the boards are told: ids and states only. Kept seven days. */
export const boardEvents = pgTable(
  'board_events',
  {
    shopId: uuid()
      .notNull()
      .references(() => shops.id),
    seq: sequence().notNull(),
    kind: text().notNull(),
    event: jsonb().notNull(),
    recordedAt: now(),
  },
  (t) => [primaryKey({ columns: [t.shopId, t.seq] }), index('board_events_age').on(t.recordedAt)],
)

/** The one-time code with which a real shop makes its first manager. */
export const setupCodes = pgTable('setup_codes', {
  id: id(),
  codeSha256: bytes().notNull(),
  createdAt: now(),
  usedAt: instant(),
})

/** express-session's store (connect-pg-simple) expects exactly these columns. */
export const session = pgTable(
  'session',
  {
    sid: text().primaryKey(),
    sess: jsonb().notNull(),
    expire: instant().notNull(),
    /** So that disabling a person ends every session of theirs at once. */
    personId: uuid().generatedAlwaysAs(sql`((sess->'passport'->>'user'))::uuid`),
  },
  (t) => [index('session_expire').on(t.expire), index('session_person').on(t.personId)],
)
