import { and, asc, eq, isNull, ne } from 'drizzle-orm'
import { permissionsOf } from '#shared/permissions'
import type { SessionAnswer } from '#shared/api/session'
import { devices, memberships, people, session, shops, sites } from '../db/schema/schema'
import type { Deps } from '../deps'
import { Problem } from '../errors'
import type { PersonActor } from './actor'

/** What the signed-in screens know about themselves. */
export async function sessionOf(deps: Deps, actor: PersonActor): Promise<SessionAnswer> {
  const [row] = await deps.db
    .select({
      name: people.name,
      locale: people.locale,
      pinHash: memberships.pinHash,
      shop: { id: shops.id, name: shops.name, zone: shops.zone, demo: shops.demo },
    })
    .from(memberships)
    .innerJoin(people, eq(people.id, memberships.personId))
    .innerJoin(shops, eq(shops.id, memberships.shopId))
    .where(and(eq(memberships.personId, actor.personId), eq(memberships.shopId, actor.shopId)))
  if (!row) throw new Problem('session.missing')
  const siteRows = await deps.db
    .select({ id: sites.id, name: sites.name })
    .from(sites)
    .where(eq(sites.shopId, actor.shopId))
    .orderBy(asc(sites.createdAt), asc(sites.name))
  const [device] = actor.deviceId
    ? await deps.db
        .select({ id: devices.id, name: devices.name, station: devices.station, siteId: devices.siteId })
        .from(devices)
        .where(eq(devices.id, actor.deviceId))
    : []
  return {
    person: { id: actor.personId, name: row.name, locale: row.locale },
    shop: row.shop,
    sites: siteRows,
    device: device ?? null,
    roles: actor.roles,
    permissions: permissionsOf(actor.roles),
    hasPin: row.pinHash !== null,
  }
}

/** The shop that a person signs in to: the first that they belong to. */
export async function homeShop(deps: Deps, personId: string): Promise<string> {
  const [member] = await deps.db
    .select({ shopId: memberships.shopId })
    .from(memberships)
    .where(and(eq(memberships.personId, personId), isNull(memberships.endedAt)))
    .orderBy(asc(memberships.createdAt))
  if (!member) throw new Problem('session.wrong_credentials')
  return member.shopId
}

/** Ends every session of a person, sockets included; `except` keeps the one that asked. */
export async function endSessions(deps: Deps, personId: string, except?: string) {
  await deps.db
    .delete(session)
    .where(and(eq(session.personId, personId), except ? ne(session.sid, except) : undefined))
  deps.dropSockets({ personId })
}
