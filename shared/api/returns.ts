import { z } from 'zod'
import { rentalStates } from '#shared/lifecycle/fittingStates'
import { day, id, instant, itemKind, requiredLine, side } from '#shared/schemas/common'
import { itemState } from '#shared/schemas/items'
import { command, read, type AnswerOf } from './define'

/** Which ski or boot is in the hand, where the label does not say it. */
const handSide = z.enum(['left', 'right', 'both'])
/** As read from the shell; the same limits as at the counter. */
const soleLengthMm = z.int().min(150).max(400)

/** Something came back: a fact, whoever brings it and whatever else is missing. */
export const scanReturn = command({
  kind: 'returns.scan',
  path: '/api/returns/scan',
  access: 'returns.record',
  body: z.union([
    z.strictObject({ text: requiredLine(40), side: handSide.optional() }),
    z.strictObject({ itemKind, itemId: id, side: handSide }),
  ]),
  ids: z.object({
    itemKind,
    itemId: id,
    returnIds: z.array(id),
    /** The rental that it was out on; null when it was out on none. */
    rentalId: id.nullable(),
    /** It had been scanned in before and nothing was added now. */
    already: z.boolean(),
    stateBefore: itemState,
    state: itemState,
  }),
})

/** The renter's own boots have no label: their sole length is read at the shell and typed. */
export const returnOwnBoots = command({
  kind: 'returns.ownBoots',
  path: '/api/returns/own-boots',
  access: 'returns.record',
  body: z.strictObject({ rentalId: id, soleLengthMm }),
  ids: z.object({
    returnId: id,
    already: z.boolean(),
    /** The sole length is not the one that the skis were set for. */
    differs: z.boolean(),
    callBackId: id.nullable(),
  }),
})

const missingSides = z.array(side)

/** A renter as the returns desk needs them: first name and initial. */
const shortName = z.string()

export const getReturnSet = read({
  path: '/api/returns/sets/:rentalId',
  access: 'returns.record',
  params: z.object({ rentalId: id }),
  answer: z.object({
    rentalId: id,
    number: z.number().int(),
    state: z.enum(rentalStates),
    endsOn: day,
    renter: shortName,
    parts: z.array(
      z.object({
        itemKind: z.enum(['ski_pair', 'boots', 'own_boots']),
        itemId: id,
        code: z.string().nullable(),
        side: handSide,
        back: z.boolean(),
        backAt: instant.nullable(),
      }),
    ),
    /** Own boots that came back: what was read, and what the skis were set for. Not told before it was read. */
    ownBoots: z.object({ readMm: z.number().int(), fittedMm: z.number().int() }).nullable(),
  }),
})
export type ReturnSet = AnswerOf<typeof getReturnSet>

export const scannedToday = z.object({
  id,
  itemKind: z.enum(['ski_pair', 'boots', 'own_boots']),
  itemId: id,
  code: z.string().nullable(),
  side: handSide,
  at: instant,
  stateBefore: z.string().nullable(),
  /** Where the item is by now; null for own boots. */
  state: itemState.nullable(),
  rackPlace: z.string().nullable(),
  missing: missingSides,
  rentalId: id.nullable(),
  rentalNumber: z.number().int().nullable(),
  renter: shortName.nullable(),
  soleLengthReadMm: z.number().int().nullable(),
  fittedSoleLengthMm: z.number().int().nullable(),
})
export type ScannedToday = z.infer<typeof scannedToday>

export const dueSet = z.object({
  rentalId: id,
  number: z.number().int(),
  renter: shortName,
  endsOn: day,
  siteId: id,
  parts: z.number().int(),
  out: z.number().int(),
})
export type DueSet = z.infer<typeof dueSet>

/** The day at the returns desk: what was scanned in, newest first, and the sets that are due. */
export const getReturnsToday = read({
  path: '/api/returns/today',
  access: 'returns.record',
  query: z.object({ siteId: id.optional() }),
  answer: z.object({ today: day, scans: z.array(scannedToday), sets: z.array(dueSet) }),
})
