import { z } from 'zod'
import { trackLimits } from './limits'
import { trackModelSchema } from './trackModel'

const { soleLengthMm, offsetMm } = trackLimits

/** A track calculation as it comes from outside. Whether the current notches exist is judged by trackPlan. */
export const trackInputSchema = z.strictObject({
  model: trackModelSchema,
  soleLengthMm: z.int().min(soleLengthMm.min).max(soleLengthMm.max),
  offsetMm: z.number().min(offsetMm.min).max(offsetMm.max).optional(),
  current: z.strictObject({ toe: z.int(), heel: z.int(), turns: z.number().optional() }).optional(),
})
