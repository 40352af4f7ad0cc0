import { createHash, randomUUID } from 'node:crypto'
import type { Role } from '#shared/permissions'
import {
  devices,
  memberships,
  people,
  shops,
  shopSequences,
  shopTexts,
  sites,
} from '../../server/db/schema/schema'
import { hashSecret } from '../../server/auth/passwords'
import { newToken, tokenHash } from '../../server/auth/tokens'
import { defaultTexts } from '../../server/services/defaultTexts'
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

/** A shop with two sites and the product's own texts, and nobody in it yet. */
export async function addShop(db: TestDatabase['db'], name = 'Tarnside Hire') {
  const [shopId, lower, square] = [randomUUID(), randomUUID(), randomUUID()]
  await db.insert(shops).values({ id: shopId, name, zone: 'Europe/Vienna' })
  await db.insert(shopSequences).values({ shopId })
  await db.insert(shopTexts).values(
    defaultTexts().map((text) => ({
      ...text,
      shopId,
      version: 1,
      sha256: createHash('sha256').update(text.body, 'utf8').digest('hex'),
    })),
  )
  await db.insert(sites).values([
    { id: lower, shopId, name: 'Lower Lift' },
    { id: square, shopId, name: 'Village Square' },
  ])
  return { shopId, siteIds: [lower, square] as const }
}

/** Somebody of a shop who can sign in with the tests' password, and sign with the PIN when one is given. */
export async function addPerson(
  db: TestDatabase['db'],
  shopId: string,
  held: readonly Role[],
  { name = 'Somebody', pin }: { name?: string; pin?: string } = {},
) {
  const personId = randomUUID()
  const email = `${held.join('-')}-${personId.slice(0, 8)}@shop.test`
  await db.insert(people).values({ id: personId, email, name, passwordHash: await hashOnce(testPassword) })
  await db
    .insert(memberships)
    .values({ shopId, personId, roles: [...held], pinHash: pin ? await hashOnce(pin) : null })
  return { personId, email }
}

/** The staff of a shop with passwords and PINs: person ids and e-mail addresses by role. */
export async function addStaff(db: TestDatabase['db'], shopId: string) {
  const made = {} as Record<Who, { id: string; email: string; name: string; pin: string }>
  for (const [who, { name, roles, pin }] of Object.entries(staff) as [Who, (typeof staff)[Who]][]) {
    const { personId, email } = await addPerson(db, shopId, roles, { name, pin })
    made[who] = { id: personId, email, name, pin }
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
