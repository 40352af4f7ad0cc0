import { z } from 'zod'
import { permissions, roles, type Permission } from '#shared/permissions'
import { id, line, requiredLine } from '#shared/schemas/common'

/** Who is signed in, where, and what they may do. */
export const sessionAnswer = z.object({
  person: z.object({ id, name: z.string(), locale: z.string() }),
  shop: z.object({ id, name: z.string(), zone: z.string(), demo: z.boolean() }),
  sites: z.array(z.object({ id, name: z.string() })),
  device: z.object({ id, name: z.string(), station: z.string(), siteId: id }).nullable(),
  roles: z.array(z.enum(roles)),
  permissions: z.array(z.enum(Object.keys(permissions) as [Permission, ...Permission[]])),
  /** Whether this person has a PIN for stations. */
  hasPin: z.boolean(),
})
export type SessionAnswer = z.infer<typeof sessionAnswer>

export const signInBody = z.strictObject({
  email: requiredLine(200),
  password: z.string().min(1).max(200),
})

/** Choosing a person at an enrolled station. */
export const switchBody = z.strictObject({ personId: id, pin: z.string().regex(/^\d{6}$/) })

/** The device that asks and who may work at it; null where the browser is not enrolled. */
export const stationAnswer = z
  .object({
    device: z.object({ id, name: z.string(), station: z.string(), siteName: z.string() }),
    shop: z.object({ name: z.string() }),
    people: z.array(z.object({ id, name: z.string(), roles: z.array(z.enum(roles)) })),
  })
  .nullable()

/** A person's own PIN, proved by the password. */
export const ownPinBody = z.strictObject({
  password: z.string().min(1).max(200),
  pin: z.string().regex(/^\d{6}$/),
})

/** First start of a real shop: the code that the server printed makes the first manager. */
export const setupBody = z.strictObject({
  code: line(40).min(8),
  shopName: requiredLine(80),
  zone: requiredLine(60),
  siteName: requiredLine(80),
  name: requiredLine(120),
  email: z.email().max(200),
  password: z.string().min(12).max(200),
})
