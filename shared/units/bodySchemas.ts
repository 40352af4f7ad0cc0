import { z } from 'zod'
import { bodyLimits } from './bodyLimits'

const { massKg, massLb, heightCm, heightFeet } = bodyLimits

/** Stone and pounds are pounds; the whole is compared without adding, so that no fraction is rounded away. */
function poundsTogether({ stone, pounds }: { stone: number; pounds: number }): boolean {
  return pounds >= massLb.min - 14 * stone && pounds <= massLb.max - 14 * stone
}

/** A mass in the unit in which it was typed. It is never converted. */
export const massSchema = z.discriminatedUnion('unit', [
  z.strictObject({ unit: z.literal('kg'), value: z.number().min(massKg.min).max(massKg.max) }),
  z.strictObject({ unit: z.literal('lb'), value: z.number().min(massLb.min).max(massLb.max) }),
  z
    .strictObject({ unit: z.literal('st-lb'), stone: z.int().min(0), pounds: z.number().min(0).lt(14) })
    .refine(poundsTogether, { message: `expected ${massLb.min} to ${massLb.max} pounds together` }),
])
export type Mass = z.infer<typeof massSchema>

/** A height in the unit in which it was typed. It is never converted. */
export const heightSchema = z.discriminatedUnion('unit', [
  z.strictObject({ unit: z.literal('cm'), value: z.number().min(heightCm.min).max(heightCm.max) }),
  z.strictObject({
    unit: z.literal('ft-in'),
    feet: z.int().min(heightFeet.min).max(heightFeet.max),
    inches: z.number().min(0).lt(12),
  }),
])
export type Height = z.infer<typeof heightSchema>
