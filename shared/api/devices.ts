import { z } from 'zod'
import { id, instant, requiredLine } from '#shared/schemas/common'
import { command, read } from './define'

/** Places of work that a browser can be enrolled at. */
export const stations = ['counter', 'form', 'boots', 'bench', 'hand_over', 'returns'] as const
export type Station = (typeof stations)[number]

export const deviceRow = z.object({
  id,
  name: z.string(),
  station: z.enum(stations),
  siteId: id,
  siteName: z.string(),
  enrolledBy: z.string(),
  enrolledAt: instant,
  revokedAt: instant.nullable(),
  /** Whether it is the browser that asks. */
  here: z.boolean(),
})
export type DeviceRow = z.infer<typeof deviceRow>

export const listDevices = read({
  path: '/api/devices',
  access: 'devices.manage',
  answer: z.object({ rows: z.array(deviceRow) }),
})

/**
 * Enrols the browser that asks: the answer sets a cookie with a token that the server made and keeps only the hash
 * of. Not a command: sending it again makes another device, which ends the one before.
 */
export const enrolPath = '/api/devices'
export const enrolBody = z.strictObject({ name: requiredLine(40), station: z.enum(stations), siteId: id })
export const enrolAnswer = z.object({ deviceId: id })

/** The device's cookie is worth nothing from now on, and whoever went on there has to sign in elsewhere. */
export const revokeDevice = command({
  kind: 'devices.revoke',
  path: '/api/devices/revoke',
  access: 'devices.manage',
  body: z.strictObject({ deviceId: id }),
  ids: z.object({ deviceId: id }),
})
