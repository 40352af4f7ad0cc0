import { z } from 'zod'
import { itemStates } from '#shared/lifecycle/itemStates'
import { id, instant, side } from './common'

export const itemState = z.enum(itemStates)

/** One line of an item's history. */
export const historyLine = z.object({
  id,
  from: itemState,
  to: itemState,
  at: instant,
  person: z.string().nullable(),
  device: z.string().nullable(),
  site: z.string(),
  rackPlace: z.string().nullable(),
  reason: z.string().nullable(),
})
export type HistoryLine = z.infer<typeof historyLine>

export const labelLine = z.object({ text: z.string(), side, since: instant, until: instant.nullable() })

/** Where the units of a ski were last read to stand; notches inside, marks for people. */
export const presetLine = z.object({
  skiId: id,
  side,
  toe: z.number().int().nullable(),
  heel: z.number().int().nullable(),
  turns: z.number().nullable(),
  version: z.number().int(),
  readAt: instant.nullable(),
  toeCorrection: z.number(),
  heelCorrection: z.number(),
})
export type PresetLine = z.infer<typeof presetLine>

/** A past fitting as an item's page shows it: no name. */
export const pastFitting = z.object({
  id,
  number: z.number().int(),
  state: z.string(),
  value: z.number(),
  soleLengthMm: z.number().int(),
  at: instant,
  recordId: id.nullable(),
})
