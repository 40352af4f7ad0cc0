import { z } from 'zod'
import { soleTypes } from '#shared/compatibility/soleFit'
import { rentalStates } from '#shared/lifecycle/fittingStates'
import { requestSchema, skierTypeSchema } from '#shared/release/releaseInput'
import { guardianRelations } from '#shared/renters/guardian'
import { day, id, instant, line, note, pngDataUrl } from '#shared/schemas/common'
import {
  born,
  contact,
  period,
  renterForm,
  renterInputs,
  renterLocale,
  shoe,
  valueSource,
} from '#shared/schemas/renters'
import { heightSchema, massSchema } from '#shared/units/bodySchemas'
import { command, read } from './define'

const rentalRow = z.object({
  id,
  /** Short number of the day that it arrived on. */
  number: z.number().int(),
  state: z.enum(rentalStates),
  name: z.string(),
  siteId: id,
  startsOn: day,
  endsOn: day,
  arrivedAt: instant,
  promisedAt: instant,
  takenBy: z.string().nullable(),
  minor: z.boolean(),
  /** The newest fitting of it, if any. */
  fitting: z.object({ id, number: z.number().int(), state: z.string(), skiPair: z.string() }).nullable(),
  /** Skis, boots and own boots that are out. */
  out: z.number().int(),
})
export type RentalRow = z.infer<typeof rentalRow>

/** Who is here, by promised time, and whom one looks for: by part of a name, phone, short number or label. */
export const listRentals = read({
  path: '/api/rentals',
  access: 'renters.read',
  query: z.object({
    show: z.enum(['here', 'waiting', 'out', 'all']).default('here'),
    search: z.string().trim().max(80).default(''),
    site: z.union([id, z.literal('')]).default(''),
  }),
  /** `more`: others match too; only the first hundred are shown. */
  answer: z.object({ rows: z.array(rentalRow), more: z.boolean() }),
})

export const ownBoots = z.object({
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
  at: instant,
})
export type OwnBoots = z.infer<typeof ownBoots>

export const rentalDetail = rentalRow.extend({
  renter: z.object({
    id,
    firstName: z.string(),
    lastName: z.string(),
    email: z.string().nullable(),
    phone: z.string().nullable(),
    locale: renterLocale,
    birthDate: day.nullable(),
    guardianName: z.string().nullable(),
    guardianRelation: z.enum(guardianRelations).nullable(),
    guardianPhone: z.string().nullable(),
    version: z.number().int(),
  }),
  inputs: renterInputs.nullable(),
  shoe: shoe.nullable(),
  ownBootsWanted: z.boolean(),
  ownBoots: ownBoots.nullable(),
  wishes: z.string(),
  rentalDays: z.number().int(),
  items: z.array(
    z.object({
      itemKind: z.enum(['ski_pair', 'boots', 'own_boots']),
      code: z.string(),
      side: z.enum(['left', 'right', 'both']),
      backAt: instant.nullable(),
    }),
  ),
  fittings: z.array(
    z.object({
      id,
      number: z.number().int(),
      state: z.string(),
      skiPair: z.string(),
      boots: z.string().nullable(),
      value: z.number(),
      at: instant,
      endReason: z.string().nullable(),
      recordId: id.nullable(),
    }),
  ),
  decisions: z.array(
    z.object({
      id,
      kind: z.string(),
      reason: z.string(),
      by: z.string(),
      at: instant,
      value: z.number().nullable(),
      skiPairId: id.nullable(),
      bootsId: id.nullable(),
      ownBootsId: id.nullable(),
    }),
  ),
  /** What of the shop's settings the renter's data are judged with. */
  shop: z.object({
    today: day,
    ageOfMajority: z.number().int(),
    nearMassKg: z.number().int(),
    nearHeightCm: z.number().int(),
  }),
})
export type RentalDetail = z.infer<typeof rentalDetail>

export const getRental = read({
  path: '/api/rentals/:id',
  access: 'renters.read',
  params: z.object({ id }),
  answer: rentalDetail,
})

/** What the desk needs to know before it types a walk-in. */
export const getRentalFormFacts = read({
  path: '/api/rental-form',
  access: 'renters.write',
  answer: z.object({
    shop: z.string(),
    today: day,
    ageOfMajority: z.number().int(),
    nearMassKg: z.number().int(),
    nearHeightCm: z.number().int(),
    promiseMinutes: z.number().int(),
    sentencesReviewed: z.boolean(),
  }),
})
export type RentalFormFacts = z.infer<typeof getRentalFormFacts.answer>

/** The renter chose how they ski, on the turned screen: the shop may not choose it for them. */
const chosenByRenter = z.literal(true)

/** A walk-in typed at the desk. */
export const createRental = command({
  kind: 'rentals.create',
  path: '/api/rentals/create',
  access: 'renters.write',
  body: z.strictObject({
    siteId: id,
    form: renterForm,
    massSource: valueSource,
    heightSource: valueSource,
    skierTypeByRenter: chosenByRenter,
  }),
  ids: z.object({ rentalId: id, renterId: id }),
})

export const takeRental = command({
  kind: 'rentals.take',
  path: '/api/rentals/take',
  access: 'renters.write',
  body: z.strictObject({ rentalId: id }),
  ids: z.object({ rentalId: id }),
})

/** They did not come, or want nothing after all: what is held for them goes back to the racks. */
export const cancelRental = command({
  kind: 'rentals.cancel',
  path: '/api/rentals/cancel',
  access: 'renters.write',
  body: z.strictObject({ rentalId: id, reason: z.enum(['no_show', 'given_back']) }),
  ids: z.object({ rentalId: id }),
})

/** Names, addresses, language, guardian: nothing of it voids a fitting. */
export const changeContact = command({
  kind: 'renters.changeContact',
  path: '/api/renters/contact',
  access: 'renters.write',
  body: contact.extend({ rentalId: id, version: z.int() }),
  ids: z.object({ renterId: id }),
})

/**
 * What a fitting is computed from, of the renter's own. A changed value voids the renter's open fittings; the same
 * value, now measured, does not.
 */
export const changeInputs = command({
  kind: 'renters.changeInputs',
  path: '/api/renters/inputs',
  access: 'renters.write',
  body: born.extend({
    rentalId: id,
    /** The inputs that the screen showed. */
    seenInputsId: id,
    mass: massSchema,
    massSource: valueSource,
    height: heightSchema,
    heightSource: valueSource,
    skierType: skierTypeSchema,
    skierTypeByRenter: chosenByRenter,
  }),
  ids: z.object({ inputsId: id }),
})

/** The renter's signed request for one row lower or higher, or taking it back. */
export const requestRow = command({
  kind: 'renters.request',
  path: '/api/renters/request',
  access: 'renters.write',
  body: z.strictObject({
    rentalId: id,
    seenInputsId: id,
    request: requestSchema,
    signedName: line(120),
    signature: pngDataUrl.nullable(),
  }),
  ids: z.object({ inputsId: id }),
})

export const changePeriod = command({
  kind: 'rentals.changePeriod',
  path: '/api/rentals/period',
  access: 'renters.write',
  body: period.extend({ rentalId: id }),
  ids: z.object({ rentalId: id }),
})

export const readOwnBoots = command({
  kind: 'ownBoots.read',
  path: '/api/own-boots/read',
  access: 'renters.write',
  body: z.strictObject({
    rentalId: id,
    description: note(200),
    soleLengthMm: z.int().min(150).max(400),
    soleType: z.enum(soleTypes),
    wear: z.enum(['sound', 'worn']),
  }),
  ids: z.object({ ownBootsId: id }),
})

/** Somebody else of the workshop looked too and says the same. Who does not reads them anew. */
export const secondLook = command({
  kind: 'ownBoots.secondLook',
  path: '/api/own-boots/second-look',
  access: 'tickets.work',
  body: z.strictObject({ ownBootsId: id }),
  ids: z.object({ ownBootsId: id }),
})
