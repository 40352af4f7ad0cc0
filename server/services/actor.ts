import type { Role } from '#shared/permissions'

/** Who acts: a person of the shop at a device, or a renter by the link they were given. */
export type Actor = PersonActor | LinkActor

export interface PersonActor {
  kind: 'person'
  shopId: string
  personId: string
  roles: Role[]
  deviceId: string | null
  siteId: string | null
  /** The six digits sent along with a command that is signed by PIN; never stored, never logged. */
  pin?: string
  /** Whose PIN it was, once it was proved; null when none had to be. */
  provedPinOf?: string | null
}

export interface LinkActor {
  kind: 'link'
  shopId: string
  linkId: string
  siteId: string
}

export const personIdOf = (actor: Actor) => (actor.kind === 'person' ? actor.personId : null)
export const deviceIdOf = (actor: Actor) => (actor.kind === 'person' ? actor.deviceId : null)
