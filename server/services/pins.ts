import { and, eq, isNull, lt, sql } from 'drizzle-orm'
import { isSimplePin, pinShape, pinTriesAllowed } from '#shared/pins/pinRules'
import { hashSecret, secretFits } from '../auth/passwords'
import { memberships, people } from '../db/schema/schema'
import type { Deps } from '../deps'
import { Problem } from '../errors'
import type { PersonActor } from './actor'
import type { CommandContext } from './commands'

/**
 * Holds a person to their six digits. Each try is counted before it is judged, in a statement of its own and never
 * in a command's transaction: tries sent side by side get no more than five between them, and a refused command
 * does not give its try back. Five wrong ones lock the PIN until the person signs in with their password.
 *
 * Throws pin.not_enrolled away from an enrolled device, pin.missing, pin.not_set, pin.wrong with `triesLeft`,
 * pin.locked.
 */
export async function provePin(
  { db }: Pick<Deps, 'db'>,
  { shopId, deviceId, pin }: Pick<PersonActor, 'shopId' | 'deviceId' | 'pin'>,
  personId: string,
): Promise<void> {
  if (!deviceId) throw new Problem('pin.not_enrolled')
  if (!pin) throw new Problem('pin.missing')
  if (!pinShape.test(pin)) throw new Problem('request.malformed')
  const member = and(eq(memberships.shopId, shopId), eq(memberships.personId, personId))
  const [found] = await db
    .select({ pinHash: memberships.pinHash })
    .from(memberships)
    .innerJoin(people, eq(people.id, memberships.personId))
    .where(and(member, isNull(memberships.endedAt), isNull(people.disabledAt)))
  if (!found?.pinHash) throw new Problem('pin.not_set')
  const [counted] = await db
    .update(memberships)
    .set({ pinTries: sql`${memberships.pinTries} + 1` })
    .where(and(member, lt(memberships.pinTries, pinTriesAllowed)))
    .returning({ tries: memberships.pinTries, pinHash: memberships.pinHash })
  if (!counted) throw new Problem('pin.locked')
  if (await secretFits(pin, counted.pinHash)) {
    await db.update(memberships).set({ pinTries: 0 }).where(member)
    return
  }
  const triesLeft = pinTriesAllowed - counted.tries
  throw triesLeft > 0 ? new Problem('pin.wrong', { triesLeft }) : new Problem('pin.locked')
}

/**
 * For services of commands that are signed by PIN: refuses unless this person's PIN came with the command. It was
 * proved before the command's transaction began, by the route: `does(definition, service, { signedBy })`.
 */
export async function requirePin(
  context: Pick<CommandContext<PersonActor>, 'actor'>,
  personId = context.actor.personId,
): Promise<void> {
  if (context.actor.provedPinOf === undefined) {
    throw new Error('the route of this command does not say whose PIN signs it (signedBy)')
  }
  if (context.actor.provedPinOf !== personId) throw new Problem('pin.missing')
  return Promise.resolve()
}

/** A person's own new PIN, after their password was proved. Throws pin.taken_shape for one that anybody guesses. */
export async function setPin(deps: Pick<Deps, 'db'>, actor: PersonActor, pin: string): Promise<void> {
  if (isSimplePin(pin)) throw new Problem('pin.taken_shape')
  const pinHash = await hashSecret(pin)
  await deps.db
    .update(memberships)
    .set({ pinHash, pinTries: 0 })
    .where(and(eq(memberships.shopId, actor.shopId), eq(memberships.personId, actor.personId)))
}

/** Who proved their password may try their PIN again. */
export async function unlockPin({ db }: Pick<Deps, 'db'>, personId: string): Promise<void> {
  await db
    .update(memberships)
    .set({ pinTries: 0 })
    .where(and(eq(memberships.personId, personId), sql`${memberships.pinTries} > 0`))
}
