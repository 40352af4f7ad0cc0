import { z } from 'zod'
import { soleTypes } from '#shared/compatibility/soleFit'
import { rentalStates } from '#shared/lifecycle/fittingStates'
import { itemStates } from '#shared/lifecycle/itemStates'
import { editionSchema, requestSchema, skierTypeSchema } from '#shared/release/releaseInput'
import { trackModelSchema } from '#shared/track/trackModel'
import { heightSchema, massSchema } from '#shared/units/bodySchemas'
import { id, instant } from './common'

/**
 * Everything that a fitting is computed from. The server reads it from the items' own rows, the counter's screen
 * gets the very same and computes with the same function.
 */

const source = z.enum(['declared', 'measured'])

/** A renter's body values with who gave them. */
export const fittingInputsFact = z.object({
  id,
  mass: massSchema,
  massSource: source,
  massBy: z.string().nullable(),
  height: heightSchema,
  heightSource: source,
  heightBy: z.string().nullable(),
  /** Whole years that the table is read with, on the rental's days. */
  age: z.number().int(),
  skierType: skierTypeSchema,
  request: requestSchema,
  requestSignedName: z.string().nullable(),
  at: instant,
})
export type FittingInputsFact = z.infer<typeof fittingInputsFact>

export const shopBootsFact = z.object({
  kind: z.literal('shop'),
  id,
  code: z.string(),
  model: z.string(),
  state: z.enum(itemStates),
  siteId: id,
  rackPlace: z.string().nullable(),
  soleLengthMm: z.number().int(),
  soleType: z.enum(soleTypes),
  /** Mondopoint centimetres times ten. */
  mondo: z.number().int(),
})

/** The renter's own boots as the latest reading judged them. */
export const ownBootsFact = z.object({
  kind: z.literal('own'),
  id,
  description: z.string(),
  soleLengthMm: z.number().int(),
  soleType: z.enum(soleTypes),
  wear: z.enum(['sound', 'worn']),
  judgedBy: z.string(),
  judgedById: id,
  /** Judged by a head technician, who needs no second look. */
  judgedByHead: z.boolean(),
  secondLookBy: z.string().nullable(),
})
export const bootsFact = z.discriminatedUnion('kind', [shopBootsFact, ownBootsFact])
export type BootsFact = z.infer<typeof bootsFact>

/** Where the units of one ski were last read to stand; notches, not marks. */
export const skiFact = z.object({
  id,
  label: z.string().nullable(),
  preset: z
    .object({ toe: z.number().int(), heel: z.number().int(), turns: z.number().nullable() })
    .nullable(),
  presetReadAt: instant.nullable(),
  presetVersion: z.number().int(),
  toeCorrection: z.number(),
  heelCorrection: z.number(),
})
export type SkiFact = z.infer<typeof skiFact>

export const bindingFact = z.object({
  id,
  name: z.string(),
  track: trackModelSchema,
  accepts: z.array(z.string()),
  refuses: z.array(z.string()),
  brakeMm: z.number().int().nullable(),
  /** Whether a head technician signed this sheet as it now stands. */
  approved: z.boolean(),
  blockedReason: z.string().nullable(),
  manualDocument: z.string(),
  manualEdition: z.string(),
  manualPage: z.string(),
  windowNote: z.string(),
  hasWindowPicture: z.boolean(),
})

export const skiPairFact = z.object({
  id,
  code: z.string(),
  state: z.enum(itemStates),
  siteId: id,
  rackPlace: z.string().nullable(),
  lengthCm: z.number().int(),
  model: z.string(),
  waistMm: z.number().int(),
  /** Distance of the mounting mark from the maker's, positive forward. */
  offsetMm: z.number(),
  binding: bindingFact,
  skis: z.object({ left: skiFact, right: skiFact }),
})
export type SkiPairFact = z.infer<typeof skiPairFact>

export const decisionKinds = [
  'unknown_sole',
  'sideways_value',
  'value_override',
  'individual_test',
  'own_boots',
] as const
export type DecisionKind = (typeof decisionKinds)[number]

/** A reasoned decision about this renter with these boots on this pair. */
export const decisionFact = z.object({
  id,
  kind: z.enum(decisionKinds),
  skiPairId: id.nullable(),
  /** The shop's boots or the reading of the renter's own. */
  bootsId: id.nullable(),
  rows: z.number().int().nullable(),
  value: z.number().nullable(),
  reason: z.string(),
  by: z.string(),
  secondBy: z.string().nullable(),
  at: instant,
})
export type DecisionFact = z.infer<typeof decisionFact>

/** An open fitting of the same rental, which a new one replaces. */
export const openFittingFact = z.object({
  id,
  number: z.number().int(),
  state: z.enum(['claimed', 'prepared']),
  skiPairId: id,
  /** Null: the renter's own. */
  bootsId: id.nullable(),
  value: z.number(),
  by: z.string(),
  since: instant,
})

/** Who has an item that is not free, since when. */
export const holderFact = z.object({
  fittingId: id,
  number: z.number().int(),
  rentalId: id,
  by: z.string(),
  since: instant,
})
export type HolderFact = z.infer<typeof holderFact>

export const fittingFacts = z.object({
  rental: z.object({
    id,
    number: z.number().int(),
    state: z.enum(rentalStates),
    siteId: id,
    startsOn: z.iso.date(),
    endsOn: z.iso.date(),
    ownBoots: z.boolean(),
  }),
  inputs: fittingInputsFact.nullable(),
  boots: bootsFact.nullable(),
  bootsHolder: holderFact.nullable(),
  skiPair: skiPairFact.nullable(),
  skiPairHolder: holderFact.nullable(),
  decisions: z.array(decisionFact),
  openFitting: openFittingFact.nullable(),
  edition: editionSchema,
  /** Whether the shop's head technician signed this edition and these rules. */
  approved: z.boolean(),
  /** The shop's borders for "measure this". */
  near: z.object({ massKg: z.number(), heightCm: z.number() }),
})
export type FittingFacts = z.infer<typeof fittingFacts>
