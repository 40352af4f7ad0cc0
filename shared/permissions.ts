/**
 * Who may do what: the one table that routes, sockets and menus ask. A person may hold several roles; what one of
 * them allows is allowed.
 */
export const roles = ['manager', 'head_technician', 'technician', 'counter'] as const
export type Role = (typeof roles)[number]

const everyone: readonly Role[] = roles
const workshop: readonly Role[] = ['technician', 'head_technician']
const head: readonly Role[] = ['head_technician']
const fleet: readonly Role[] = ['head_technician', 'manager']
const office: readonly Role[] = ['manager']

export const permissions = {
  // everybody who works in the shop
  'board.read': everyone,
  'renters.read': everyone,
  'renters.write': everyone,
  'fittings.read': everyone,
  'fittings.claim': everyone,
  'handOvers.record': everyone,
  'returns.record': everyone,
  'quarantine.open': everyone,
  'fleet.read': everyone,
  'stations.use': everyone,
  'callBacks.read': everyone,
  'callBacks.work': everyone,
  // those who work at the bench
  'tickets.work': workshop,
  'records.sign': workshop,
  'returns.clear': workshop,
  'service.work': workshop,
  // what a head technician answers for
  'fittings.decide': head,
  'bindingModels.approve': head,
  'tableEdition.approve': head,
  'quarantine.release': head,
  'fleet.retire': head,
  // the fleet's data
  'fleet.write': fleet,
  'callBacks.open': fleet,
  // the office
  'people.manage': office,
  'devices.manage': office,
  'shop.manage': office,
} as const satisfies Record<string, readonly Role[]>

export type Permission = keyof typeof permissions

/** Whether somebody with these roles may do this. */
export function may(held: readonly Role[], permission: Permission): boolean {
  const allowed: readonly Role[] = permissions[permission]
  return held.some((role) => allowed.includes(role))
}

/** Everything that these roles allow, for menus. */
export function permissionsOf(held: readonly Role[]): Permission[] {
  return (Object.keys(permissions) as Permission[]).filter((permission) => may(held, permission))
}
