import { z } from 'zod'
import { guardianRelations } from '#shared/renters/guardian'
import { shoeSystems } from '#shared/renters/shoe'
import { requestSchema, skierTypeSchema } from '#shared/release/releaseInput'
import { heightSchema, massSchema } from '#shared/units/bodySchemas'
import { day, id, instant, line, note, requiredLine } from './common'

export const shoe = z.union([
  z.strictObject({ size: requiredLine(8), system: z.enum(shoeSystems) }),
  z.strictObject({ footMm: z.int().min(90).max(360) }),
])

export const guardian = z.strictObject({
  name: requiredLine(120),
  relation: z.enum(guardianRelations),
  phone: line(40),
})
export type Guardian = z.infer<typeof guardian>

/** Languages that a renter can read the form in. */
export const renterLocale = z.enum(['en', 'de'])
export type RenterLocale = z.infer<typeof renterLocale>

export const contact = z.strictObject({
  firstName: requiredLine(60),
  lastName: requiredLine(60),
  email: z.union([z.literal(''), z.email().max(200)]),
  phone: line(40),
  locale: renterLocale,
  guardian: guardian.nullable(),
})
export type Contact = z.infer<typeof contact>

/** A birth date, or an age that was said: one of the two is there (shared/renters/formRules). */
export const born = z.strictObject({
  birthDate: day.nullable(),
  age: z.int().min(0).max(120).nullable(),
})
export type Born = z.infer<typeof born>

export const period = z.strictObject({ startsOn: day, endsOn: day })
export type Period = z.infer<typeof period>

/**
 * What a renter says once, on the phone or at the desk, in the units in which it was typed. What one field means
 * for another is in shared/renters/formRules, which the phone asks too.
 */
export const renterForm = z.strictObject({
  ...contact.shape,
  ...born.shape,
  mass: massSchema,
  height: heightSchema,
  skierType: skierTypeSchema,
  shoe: shoe.nullable(),
  ownBoots: z.boolean(),
  wishes: note(400),
  ...period.shape,
})
export type RenterForm = z.infer<typeof renterForm>

/** Who says a body value: the renter, or somebody of the shop who measured it. */
export const valueSource = z.enum(['declared', 'measured'])
export type ValueSource = z.infer<typeof valueSource>

/** A form half filled in: texts as typed, kept as they are. */
export const draftFields = z
  .record(z.string().regex(/^[a-zA-Z]{1,40}$/), z.string().max(500))
  .refine((fields) => Object.keys(fields).length <= 60)

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
