import { and, asc, eq, gt, isNotNull, isNull, sql } from 'drizzle-orm'
import type { z } from 'zod'
import type { stationAnswer } from '#shared/api/session'
import type { Role } from '#shared/permissions'
import { pinTriesAllowed } from '#shared/pins/pinRules'
import { devices, memberships, people, session, shops, sites } from '../db/schema/schema'
import type { Deps } from '../deps'

type Station = NonNullable<z.infer<typeof stationAnswer>>

/** The device that asks and who may go on at it; `here` is who is on it now. */
export async function stationOf(
  deps: Deps,
  deviceId: string,
  here: { personId: string; sessionId: string } | null,
): Promise<Station | null> {
  const [found] = await deps.db
    .select({ device: devices, siteName: sites.name, shopName: shops.name, enrolledBy: people.name })
    .from(devices)
    .innerJoin(sites, eq(sites.id, devices.siteId))
    .innerJoin(shops, eq(shops.id, devices.shopId))
    .innerJoin(people, eq(people.id, devices.enrolledBy))
    .where(eq(devices.id, deviceId))
  if (!found) return null
  const { device } = found
  const rows = await deps.db
    .select({ id: people.id, name: people.name, member: memberships })
    .from(memberships)
    .innerJoin(people, eq(people.id, memberships.personId))
    .where(and(eq(memberships.shopId, device.shopId), isNull(memberships.endedAt), isNull(people.disabledAt)))
    .orderBy(asc(people.name), asc(people.id))
  const elsewhere = await whereabouts(deps, device.shopId, device.id)
  return {
    device: { id: device.id, name: device.name, station: device.station, siteName: found.siteName },
    shop: { name: found.shopName },
    enrolled: { by: found.enrolledBy, at: device.enrolledAt.toISOString() },
    here: here ? { personId: here.personId, since: await startedAt(deps, here.sessionId) } : null,
    people: rows.map(({ id, name, member }) => ({
      id,
      name,
      roles: member.roles as Role[],
      hasPin: member.pinHash !== null,
      pinLocked: member.pinTries >= pinTriesAllowed,
      at: elsewhere.get(id) ?? null,
    })),
  }
}

/** At which other devices people went on and still are. */
async function whereabouts(deps: Deps, shopId: string, except: string): Promise<Map<string, string>> {
  const rows = await deps.db
    .select({ personId: session.personId, name: devices.name })
    .from(session)
    .innerJoin(devices, sql`${devices.id}::text = ${session.sess} ->> 'deviceId'`)
    .where(
      and(
        eq(devices.shopId, shopId),
        sql`${devices.id} <> ${except}`,
        isNull(devices.revokedAt),
        isNotNull(session.personId),
        gt(session.expire, deps.now()),
      ),
    )
    .orderBy(asc(sql`${session.sess} ->> 'startedAt'`))
  return new Map(rows.map((row) => [row.personId!, row.name]))
}

async function startedAt(deps: Deps, sessionId: string): Promise<string | null> {
  const [row] = await deps.db
    .select({ at: sql<string | null>`${session.sess} ->> 'startedAt'` })
    .from(session)
    .where(eq(session.sid, sessionId))
  return row?.at ?? null
}
