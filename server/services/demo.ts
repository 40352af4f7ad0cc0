import { eq } from 'drizzle-orm'
import type { DemoAnswer } from '#shared/api/session'
import { demoDomain, demoStaff } from '../db/seed/people'
import { shops } from '../db/schema/schema'
import type { Deps } from '../deps'

/** The demo shop's invented sign-ins; null unless this is the demo on loopback, with the demo's own shop in it. */
export async function demoPeople(deps: Pick<Deps, 'db' | 'demo'>): Promise<DemoAnswer> {
  if (!deps.demo || (await deps.db.$count(shops, eq(shops.demo, true))) === 0) return null
  return {
    people: demoStaff.map(({ key, name, roles, password, pin }) => ({
      name,
      roles,
      email: `${key}@${demoDomain}`,
      password,
      pin,
    })),
  }
}
