import { z } from 'zod'

/** Rows that a rule moved: type, age, request, decision. Negative is up, to a lower value. */
export const rowStep = z.object({ rule: z.string(), rows: z.number().int() })

/** What the selection table gave, without the body values it was read with. */
export const releaseOutcome = z.object({
  row: z.string(),
  value: z.number(),
  sideways: z.boolean(),
  twistNm: z.number(),
  forwardLeanNm: z.number(),
  rowSteps: z.array(rowStep),
})
export type ReleaseOutcome = z.infer<typeof releaseOutcome>
export type RowStep = z.infer<typeof rowStep>

/** Target indicator of each unit of each ski: value plus the unit's correction, rounded down to the scale's step. */
const unitTargets = z.object({ toe: z.number(), heel: z.number() })
export const targets = z.object({ left: unitTargets, right: unitTargets })
export type Targets = z.infer<typeof targets>
