import { and, asc, desc, eq, isNull, ne, notInArray, sql } from 'drizzle-orm'
import { permissionsOf } from '#shared/permissions'
import type { SessionAnswer } from '#shared/api/session'
import { hashSecret, secretFits } from '../auth/passwords'
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
      shop: {
        id: shops.id,
        name: shops.name,
        zone: shops.zone,
        demo: shops.demo,
        claimAgesMinutes: shops.claimAgesMinutes,
      },
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

const atDevice = (deviceId: string) => sql`${session.sess} ->> 'deviceId' = ${deviceId}`

/** Ends whatever session is open at a device. */
export async function endSessionsAt(deps: Deps, deviceId: string) {
  const ended = await deps.db.delete(session).where(atDevice(deviceId)).returning({ sid: session.sid })
  for (const { sid } of ended) deps.dropSockets({ sessionId: sid })
}

/**
 * One person at a time at a device: keeps its latest session and ends the others, whoever asks. Of two who go on in
 * the same moment both calls keep the same one.
 */
export async function keepOneSessionAt(deps: Deps, deviceId: string) {
  const latest = deps.db
    .select({ sid: session.sid })
    .from(session)
    .where(atDevice(deviceId))
    .orderBy(desc(sql`${session.sess} ->> 'startedAt'`), desc(session.sid))
    .limit(1)
  const ended = await deps.db
    .delete(session)
    .where(and(atDevice(deviceId), notInArray(session.sid, latest)))
    .returning({ sid: session.sid })
  for (const { sid } of ended) deps.dropSockets({ sessionId: sid })
}

/** Whether this session still stands. */
export async function sessionStands(deps: Pick<Deps, 'db'>, sid: string): Promise<boolean> {
  return (await deps.db.$count(session, eq(session.sid, sid))) > 0
}

/** Refuses with session.wrong_password unless this is the person's password. */
export async function requirePassword(deps: Pick<Deps, 'db'>, personId: string, password: string) {
  const [person] = await deps.db
    .select({ passwordHash: people.passwordHash })
    .from(people)
    .where(eq(people.id, personId))
  if (!(await secretFits(password, person?.passwordHash ?? null))) throw new Problem('session.wrong_password')
}

/** A person's own new password; their sessions elsewhere end. */
export async function changeOwnPassword(deps: Deps, personId: string, password: string, sessionId: string) {
  await deps.db
    .update(people)
    .set({ passwordHash: await hashSecret(password) })
    .where(eq(people.id, personId))
  await endSessions(deps, personId, sessionId)
}
