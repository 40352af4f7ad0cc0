import { z } from 'zod'
import { soleTypes } from '#shared/compatibility/soleFit'
import { itemStates } from '#shared/lifecycle/itemStates'
import { id, instant, line, listAnswer, listQuery, requiredLine } from '#shared/schemas/common'
import { historyLine, itemState, labelLine, pastFitting } from '#shared/schemas/items'
import { command, read } from './define'

export const bootsRow = z.object({
  id,
  code: z.string(),
  model: z.string(),
  mondo: z.number().int(),
  soleLengthMm: z.number().int(),
  soleType: z.enum(soleTypes),
  state: itemState,
  since: instant,
  siteId: id,
  site: z.string(),
  rackPlace: z.string().nullable(),
})
export type BootsRow = z.infer<typeof bootsRow>

export const bootsSorts = ['code', 'mondo', 'soleLengthMm', 'state', 'rackPlace'] as const

export const listBoots = read({
  path: '/api/boots',
  access: 'fleet.read',
  query: listQuery(bootsSorts).extend({
    state: z.enum([...itemStates, '']).default(''),
    site: z.union([id, z.literal('')]).default(''),
    mondo: z.coerce.number().int().min(0).max(400).default(0),
  }),
  answer: listAnswer(bootsRow),
})

export const getBoots = read({
  path: '/api/boots/:id',
  access: 'fleet.read',
  params: z.object({ id }),
  answer: bootsRow.extend({
    season: z.number().int(),
    version: z.number().int(),
    homeSiteId: id,
    labels: z.array(labelLine),
    history: z.array(historyLine),
    fittings: z.array(pastFitting),
    missing: z.array(z.enum(['left', 'right'])),
    holdId: id.nullable(),
  }),
})

const bootsBody = z.strictObject({
  model: requiredLine(80),
  /** Mondopoint centimetres times ten, in halves: 265 is 26.5. */
  mondo: z.int().min(130).max(360).multipleOf(5),
  soleLengthMm: z.int().min(150).max(400),
  soleType: z.enum(soleTypes),
  season: z.int().min(2000).max(2100),
  homeSiteId: id,
  rackPlace: line(20),
})

export const createBoots = command({
  kind: 'boots.create',
  path: '/api/boots/create',
  access: 'fleet.write',
  body: bootsBody.extend({ code: z.string().regex(/^B[1-9]\d{0,4}$/) }),
  ids: z.object({ bootsId: id }),
})

export const changeBoots = command({
  kind: 'boots.change',
  path: '/api/boots/change',
  access: 'fleet.write',
  body: bootsBody.extend({ id, version: z.int() }),
  ids: z.object({ bootsId: id }),
})
