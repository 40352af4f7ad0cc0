import { z } from 'zod'
import { fittingStates, rentalStates } from '#shared/lifecycle/fittingStates'
import { itemStates } from '#shared/lifecycle/itemStates'
import { id, instant, itemKind } from './common'

/**
 * The board's rows: ids, codes, states, times. No name, no body data, ever; staff screens fetch names by their own
 * read. An event carries whole rows, so that applying one twice changes nothing.
 */
export const boardItem = z.object({
  id,
  kind: itemKind,
  code: z.string(),
  state: z.enum(itemStates),
  since: instant,
  siteId: id,
  rackPlace: z.string().nullable(),
  /** Labels' sides that are still with a renter, when the other came back. */
  missing: z.array(z.enum(['left', 'right'])),
})
export type BoardItem = z.infer<typeof boardItem>

export const boardFitting = z.object({
  id,
  number: z.number().int(),
  rentalId: id,
  skiPairId: id,
  bootsId: id.nullable(),
  siteId: id,
  state: z.enum(fittingStates),
  promisedAt: instant,
  claimedAt: instant,
  claimedBy: id,
  heldBy: id.nullable(),
  heldSince: instant.nullable(),
  preparedAt: instant.nullable(),
})
export type BoardFitting = z.infer<typeof boardFitting>

export const boardRental = z.object({
  id,
  number: z.number().int(),
  state: z.enum(rentalStates),
  siteId: id,
  arrivedAt: instant,
  promisedAt: instant,
  endsOn: z.iso.date(),
  /** Ski, boot and own-boots rows that are out, by item id and side. */
  out: z.number().int(),
})
export type BoardRental = z.infer<typeof boardRental>

export const boardEvent = z.object({
  seq: z.number().int(),
  kind: z.string(),
  at: instant,
  items: z.array(boardItem),
  fittings: z.array(boardFitting),
  rentals: z.array(boardRental),
  /** Open call-backs after this event, when it changed them. */
  callBacks: z.number().int().optional(),
})
export type BoardEvent = z.infer<typeof boardEvent>

export const boardSnapshot = z.object({
  seq: z.number().int(),
  asOf: instant,
  items: z.array(boardItem),
  fittings: z.array(boardFitting),
  rentals: z.array(boardRental),
  callBacks: z.number().int(),
})
export type BoardSnapshot = z.infer<typeof boardSnapshot>

/** What a client that is behind gets: the events after its number, or a snapshot when they are gone. */
export const boardCatchUp = z.discriminatedUnion('kind', [
  z.object({ kind: z.literal('events'), events: z.array(boardEvent), head: z.number().int() }),
  z.object({ kind: z.literal('snapshot'), snapshot: boardSnapshot }),
])
export type BoardCatchUp = z.infer<typeof boardCatchUp>
