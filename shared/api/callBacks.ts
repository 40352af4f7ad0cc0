import { z } from 'zod'
import { day, id, instant, note, reason, side } from '#shared/schemas/common'
import { command, read } from './define'

/** What was really read at one ski, where the record says something else. */
const correctedReading = z.strictObject({
  toe: z.int(),
  heel: z.int(),
  turns: z.number().nullable(),
  toeValue: z.number().positive().max(30),
  heelValue: z.number().positive().max(30),
})
export type CorrectedReading = z.infer<typeof correctedReading>

/** An error was found on a record: a correcting record that points to it, and a call-back when the set is out. */
export const correctRecord = command({
  kind: 'records.correct',
  path: '/api/records/correct',
  access: 'callBacks.open',
  body: z.strictObject({
    recordId: id,
    what: reason,
    parts: z
      .strictObject({ left: correctedReading.optional(), right: correctedReading.optional() })
      .default({}),
  }),
  ids: z.object({ recordId: id, callBackId: id.nullable() }),
})

export const callBackStepKinds = ['tried', 'reached', 'set_checked', 'closed'] as const
export type CallBackStep = (typeof callBackStepKinds)[number]
const step = z.enum(callBackStepKinds)

/** What was done about a call-back. Closing needs a set that was checked, or a reason. */
export const stepCallBack = command({
  kind: 'callBacks.step',
  path: '/api/call-backs/step',
  access: 'callBacks.work',
  body: z.strictObject({ callBackId: id, step, note: note(500).default('') }),
  ids: z.object({ stepId: id }),
})

const callBackRow = z.object({
  id,
  cause: z.string(),
  detail: z.string(),
  openedAt: instant,
  openedBy: z.string().nullable(),
  closedAt: instant.nullable(),
  fittingId: id,
  fittingNumber: z.number().int(),
  recordId: id.nullable(),
  steps: z.array(z.object({ id, step, note: z.string(), by: z.string(), at: instant })),
  rental: z.object({ id, number: z.number().int(), endsOn: day }),
  renter: z.object({
    firstName: z.string(),
    lastName: z.string(),
    phone: z.string().nullable(),
    guardianName: z.string().nullable(),
    guardianPhone: z.string().nullable(),
  }),
  /** What of the set is still with the renter, since when; own boots have no code. */
  out: z.array(
    z.object({
      code: z.string().nullable(),
      side: z.union([side, z.literal('both')]),
      since: instant,
    }),
  ),
})
export type CallBackRow = z.infer<typeof callBackRow>

/** Who is out, or was out, on something that we doubt. */
export const listCallBacks = read({
  path: '/api/call-backs',
  access: 'callBacks.read',
  query: z.object({ state: z.enum(['open', 'closed']).default('open') }),
  answer: z.object({ rows: z.array(callBackRow) }),
})
