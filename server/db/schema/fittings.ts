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
import { sql } from 'drizzle-orm'
import type { TrackPlan } from '#shared/track/trackPlan'
import type { ReleaseOutcome, Targets } from '#shared/schemas/fittings'
import type { PartReading } from '#shared/schemas/records'
import { id, instant, millimetres, now } from '../columns'
import { devices, people } from './people'
import { fittingInputs, ownBoots, rentals, renters } from './renters'
import { shops, sites } from './shops'
import { boots, skiPairs, skis } from './things'

/**
 * One renter, one pair of boots, one ski pair, and what was computed for them. `basis` lists what it was computed
 * from; the database writes it and compares it again at hand-over.
 */
export const fittings = pgTable(
  'fittings',
  {
    id: id(),
    shopId: uuid()
      .notNull()
      .references(() => shops.id),
    siteId: uuid()
      .notNull()
      .references(() => sites.id),
    number: integer().notNull(),
    rentalId: uuid()
      .notNull()
      .references(() => rentals.id),
    renterId: uuid()
      .notNull()
      .references(() => renters.id),
    inputsId: uuid().references(() => fittingInputs.id, { onDelete: 'set null' }),
    skiPairId: uuid()
      .notNull()
      .references(() => skiPairs.id),
    bootsId: uuid().references(() => boots.id),
    ownBootsId: uuid().references(() => ownBoots.id),
    state: text().notNull().default('claimed'),
    soleLengthMm: millimetres().notNull(),
    /** Without the body values: those stay with the inputs, and "why" is computed again from them. */
    release: jsonb().$type<ReleaseOutcome>().notNull(),
    /** The value that the bench sets: the computed one, or a head technician's decision. */
    value: doublePrecision().notNull(),
    track: jsonb().$type<Extract<TrackPlan, { ok: true }>>().notNull(),
    /** Target indicator per ski and unit: value + correction, rounded down to the scale's step. */
    targets: jsonb().$type<Targets>().notNull(),
    edition: text().notNull(),
    rulesVersion: text().notNull(),
    /** Whether the shop's head technician had signed this edition and rules when the fitting was computed. */
    approved: boolean().notNull(),
    decisionIds: uuid()
      .array()
      .notNull()
      .default(sql`'{}'::uuid[]`),
    basis: jsonb().$type<FittingBasis>().notNull().default({}),
    inputsHash: text().notNull().default(''),
    promisedAt: instant().notNull(),
    claimedBy: uuid()
      .notNull()
      .references(() => people.id),
    claimedDeviceId: uuid().references(() => devices.id),
    claimedAt: instant().notNull(),
    /** Who has the ticket at the bench now. */
    heldBy: uuid().references(() => people.id),
    heldDeviceId: uuid().references(() => devices.id),
    heldSince: instant(),
    recordId: uuid(),
    preparedAt: instant(),
    endedAt: instant(),
    endReason: text(),
    recordedAt: now(),
  },
  (t) => [
    uniqueIndex('fittings_number').on(t.shopId, t.number),
    uniqueIndex('fittings_open_ski_pair')
      .on(t.skiPairId)
      .where(sql`${t.state} in ('claimed', 'prepared')`),
    uniqueIndex('fittings_open_boots')
      .on(t.bootsId)
      .where(sql`${t.state} in ('claimed', 'prepared')`),
    index('fittings_queue').on(t.shopId, t.state, t.promisedAt),
    index('fittings_rental').on(t.rentalId),
    index('fittings_renter').on(t.renterId),
  ],
)
export type FittingBasis = Record<string, string>

/** A head technician's (or, for a second look, a technician's) reasoned decision. Added, never changed. */
export const fittingDecisions = pgTable(
  'fitting_decisions',
  {
    id: id(),
    shopId: uuid()
      .notNull()
      .references(() => shops.id),
    rentalId: uuid()
      .notNull()
      .references(() => rentals.id),
    fittingId: uuid(),
    skiPairId: uuid(),
    skiId: uuid(),
    bootsId: uuid(),
    ownBootsId: uuid(),
    kind: text().notNull(),
    reason: text().notNull(),
    /** Rows from the computed row, for a value decided otherwise. */
    rows: integer(),
    value: doublePrecision(),
    /** The reading that was decided to stand, for a mark that differs. */
    reading: jsonb().$type<PartReading>(),
    personId: uuid()
      .notNull()
      .references(() => people.id),
    secondPersonId: uuid().references(() => people.id),
    deviceId: uuid(),
    occurredAt: instant().notNull(),
    recordedAt: now(),
  },
  (t) => [index('fitting_decisions_rental').on(t.rentalId, t.recordedAt)],
)

/** Who took a ticket at the bench, and from whom. Added, never changed. */
export const ticketHolds = pgTable(
  'ticket_holds',
  {
    id: id(),
    shopId: uuid()
      .notNull()
      .references(() => shops.id),
    fittingId: uuid()
      .notNull()
      .references(() => fittings.id),
    personId: uuid()
      .notNull()
      .references(() => people.id),
    deviceId: uuid(),
    tookOverFrom: uuid().references(() => people.id),
    occurredAt: instant().notNull(),
    recordedAt: now(),
  },
  (t) => [index('ticket_holds_fitting').on(t.fittingId, t.recordedAt)],
)

/** What one ski showed when it was read back at the bench. The latest of a ski counts. Added, never changed. */
export const skiReadings = pgTable(
  'ski_readings',
  {
    id: id(),
    shopId: uuid()
      .notNull()
      .references(() => shops.id),
    fittingId: uuid()
      .notNull()
      .references(() => fittings.id),
    skiId: uuid()
      .notNull()
      .references(() => skis.id),
    side: text().$type<'left' | 'right'>().notNull(),
    reading: jsonb().$type<PartReading>().notNull(),
    /** `matches`, `window_decides` or `head_technician` (with the decision). */
    verdict: text().notNull(),
    decisionId: uuid().references(() => fittingDecisions.id),
    presetVersion: integer().notNull(),
    personId: uuid()
      .notNull()
      .references(() => people.id),
    deviceId: uuid(),
    occurredAt: instant().notNull(),
    recordedAt: now(),
  },
  (t) => [index('ski_readings_fitting').on(t.fittingId, t.side, t.recordedAt)],
)
