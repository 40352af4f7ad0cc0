import { z } from 'zod'

/** What the selection table gave, without the body values it was read with. */
export const releaseOutcome = z.object({
  row: z.string(),
  value: z.number(),
  sideways: z.boolean(),
  twistNm: z.number(),
  forwardLeanNm: z.number(),
  /** Rows moved, by rule: type, age, request, decision. Negative is up, to a lower value. */
  rowSteps: z.array(z.object({ rule: z.string(), rows: z.number().int() })),
})
export type ReleaseOutcome = z.infer<typeof releaseOutcome>
export type RowStep = ReleaseOutcome['rowSteps'][number]

/** Target indicator of each unit of each ski: value plus the unit's correction, rounded down to the scale's step. */
const unitTargets = z.object({ toe: z.number(), heel: z.number() })
export const targets = z.object({ left: unitTargets, right: unitTargets })
export type Targets = z.infer<typeof targets>
