import type { SessionAnswer } from '#shared/api/session'
import { may, type Permission } from '#shared/permissions'

const byStation: Record<string, string> = { bench: 'bench', returns: 'returns', counter: 'counter' }

/** Where somebody's day begins, best first: the place of the device, then what their roles are for. */
export function homesOf({ device, roles }: Pick<SessionAnswer, 'device' | 'roles'>): string[] {
  const can = (permission: Permission) => may(roles, permission)
  return [
    device ? byStation[device.station] : undefined,
    roles.includes('counter') ? 'counter' : undefined,
    can('tickets.work') ? 'bench' : undefined,
    can('people.manage') ? 'board' : undefined,
    'counter',
    'board',
  ].filter((name) => name !== undefined)
}
