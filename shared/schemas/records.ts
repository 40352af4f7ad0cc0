import { z } from 'zod'

/**
 * What a technician read at one ski, boot clicked in: printed marks as notches, values as the indicators show, and
 * each check as confirmed. Turns count from the screw's neutral mark, positive tightens.
 */
export const partReading = z.strictObject({
  toe: z.number().int(),
  heel: z.number().int(),
  turns: z.number().nullable(),
  toeValue: z.number().positive().max(30),
  heelValue: z.number().positive().max(30),
  soleClearance: z.literal(true),
  /** It stands in its window as the model's signed sheet shows. Outside it nothing can be recorded. */
  forwardPressure: z.literal(true),
  brake: z.literal(true),
  function: z.literal(true),
})
export type PartReading = z.infer<typeof partReading>

/** What a technician sees, before it is judged: forward pressure may stand outside its window. */
export const seenReading = partReading.extend({ forwardPressure: z.boolean() })
export type SeenReading = z.infer<typeof seenReading>
