import { z } from 'zod'
import { heightSchema, massSchema } from '#shared/units/bodySchemas'
import { inputLimits, skierTypes } from './rules'
import { editionNames } from './selectionTable'

const { age, soleLengthMm } = inputLimits

export const skierTypeSchema = z.enum(skierTypes)
export const requestSchema = z.literal([-1, 0, 1])
export const editionSchema = z.enum(editionNames)

/** Everything that a release value depends on. Request: -1 is one row lower, +1 one row higher. */
export const releaseInputSchema = z.strictObject({
  mass: massSchema,
  height: heightSchema,
  /** Whole years; which day counts is the caller's business (shared/dates). */
  age: z.int().min(age.min).max(age.max),
  skierType: skierTypeSchema,
  soleLengthMm: z.number().min(soleLengthMm.min).max(soleLengthMm.max),
  edition: editionSchema.optional(),
  request: requestSchema.optional(),
})
export type ReleaseInput = z.infer<typeof releaseInputSchema>
export type Request = z.infer<typeof requestSchema>
