import { z } from 'zod'
import { soleTypes } from '#shared/compatibility/soleFit'
import { id, instant, line, note, requiredLine } from '#shared/schemas/common'
import { trackModelSchema } from '#shared/track/trackModel'
import { command, read } from './define'

const knownSoleType = z.enum(soleTypes).exclude(['unknown'])

export const skiModel = z.object({
  id,
  name: z.string(),
  waistMm: z.number(),
  offsetMm: z.number(),
  junior: z.boolean(),
})
export type SkiModel = z.infer<typeof skiModel>

export const listSkiModels = read({
  path: '/api/ski-models',
  access: 'fleet.read',
  answer: z.object({ rows: z.array(skiModel.extend({ pairs: z.number().int() })) }),
})

export const saveSkiModel = command({
  kind: 'skiModels.save',
  path: '/api/ski-models/save',
  access: 'fleet.write',
  body: z.strictObject({
    id: id.nullable(),
    name: requiredLine(80),
    waistMm: z.int().min(40).max(160),
    offsetMm: z.number().min(-100).max(100),
    junior: z.boolean(),
  }),
  ids: z.object({ skiModelId: id }),
})

export const bindingModel = z.object({
  id,
  name: z.string(),
  track: trackModelSchema,
  accepts: z.array(z.string()),
  refuses: z.array(z.string()),
  brakeMm: z.number().int().nullable(),
  manualDocument: z.string(),
  manualEdition: z.string(),
  manualPage: z.string(),
  windowNote: z.string(),
  hasWindowPicture: z.boolean(),
  version: z.number().int(),
  approved: z.boolean(),
  approvedBy: z.string().nullable(),
  approvedAt: instant.nullable(),
  blockedReason: z.string().nullable(),
})
export type BindingModel = z.infer<typeof bindingModel>

export const listBindingModels = read({
  path: '/api/binding-models',
  access: 'fleet.read',
  answer: z.object({ rows: z.array(bindingModel.extend({ pairs: z.number().int() })) }),
})

export const getBindingModel = read({
  path: '/api/binding-models/:id',
  access: 'fleet.read',
  params: z.object({ id }),
  answer: bindingModel.extend({ pairs: z.number().int() }),
})

export const saveBindingModel = command({
  kind: 'bindingModels.save',
  path: '/api/binding-models/save',
  access: 'fleet.write',
  body: z
    .strictObject({
      id: id.nullable(),
      /** The version that the editor saw; null for a new model. */
      version: z.int().nullable(),
      name: requiredLine(80),
      track: trackModelSchema,
      accepts: z.array(knownSoleType).max(4),
      refuses: z.array(knownSoleType).max(4),
      brakeMm: z.int().min(40).max(200).nullable(),
      manualDocument: line(160),
      manualEdition: line(40),
      manualPage: line(40),
      windowNote: note(400),
    })
    .refine(({ accepts, refuses }) => !accepts.some((type) => refuses.includes(type)), {
      path: ['refuses'],
      error: 'accepted_and_refused',
    }),
  ids: z.object({ bindingModelId: id }),
})

export const setWindowPicture = command({
  kind: 'bindingModels.setWindowPicture',
  path: '/api/binding-models/window-picture',
  access: 'fleet.write',
  body: z.strictObject({
    id,
    version: z.int(),
    picture: z
      .string()
      .max(273_100)
      .regex(/^data:image\/(png|jpeg);base64,[A-Za-z0-9+/]+=*$/),
  }),
  ids: z.object({ bindingModelId: id }),
})

export const approveBindingModel = command({
  kind: 'bindingModels.approve',
  path: '/api/binding-models/approve',
  access: 'bindingModels.approve',
  body: z.strictObject({ id, version: z.int() }),
  ids: z.object({ approvalId: id }),
})
