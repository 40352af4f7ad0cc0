import { and, asc, eq, isNull, sql } from 'drizzle-orm'
import type { z } from 'zod'
import type { BodyOf, IdsOf } from '#shared/api/define'
import type { DeviceRow, enrolBody, revokeDevice, Station } from '#shared/api/devices'
import { newToken, tokenHash } from '../auth/tokens'
import { devices, people, sites } from '../db/schema/schema'
import type { Deps, Reader } from '../deps'
import { Problem } from '../errors'
import type { PersonActor } from './actor'
import type { Service } from './commands'
import { noteOfficeChange } from './office'
import { endSessionsAt } from './sessions'
import { requireSite } from './shops'

type Does<C> = Service<BodyOf<C>, IdsOf<C>, PersonActor>

/** Enrolled browsers, revoked ones last; `here` is the one that asks. */
export async function devicesOf(db: Reader, shopId: string, here: string | null): Promise<DeviceRow[]> {
  const rows = await db
    .select({ device: devices, siteName: sites.name, enrolledBy: people.name })
    .from(devices)
    .innerJoin(sites, eq(sites.id, devices.siteId))
    .innerJoin(people, eq(people.id, devices.enrolledBy))
    .where(eq(devices.shopId, shopId))
    .orderBy(sql`${devices.revokedAt} is not null`, asc(devices.name), asc(devices.enrolledAt))
  return rows.map(({ device, siteName, enrolledBy }) => ({
    id: device.id,
    name: device.name,
    station: device.station as Station,
    siteId: device.siteId,
    siteName,
    enrolledBy,
    enrolledAt: device.enrolledAt.toISOString(),
    revokedAt: device.revokedAt?.toISOString() ?? null,
    here: device.id === here,
  }))
}

/** Makes a device of the browser that asks; the token goes into its cookie and only its hash is kept. */
export async function enrolDevice(
  deps: Deps,
  actor: PersonActor,
  { name, station, siteId }: z.infer<typeof enrolBody>,
): Promise<{ deviceId: string; token: string }> {
  const token = newToken()
  const deviceId = await deps.db.transaction(async (tx) => {
    await requireSite(tx, actor.shopId, siteId)
    if (actor.deviceId) {
      await tx.update(devices).set({ revokedAt: deps.now() }).where(eq(devices.id, actor.deviceId))
    }
    const [device] = await tx
      .insert(devices)
      .values({
        shopId: actor.shopId,
        siteId,
        name,
        station,
        tokenSha256: tokenHash(token),
        enrolledBy: actor.personId,
      })
      .returning({ id: devices.id })
    const change = { tx, actor, commandId: null, occurredAt: deps.now() }
    await noteOfficeChange(change, 'devices.enrol', device!.id, ['name', 'station', 'site'])
    return device!.id
  })
  return { deviceId, token }
}

export const revokeDeviceService: Does<typeof revokeDevice> = async (context, { deviceId }) => {
  const { tx, actor } = context
  const [device] = await tx
    .select()
    .from(devices)
    .where(and(eq(devices.id, deviceId), eq(devices.shopId, actor.shopId)))
    .for('update')
  if (!device) throw new Problem('devices.unknown')
  await tx
    .update(devices)
    .set({ revokedAt: context.occurredAt })
    .where(and(eq(devices.id, deviceId), isNull(devices.revokedAt)))
  if (!device.revokedAt) await noteOfficeChange(context, 'devices.revoke', deviceId, ['access'])
  return { deviceId }
}

/** After a device was revoked: whoever went on there is signed out. */
export const leaveDevice = (deps: Deps, _actor: PersonActor, { deviceId }: BodyOf<typeof revokeDevice>) =>
  endSessionsAt(deps, deviceId)
