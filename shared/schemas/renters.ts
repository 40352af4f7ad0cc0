import { z } from 'zod'
import { requestSchema, skierTypeSchema } from '#shared/release/releaseInput'
import { heightSchema, massSchema } from '#shared/units/bodySchemas'
import { day, id, instant, line, note, requiredLine } from './common'

export const shoe = z.union([
  z.strictObject({ size: requiredLine(8), system: z.enum(['eu', 'uk', 'us']) }),
  z.strictObject({ footMm: z.int().min(100).max(360) }),
])

export const guardian = z.strictObject({
  name: requiredLine(120),
  relation: requiredLine(60),
  phone: line(40).default(''),
})

/** What a renter says once, on the phone or at the desk. */
export const renterForm = z
  .strictObject({
    firstName: requiredLine(60),
    lastName: requiredLine(60),
    email: z.union([z.literal(''), z.email().max(200)]),
    phone: line(40),
    locale: z.enum(['en', 'de']),
    birthDate: day.nullable(),
    age: z.int().min(0).max(120).nullable(),
    mass: massSchema,
    height: heightSchema,
    skierType: skierTypeSchema,
    shoe: shoe.nullable(),
    ownBoots: z.boolean(),
    wishes: note(400),
    startsOn: day,
    endsOn: day,
    guardian: guardian.nullable(),
  })
  .refine((form) => form.birthDate !== null || form.age !== null, {
    path: ['age'],
    error: 'age_or_birth_date',
  })
  .refine((form) => form.endsOn >= form.startsOn, { path: ['endsOn'], error: 'ends_before_start' })
export type RenterForm = z.infer<typeof renterForm>

export const valueSource = z.enum(['declared', 'measured'])

/** A renter's inputs as the staff sees them, with who measured what. */
export const renterInputs = z.object({
  id,
  mass: massSchema,
  massSource: valueSource,
  massBy: z.string().nullable(),
  height: heightSchema,
  heightSource: valueSource,
  heightBy: z.string().nullable(),
  age: z.number().int(),
  skierType: skierTypeSchema,
  request: requestSchema,
  requestSignedName: z.string().nullable(),
  createdAt: instant,
})
export type RenterInputs = z.infer<typeof renterInputs>
