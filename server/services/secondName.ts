import { and, eq, isNull } from 'drizzle-orm'
import { may, type Role } from '#shared/permissions'
import { secretFits } from '../auth/passwords'
import { memberships, people } from '../db/schema/schema'
import { Problem } from '../errors'
import type { PersonActor } from './actor'
import type { CommandContext } from './commands'

/**
 * The second name under a decision: somebody else of the workshop, who typed their own PIN with the command.
 * Answers the person's id.
 */
export async function provenSecond(
  { tx, actor }: CommandContext<PersonActor>,
  personId: string | undefined,
): Promise<string> {
  if (!personId || personId === actor.personId) throw new Problem('fittings.second_name')
  const [member] = await tx
    .select({ roles: memberships.roles, pinHash: memberships.pinHash })
    .from(memberships)
    .innerJoin(people, eq(people.id, memberships.personId))
    .where(
      and(
        eq(memberships.shopId, actor.shopId),
        eq(memberships.personId, personId),
        isNull(memberships.endedAt),
        isNull(people.disabledAt),
      ),
    )
  if (!member || !may(member.roles as Role[], 'records.sign')) throw new Problem('fittings.second_name')
  if (!member.pinHash) throw new Problem('pin.not_set')
  if (!(await secretFits(actor.pin ?? '', member.pinHash))) throw new Problem('pin.wrong')
  return personId
}
