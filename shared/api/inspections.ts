import { z } from 'zod'
import { id, instant, itemKind, line, note, side } from '#shared/schemas/common'
import { bootInspection, inspectionChecks, skiInspection } from '#shared/schemas/inspections'
import { itemState, presetLine } from '#shared/schemas/items'
import { trackModelSchema } from '#shared/track/trackModel'
import { command, read } from './define'

const verdict = z.enum(['rack', 'service', 'withdraw'])
const rest = { itemId: id, verdict, rackPlace: line(20).optional(), note: note(500).default('') }

/** Every point of the list is answered; what is to go out again has no fault left. */
export const recordInspection = command({
  kind: 'inspections.record',
  path: '/api/inspections/record',
  access: 'returns.clear',
  body: z.discriminatedUnion('itemKind', [
    z.strictObject({ itemKind: z.literal('ski_pair'), checks: skiInspection, ...rest }),
    z.strictObject({ itemKind: z.literal('boots'), checks: bootInspection, ...rest }),
  ]),
  ids: z.object({ inspectionId: id, changeId: id }),
})

const uncheckedItem = z.object({
  itemKind,
  itemId: id,
  code: z.string(),
  /** Length of skis in cm; mondopoint of boots times ten. */
  size: z.number().int(),
  model: z.string(),
  since: instant,
  siteId: id,
  /** Where it hung last, if that was at the site where it is now. */
  rackPlace: z.string().nullable(),
  /** Sides that are still with a renter. */
  missing: z.array(side),
})
export type UncheckedItem = z.infer<typeof uncheckedItem>

/** What came back and waits to be cleared, the longest waiting first. */
export const listUnchecked = read({
  path: '/api/returns/unchecked',
  access: 'returns.record',
  query: z.object({ siteId: id.optional() }),
  answer: z.object({ rows: z.array(uncheckedItem) }),
})

/** One item to be cleared: what it is, where its units were last read to stand, and what was found last time. */
export const getClearing = read({
  path: '/api/returns/items/:kind/:itemId',
  access: 'returns.record',
  params: z.object({ kind: itemKind, itemId: id }),
  answer: uncheckedItem.extend({
    state: itemState,
    site: z.string(),
    /** The rental number that it came back from last. */
    rentalNumber: z.number().int().nullable(),
    track: trackModelSchema.nullable(),
    presets: z.array(presetLine),
    lastInspection: z
      .object({ at: instant, by: z.string(), verdict, note: z.string(), checks: inspectionChecks })
      .nullable(),
  }),
})
