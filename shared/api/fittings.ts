import { z } from 'zod'
import { fittingStates } from '#shared/lifecycle/fittingStates'
import { releaseInputSchema } from '#shared/release/releaseInput'
import { day, id, instant, reason } from '#shared/schemas/common'
import {
  decisionFact,
  decisionKinds,
  fittingFacts,
  ownBootsFact,
  shopBootsFact,
  skiPairFact,
} from '#shared/schemas/fittingFacts'
import { releaseOutcome, targets } from '#shared/schemas/fittings'
import { partReading } from '#shared/schemas/records'
import { trackModelSchema } from '#shared/track/trackModel'
import { command, read } from './define'

/** Takes boots and ski pair for a renter. Results never travel: the server computes from the items' own rows. */
export const claimFitting = command({
  kind: 'fittings.claim',
  path: '/api/fittings/claim',
  access: 'fittings.claim',
  body: z.strictObject({
    rentalId: id,
    skiPairId: id,
    /** Null: the renter's own boots, as they were last read. */
    bootsId: id.nullable(),
    /** The open fitting of this rental that ends with this one. */
    replacesFittingId: id.optional(),
  }),
  ids: z.object({ fittingId: id }),
})

export const giveBackFitting = command({
  kind: 'fittings.giveBack',
  path: '/api/fittings/give-back',
  access: 'fittings.claim',
  body: z.strictObject({ fittingId: id, reason: z.enum(['given_back', 'no_show']) }),
  ids: z.object({ fittingId: id }),
})

/** A head technician's reasoned decision about this renter, these boots and this pair together. */
export const decideFitting = command({
  kind: 'fittings.decide',
  path: '/api/fittings/decide',
  access: 'fittings.decide',
  body: z.strictObject({
    rentalId: id,
    skiPairId: id,
    bootsId: id.nullable(),
    kind: z.enum(decisionKinds),
    /** For a value decided otherwise: rows from the computed one, positive is a higher value, 0 takes it back. */
    rows: z.literal([-2, -1, 0, 1, 2]).optional(),
    /** The second name, for a value more than one row up; proved by their PIN. */
    secondPersonId: id.optional(),
    reason,
  }),
  ids: z.object({ decisionId: id }),
})

/** What a fitting of these parts would be computed from; a part that is not chosen yet is null. */
export const getFittingFacts = read({
  path: '/api/fittings/facts',
  access: 'renters.read',
  query: z.object({
    rentalId: id,
    skiPairId: id.optional(),
    bootsId: id.optional(),
    /** The renter's own boots, instead of a pair of the shop's. */
    boots: z.literal('own').optional(),
  }),
  answer: fittingFacts.extend({
    renter: z.object({
      id,
      firstName: z.string(),
      lastName: z.string(),
      guardianName: z.string().nullable(),
    }),
    promisedAt: instant,
    arrivedAt: instant,
    wishes: z.string(),
  }),
})

const notches = z.object({ toe: z.number().int(), heel: z.number().int() })

/** A pair that is free, with how far its units stand from where these boots need them. */
export const suggestedPair = z.object({
  id,
  code: z.string(),
  lengthCm: z.number().int(),
  model: z.string(),
  binding: z.string(),
  bindingModelId: id,
  siteId: id,
  site: z.string(),
  sameSite: z.boolean(),
  rackPlace: z.string().nullable(),
  target: notches.extend({ turns: z.number().nullable() }),
  presets: z.object({ left: notches.nullable(), right: notches.nullable() }),
  /** Notches over both skis, toe and heel; null where a preset is unknown. */
  notches: z.number().int().nullable(),
  inAdvisedLength: z.boolean(),
  needsDecision: z.boolean(),
})
export type SuggestedPair = z.infer<typeof suggestedPair>

export const suggestPairs = read({
  path: '/api/fittings/suggest',
  access: 'fittings.claim',
  query: z.object({ rentalId: id, bootsId: id.optional() }),
  answer: z.object({
    soleLengthMm: z.number().int().nullable(),
    lengthAdvice: z.object({ minCm: z.number().int(), maxCm: z.number().int() }).nullable(),
    pairs: z.array(suggestedPair),
    /** How many fit in all; the list holds the best of them. */
    total: z.number().int(),
    /** Track of each binding model in the list, to draw the rule. */
    tracks: z.record(z.string(), trackModelSchema),
  }),
})

export const bootsFor = read({
  path: '/api/boots-for',
  access: 'fittings.claim',
  query: z.object({
    rentalId: id,
    /** A size to look for instead of the form's: mondopoint times ten, 265 is 26.5. */
    mondo: z.coerce.number().int().min(130).max(360).optional(),
  }),
  answer: z.object({
    /** Mondopoint times ten: the size asked for, or by shoe size or foot length; null when none is known. */
    adviceMondo: z.number().int().nullable(),
    boots: z.array(
      shopBootsFact.omit({ kind: true, state: true }).extend({ site: z.string(), sameSite: z.boolean() }),
    ),
    total: z.number().int(),
  }),
})

const person = z.object({ id, name: z.string() })

/** What one ski showed when it was last read back for this fitting. */
const readingLine = z.object({
  id,
  skiId: id,
  reading: partReading,
  verdict: z.string(),
  decisionId: id.nullable(),
  presetVersion: z.number().int(),
  by: person,
  at: instant,
})

/** A fitting for counter, bench and hand-over. No body values: those are in "why", for who may read renters. */
export const getFitting = read({
  path: '/api/fittings/:id',
  access: 'fittings.read',
  params: z.object({ id }),
  answer: z.object({
    id,
    number: z.number().int(),
    state: z.enum(fittingStates),
    site: person,
    promisedAt: instant,
    rental: z.object({ id, number: z.number().int(), startsOn: day, endsOn: day, ownBoots: z.boolean() }),
    renter: z.object({
      id,
      firstName: z.string(),
      lastName: z.string(),
      /** Under the age of majority that the shop set, on the first day; null without a birth date. */
      minor: z.boolean().nullable(),
      guardianName: z.string().nullable(),
      locale: z.string(),
    }),
    skiPair: skiPairFact,
    /** The shop's boots, or the renter's own as last read. */
    boots: z.discriminatedUnion('kind', [
      shopBootsFact.extend({
        labels: z.object({ left: z.string().nullable(), right: z.string().nullable() }),
      }),
      ownBootsFact,
    ]),
    soleLengthMm: z.number().int(),
    release: releaseOutcome,
    /** What the bench sets, before a unit's correction. */
    value: z.number(),
    /** Where both skis' units go: notches, and turns of the fine screw from its neutral mark. */
    track: notches.extend({ turns: z.number().nullable(), centreShiftMm: z.number(), gapMm: z.number() }),
    targets,
    edition: z.string(),
    rulesVersion: z.string(),
    approved: z.boolean(),
    decisions: z.array(decisionFact.omit({ kind: true }).extend({ kind: z.string() })),
    claimedBy: person,
    claimedAt: instant,
    heldBy: person.nullable(),
    heldSince: instant.nullable(),
    /** Who took the ticket and from whom, oldest first. */
    holds: z.array(z.object({ by: z.string(), from: z.string().nullable(), at: instant })),
    readings: z.object({ left: readingLine.nullable(), right: readingLine.nullable() }),
    record: z.object({ id, signedBy: person, signedAt: instant }).nullable(),
    preparedAt: instant.nullable(),
    endedAt: instant.nullable(),
    endReason: z.string().nullable(),
    /** What it was computed from and is no longer so: `renter_data`, `sole`, `binding_model` ... */
    changed: z.array(z.string()),
  }),
})

/** The values behind a fitting, so that every step can be shown again; null once they were erased. */
export const getFittingWhy = read({
  path: '/api/fittings/:id/why',
  access: 'renters.read',
  params: z.object({ id }),
  answer: z.object({
    input: releaseInputSchema.nullable(),
    /** Rows that a head technician moved from the computed one. */
    decidedRows: z.number().int().nullable(),
    /** A value of the nearest column, taken by decision where the sole is longer than the row has. */
    sidewaysDecided: z.boolean(),
    rulesVersion: z.string(),
    /** Whether computing it again now gives what was stored; null once the values were erased. */
    same: z.boolean().nullable(),
  }),
})
