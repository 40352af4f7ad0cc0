import { z } from 'zod'
import { newPassword, staffLocales } from '#shared/api/people'
import { zone } from '#shared/api/shop'
import { permissions, roles, type Permission } from '#shared/permissions'
import { pinShape } from '#shared/pins/pinRules'
import { id, instant, line, requiredLine } from '#shared/schemas/common'

/** Who is signed in, where, and what they may do. */
export const sessionAnswer = z.object({
  person: z.object({ id, name: z.string(), locale: z.string() }),
  shop: z.object({
    id,
    name: z.string(),
    zone: z.string(),
    demo: z.boolean(),
    /** From then on an unfinished claim is shown as ageing. */
    claimAgesMinutes: z.number().int(),
  }),
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

const pin = z.string().regex(pinShape)

/** Choosing a person at an enrolled station. */
export const switchBody = z.strictObject({ personId: id, pin })

/** The device that asks and who may go on at it; null where the browser is not enrolled. */
export const stationAnswer = z
  .object({
    device: z.object({ id, name: z.string(), station: z.string(), siteName: z.string() }),
    shop: z.object({ name: z.string() }),
    enrolled: z.object({ by: z.string(), at: instant }),
    /** Who is on it now, and since when. */
    here: z.object({ personId: id, since: instant.nullable() }).nullable(),
    people: z.array(
      z.object({
        id,
        name: z.string(),
        roles: z.array(z.enum(roles)),
        hasPin: z.boolean(),
        /** Five wrong tries; the password opens it again. */
        pinLocked: z.boolean(),
        /** The other device that this person went on at. */
        at: z.string().nullable(),
      }),
    ),
  })
  .nullable()
export type StationAnswer = z.infer<typeof stationAnswer>

/** A person's own PIN, proved by the password. */
export const ownPinBody = z.strictObject({ password: z.string().min(1).max(200), pin })

/** A person's own new password, proved by the old one. */
export const ownPasswordBody = z.strictObject({ password: z.string().min(1).max(200), newPassword })

/** The demo shop's invented sign-ins; null anywhere but in the demo on loopback. */
export const demoAnswer = z
  .object({
    people: z.array(
      z.object({
        name: z.string(),
        roles: z.array(z.enum(roles)),
        email: z.string(),
        password: z.string(),
        pin: z.string(),
      }),
    ),
  })
  .nullable()
export type DemoAnswer = z.infer<typeof demoAnswer>

/** Whether this server still waits for its first manager. */
export const setupAnswer = z.object({ open: z.boolean() })

/** First start of a real shop: the code that the server printed makes the first manager. */
export const setupBody = z.strictObject({
  code: line(40).min(8),
  shopName: requiredLine(80),
  zone,
  siteName: requiredLine(80),
  name: requiredLine(120),
  email: z.email().max(200),
  password: newPassword,
  locale: z.enum(staffLocales).default('en'),
})
