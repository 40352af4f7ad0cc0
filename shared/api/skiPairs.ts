import { z } from 'zod'
import { itemStates } from '#shared/lifecycle/itemStates'
import { id, instant, line, listAnswer, listQuery } from '#shared/schemas/common'
import { historyLine, itemState, labelLine, pastFitting, presetLine } from '#shared/schemas/items'
import { command, read } from './define'
import { bindingModel, skiModel } from './models'

export const skiPairRow = z.object({
  id,
  code: z.string(),
  lengthCm: z.number().int(),
  skiModel: z.string(),
  bindingModelId: id,
  bindingModel: z.string(),
  state: itemState,
  since: instant,
  siteId: id,
  site: z.string(),
  rackPlace: z.string().nullable(),
  presets: z.array(presetLine),
  /** Sole lengths for which both skis stand right as they are; null where unknown, different, or none. */
  fitsSoles: z.object({ minMm: z.number().int(), maxMm: z.number().int() }).nullable(),
  rentals: z.number().int(),
})
export type SkiPairRow = z.infer<typeof skiPairRow>

export const skiPairSorts = ['code', 'lengthCm', 'state', 'rackPlace', 'since'] as const

export const listSkiPairs = read({
  path: '/api/ski-pairs',
  access: 'fleet.read',
  query: listQuery(skiPairSorts).extend({
    state: z.enum([...itemStates, '']).default(''),
    site: z.union([id, z.literal('')]).default(''),
    bindingModel: z.union([id, z.literal('')]).default(''),
  }),
  answer: listAnswer(skiPairRow),
})

export const getSkiPair = read({
  path: '/api/ski-pairs/:id',
  access: 'fleet.read',
  params: z.object({ id }),
  answer: skiPairRow.extend({
    season: z.number().int(),
    version: z.number().int(),
    homeSiteId: id,
    skiModel: skiModel,
    binding: bindingModel,
    labels: z.array(labelLine),
    history: z.array(historyLine),
    fittings: z.array(pastFitting),
    presetHistory: z.array(
      z.object({
        side: z.enum(['left', 'right']),
        toe: z.number().int().nullable(),
        heel: z.number().int().nullable(),
        turns: z.number().nullable(),
        at: instant,
        reason: z.string(),
        person: z.string().nullable(),
      }),
    ),
    missing: z.array(z.enum(['left', 'right'])),
    holdId: id.nullable(),
  }),
})

const pairBody = z.strictObject({
  skiModelId: id,
  bindingModelId: id,
  lengthCm: z.int().min(60).max(230),
  season: z.int().min(2000).max(2100),
  homeSiteId: id,
  rackPlace: line(20),
})

export const createSkiPair = command({
  kind: 'skiPairs.create',
  path: '/api/ski-pairs/create',
  access: 'fleet.write',
  body: pairBody.extend({ code: z.string().regex(/^S[1-9]\d{0,4}$/) }),
  ids: z.object({ skiPairId: id }),
})

export const changeSkiPair = command({
  kind: 'skiPairs.change',
  path: '/api/ski-pairs/change',
  access: 'fleet.write',
  body: pairBody.extend({ id, version: z.int() }),
  ids: z.object({ skiPairId: id }),
})

/** A technician reads where the units of one ski stand, outside of any ticket. */
export const readPreset = command({
  kind: 'skis.readPreset',
  path: '/api/ski-pairs/read-preset',
  access: 'tickets.work',
  body: z.strictObject({
    skiId: id,
    version: z.int(),
    toe: z.int(),
    heel: z.int(),
    turns: z.number().min(-20).max(20).nullable(),
  }),
  ids: z.object({ skiId: id }),
})
