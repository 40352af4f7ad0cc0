import { randomUUID } from 'node:crypto'
import type { Role } from '#shared/permissions'
import { devices, memberships, people } from '../../server/db/schema/schema'
import { hashSecret } from '../../server/auth/passwords'
import { newToken, tokenHash } from '../../server/auth/tokens'
import type { TestDatabase } from './database'

/** One person a role, and a second one where two of a kind are needed. All invented. */
export const staff = {
  manager: { name: 'Tomas Fell', roles: ['manager'], pin: '104417' },
  head_technician: { name: 'Bea Oduya', roles: ['head_technician'], pin: '204417' },
  technician: { name: 'Lio Harrow', roles: ['technician'], pin: '304417' },
  counter: { name: 'Ines Kald', roles: ['counter'], pin: '404417' },
  second_head_technician: { name: 'Nora Wick', roles: ['head_technician'], pin: '504417' },
  second_technician: { name: 'Per Askew', roles: ['technician'], pin: '604417' },
  second_counter: { name: 'Mika Dale', roles: ['counter'], pin: '704417' },
} as const satisfies Record<string, { name: string; roles: Role[]; pin: string }>
export type Who = keyof typeof staff

export const testPassword = 'notches and marks 417'

// Argon2 is slow on purpose: each secret is hashed once a file.
const hashed = new Map<string, Promise<string>>()
function hashOnce(secret: string): Promise<string> {
  const known = hashed.get(secret) ?? hashSecret(secret)
  hashed.set(secret, known)
  return known
}

/** The staff of a shop with passwords and PINs: person ids and e-mail addresses by role. */
export async function addStaff(db: TestDatabase['db'], shopId: string) {
  const passwordHash = await hashOnce(testPassword)
  const made = {} as Record<Who, { id: string; email: string; name: string; pin: string }>
  for (const [who, { name, roles, pin }] of Object.entries(staff) as [Who, (typeof staff)[Who]][]) {
    const id = randomUUID()
    const email = `${who}-${id.slice(0, 8)}@shop.test`
    await db.insert(people).values({ id, email, name, passwordHash })
    await db
      .insert(memberships)
      .values({ shopId, personId: id, roles: [...roles], pinHash: await hashOnce(pin) })
    made[who] = { id, email, name, pin }
  }
  return made
}

/** An enrolled device; the token is what its cookie holds. */
export async function enrolDevice(
  db: TestDatabase['db'],
  at: { shopId: string; siteId: string; station: string; enrolledBy: string },
) {
  const token = newToken()
  const [device] = await db
    .insert(devices)
    .values({ ...at, name: `${at.station} 1`, tokenSha256: tokenHash(token) })
    .returning({ id: devices.id })
  return { id: device!.id, token }
}
