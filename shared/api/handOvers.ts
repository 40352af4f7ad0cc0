import { z } from 'zod'
import { id, instant, line, pngDataUrl, requiredLine } from '#shared/schemas/common'
import { command, read } from './define'
import { getFitting } from './fittings'

/** The set leaves with a renter who read the numbers and signed on the screen. */
export const recordHandOver = command({
  kind: 'handOvers.record',
  path: '/api/hand-overs',
  access: 'handOvers.record',
  body: z.strictObject({
    fittingId: id,
    /** As scanned: both skis, and both boots unless the renter skis in their own. */
    labels: z.array(line(20)).min(2).max(4),
    /** Own boots have no label: their sole length is read and typed. */
    soleLengthReadMm: z.number().int().min(150).max(400).optional(),
    signaturePng: pngDataUrl,
    signedName: requiredLine(120),
    signedAs: z.enum(['renter', 'guardian']),
    /** The version of the acknowledgement that was shown. */
    textId: id,
  }),
  ids: z.object({ handOverId: id }),
})

export const readySet = z.object({
  fittingId: id,
  recordId: id,
  /** Short number of the day, as it is called out. */
  number: z.number().int(),
  /** First name and initial. */
  name: z.string(),
  pairCode: z.string(),
  bootsCode: z.string().nullable(),
  preparedAt: instant,
  promisedAt: instant,
  signedBy: z.string(),
})
export type ReadySet = z.infer<typeof readySet>

/** Sets that are signed at the bench and wait for their renter. */
export const getReadySets = read({
  path: '/api/hand-overs/ready',
  access: 'handOvers.record',
  query: z.object({ siteId: id.optional() }),
  answer: z.object({ sets: z.array(readySet) }),
})

/** What the renter reads and signs, in their language where the shop has the text. */
export const getHandOver = read({
  path: '/api/hand-overs/:id',
  access: 'handOvers.record',
  params: z.object({ id }),
  query: z.object({ locale: z.string().max(8).optional() }),
  answer: z.object({
    fitting: getFitting.answer,
    text: z
      .object({
        id,
        locale: z.string(),
        version: z.number().int(),
        body: z.string(),
        reviewed: z.boolean(),
      })
      .nullable(),
    /** Under the age of majority: a guardian signs. */
    guardianSigns: z.boolean(),
  }),
})
