import { and, eq, gt, isNull } from 'drizzle-orm'
import type { Request, RequestHandler } from 'express'
import type { Role } from '#shared/permissions'
import { devices, formLinks, memberships, people } from '../db/schema/schema'
import type { Deps } from '../deps'
import type { LinkActor, PersonActor } from '../services/actor'
import type { SessionUser } from './passport'
import { tokenHash } from './tokens'

export const deviceCookie = 'notchwise_device'
export const linkHeader = 'x-renter-link'
export const pinHeader = 'x-pin'

/** What a request of HTTP and the handshake of a socket have in common. */
export type SessionRequest = Pick<Request, 'headers' | 'session' | 'user'>

/** Finds out who acts, for every API request: a renter by link, a person by session, or nobody. */
export function findActor(deps: Deps): RequestHandler {
  return async (req, _res, next) => {
    const link = req.get(linkHeader)
    req.actor = link ? await linkActor(deps, link) : await personActor(deps, req)
    next()
  }
}

/** The person of this session with their roles as they are now; disabled or ended means nobody. */
export async function personActor(deps: Pick<Deps, 'db'>, req: SessionRequest): Promise<PersonActor | null> {
  const personId = (req.user as SessionUser | undefined)?.id
  const shopId = req.session?.shopId
  if (!personId || !shopId) return null
  const [member] = await deps.db
    .select({ roles: memberships.roles })
    .from(memberships)
    .innerJoin(people, eq(people.id, memberships.personId))
    .where(
      and(
        eq(memberships.personId, personId),
        eq(memberships.shopId, shopId),
        isNull(memberships.endedAt),
        isNull(people.disabledAt),
      ),
    )
  if (!member) return null
  const device = await enrolledDevice(deps, req)
  const here = device?.shopId === shopId ? device : null
  const pin = req.headers[pinHeader]
  return {
    kind: 'person',
    shopId,
    personId,
    roles: member.roles as Role[],
    deviceId: here?.id ?? null,
    siteId: here?.siteId ?? null,
    ...(typeof pin === 'string' ? { pin } : {}),
  }
}

/** The device whose token the cookie holds, unless it was revoked. */
export async function enrolledDevice(deps: Pick<Deps, 'db'>, req: Pick<SessionRequest, 'headers'>) {
  const token = cookieOf(req, deviceCookie)
  if (!token) return null
  const [device] = await deps.db
    .select()
    .from(devices)
    .where(and(eq(devices.tokenSha256, tokenHash(token)), isNull(devices.revokedAt)))
  return device ?? null
}

async function linkActor(deps: Deps, token: string): Promise<LinkActor | null> {
  const [link] = await deps.db
    .select({ id: formLinks.id, shopId: formLinks.shopId, siteId: formLinks.siteId })
    .from(formLinks)
    .where(
      and(
        eq(formLinks.tokenSha256, tokenHash(token)),
        isNull(formLinks.revokedAt),
        gt(formLinks.expiresAt, deps.now()),
      ),
    )
  return link ? { kind: 'link', shopId: link.shopId, linkId: link.id, siteId: link.siteId } : null
}

function cookieOf(req: Pick<SessionRequest, 'headers'>, name: string): string | null {
  for (const part of (req.headers.cookie ?? '').split(';')) {
    const [key, value] = part.trim().split('=', 2)
    if (key === name && value) return decodeURIComponent(value)
  }
  return null
}
