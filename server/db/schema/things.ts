import {
  boolean,
  doublePrecision,
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
import type { TrackModel } from '#shared/track/trackModel'
import { bytes, code, id, instant, millimetres, now, sequence } from '../columns'
import { people } from './people'
import { shops, sites } from './shops'

export const skiModels = pgTable(
  'ski_models',
  {
    id: id(),
    shopId: uuid()
      .notNull()
      .references(() => shops.id),
    name: text().notNull(),
    waistMm: millimetres().notNull(),
    /** Distance of the shop's mounting mark from the maker's, for the whole model; positive is forward. */
    offsetMm: doublePrecision().notNull().default(0),
    junior: boolean().notNull().default(false),
    createdAt: now(),
  },
  (t) => [uniqueIndex('ski_models_name').on(t.shopId, t.name)],
)

/** A binding with its track. What was approved is the content hash; any change of it needs a new approval. */
export const bindingModels = pgTable(
  'binding_models',
  {
    id: id(),
    shopId: uuid()
      .notNull()
      .references(() => shops.id),
    name: text().notNull(),
    track: jsonb().$type<TrackModel>().notNull(),
    /** Sole types that it accepts; a type that is in neither list is unknown and a head technician decides. */
    accepts: text().array().notNull(),
    refuses: text().array().notNull(),
    brakeMm: millimetres(),
    manualDocument: text().notNull().default(''),
    manualEdition: text().notNull().default(''),
    manualPage: text().notNull().default(''),
    /** What the forward-pressure window must look like, in words and as a picture. */
    windowNote: text().notNull().default(''),
    windowPicture: bytes(),
    windowPictureType: text(),
    /** Hash over everything that an approval vouches for; kept by the database. */
    contentSha256: text().notNull().default(''),
    version: integer().notNull().default(1),
    blockedAt: instant(),
    blockedReason: text(),
    createdAt: now(),
  },
  (t) => [uniqueIndex('binding_models_name').on(t.shopId, t.name)],
)

/** A head technician approved a binding model's sheet as it then was. Added, never changed. */
export const bindingModelApprovals = pgTable(
  'binding_model_approvals',
  {
    id: id(),
    shopId: uuid()
      .notNull()
      .references(() => shops.id),
    bindingModelId: uuid()
      .notNull()
      .references(() => bindingModels.id),
    contentSha256: text().notNull(),
    personId: uuid()
      .notNull()
      .references(() => people.id),
    occurredAt: instant().notNull(),
    recordedAt: now(),
  },
  (t) => [index('binding_model_approvals_model').on(t.bindingModelId, t.contentSha256)],
)

const item = {
  id: id(),
  shopId: uuid()
    .notNull()
    .references(() => shops.id),
  /** What people say: S417, B288. */
  code: code().notNull(),
  /** Projection of the latest state change; only the database writes it. */
  state: text().notNull().default('commissioning'),
  stateSince: now(),
  homeSiteId: uuid()
    .notNull()
    .references(() => sites.id),
  siteId: uuid()
    .notNull()
    .references(() => sites.id),
  rackPlace: text(),
  version: integer().notNull().default(1),
  createdAt: now(),
}

export const skiPairs = pgTable(
  'ski_pairs',
  {
    ...item,
    skiModelId: uuid()
      .notNull()
      .references(() => skiModels.id),
    bindingModelId: uuid()
      .notNull()
      .references(() => bindingModels.id),
    lengthCm: integer().notNull(),
    season: integer().notNull(),
  },
  (t) => [
    uniqueIndex('ski_pairs_code').on(t.shopId, t.code),
    index('ski_pairs_state').on(t.shopId, t.state, t.code),
    index('ski_pairs_binding').on(t.shopId, t.bindingModelId, t.state),
  ],
)

/** One ski of a pair. A preset is where its units were last read to stand: a belief, not a fact. */
export const skis = pgTable(
  'skis',
  {
    id: id(),
    shopId: uuid()
      .notNull()
      .references(() => shops.id),
    skiPairId: uuid()
      .notNull()
      .references(() => skiPairs.id),
    side: text().$type<'left' | 'right'>().notNull(),
    presetToe: integer(),
    presetHeel: integer(),
    presetTurns: doublePrecision(),
    presetReadAt: instant(),
    /** Counts every change of a preset; a fitting record remembers the number it left behind. */
    presetVersion: integer().notNull().default(0),
    /** Target indicator = release value + correction, per unit, from torque tests. */
    toeCorrection: doublePrecision().notNull().default(0),
    heelCorrection: doublePrecision().notNull().default(0),
  },
  (t) => [uniqueIndex('skis_side').on(t.skiPairId, t.side)],
)

export const boots = pgTable(
  'boots',
  {
    ...item,
    model: text().notNull(),
    /** Mondopoint, in halves of a centimetre times ten: 265 is 26.5. */
    mondo: integer().notNull(),
    soleLengthMm: millimetres().notNull(),
    soleType: text().notNull(),
    season: integer().notNull(),
  },
  (t) => [
    uniqueIndex('boots_code').on(t.shopId, t.code),
    index('boots_state').on(t.shopId, t.state, t.code),
    index('boots_sole').on(t.shopId, t.soleLengthMm),
  ],
)

/** A label on one ski or one boot. Relabelling ends a row and adds one: history stays. */
export const labels = pgTable(
  'labels',
  {
    id: id(),
    shopId: uuid()
      .notNull()
      .references(() => shops.id),
    text: text().notNull(),
    itemKind: text().$type<'ski_pair' | 'boots'>().notNull(),
    itemId: uuid().notNull(),
    side: text().$type<'left' | 'right'>().notNull(),
    since: now(),
    until: instant(),
  },
  (t) => [
    uniqueIndex('labels_text')
      .on(t.shopId, t.text)
      .where(sql`${t.until} is null`),
    index('labels_item').on(t.itemId),
  ],
)

/** Every change of a state: the fact of which an item's state column is the projection. Added, never changed. */
export const stateChanges = pgTable(
  'state_changes',
  {
    id: id(),
    shopId: uuid()
      .notNull()
      .references(() => shops.id),
    itemKind: text().$type<'ski_pair' | 'boots'>().notNull(),
    itemId: uuid().notNull(),
    fromState: text().notNull(),
    toState: text().notNull(),
    siteId: uuid()
      .notNull()
      .references(() => sites.id),
    rackPlace: text(),
    reason: text(),
    /** The fitting, hold or inspection that this change belongs to. */
    subjectId: uuid(),
    /** The change that this one takes back. */
    undoesId: uuid(),
    personId: uuid().references(() => people.id),
    deviceId: uuid(),
    commandId: uuid(),
    /** Order among the changes of one item; given by the database. */
    itemSeq: sequence().notNull().default(0),
    occurredAt: instant().notNull(),
    recordedAt: now(),
  },
  (t) => [
    uniqueIndex('state_changes_item').on(t.itemId, t.itemSeq),
    index('state_changes_shop').on(t.shopId, t.recordedAt),
  ],
)

/** Every change of where a unit stands or of its correction. Added, never changed. */
export const presetChanges = pgTable(
  'preset_changes',
  {
    id: id(),
    shopId: uuid()
      .notNull()
      .references(() => shops.id),
    skiId: uuid()
      .notNull()
      .references(() => skis.id),
    presetToe: integer(),
    presetHeel: integer(),
    presetTurns: doublePrecision(),
    presetVersion: integer().notNull(),
    toeCorrection: doublePrecision().notNull(),
    heelCorrection: doublePrecision().notNull(),
    reason: text().notNull(),
    fittingId: uuid(),
    personId: uuid().references(() => people.id),
    deviceId: uuid(),
    occurredAt: instant().notNull(),
    recordedAt: now(),
  },
  (t) => [index('preset_changes_ski').on(t.skiId, t.presetVersion)],
)

/** The edges of the life cycle, as the database holds them; the same list as in shared/lifecycle. */
export const lifecycleEdges = pgTable(
  'lifecycle_edges',
  { fromState: text().notNull(), toState: text().notNull() },
  (t) => [primaryKey({ columns: [t.fromState, t.toState] })],
)
