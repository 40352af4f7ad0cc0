import { z } from 'zod'
import { roles } from '#shared/permissions'
import { id, instant, requiredLine } from '#shared/schemas/common'
import { command, read } from './define'

export const staffLocales = ['en', 'de'] as const

export const personRow = z.object({
  id,
  name: z.string(),
  email: z.string(),
  roles: z.array(z.enum(roles)),
  locale: z.string(),
  /** Without a first password nobody can sign in. */
  hasPassword: z.boolean(),
  hasPin: z.boolean(),
  /** Five wrong tries; the person's password opens it again. */
  pinLocked: z.boolean(),
  /** Since when this person has no access to the shop. */
  disabledAt: instant.nullable(),
})
export type PersonRow = z.infer<typeof personRow>

/** Everybody of the shop, those without access last. */
export const listPeople = read({
  path: '/api/people',
  access: 'people.manage',
  answer: z.object({ rows: z.array(personRow) }),
})

/** Names of those who work here, for choosing an owner or a second name. */
export const listColleagues = read({
  path: '/api/colleagues',
  access: 'stations.use',
  answer: z.object({ rows: z.array(z.object({ id, name: z.string(), roles: z.array(z.enum(roles)) })) }),
})

const personBody = {
  name: requiredLine(120),
  email: z.email().max(200),
  roles: z
    .array(z.enum(roles))
    .min(1)
    .refine((held) => new Set(held).size === held.length),
  locale: z.enum(staffLocales),
}

/** A new person. Their first password is set by a request of its own, so that no command ever carries one. */
export const createPerson = command({
  kind: 'people.create',
  path: '/api/people/create',
  access: 'people.manage',
  body: z.strictObject(personBody),
  ids: z.object({ personId: id }),
})

export const changePerson = command({
  kind: 'people.change',
  path: '/api/people/change',
  access: 'people.manage',
  body: z.strictObject({ personId: id, ...personBody }),
  ids: z.object({ personId: id }),
})

/** Takes a person's access to this shop away at once; what they signed keeps their name. */
export const disablePerson = command({
  kind: 'people.disable',
  path: '/api/people/disable',
  access: 'people.manage',
  body: z.strictObject({ personId: id }),
  ids: z.object({ personId: id }),
})

export const enablePerson = command({
  kind: 'people.enable',
  path: '/api/people/enable',
  access: 'people.manage',
  body: z.strictObject({ personId: id }),
  ids: z.object({ personId: id }),
})

export const newPassword = z.string().min(12).max(200)

/** A manager gives somebody a password. Not a command: those are logged by the hash of what they say. */
export const setPasswordPath = '/api/people/password'
export const setPasswordBody = z.strictObject({ personId: id, password: newPassword })
