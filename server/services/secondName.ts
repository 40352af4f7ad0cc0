import { and, eq, isNull } from 'drizzle-orm'
import { may, type Role } from '#shared/permissions'
import { memberships } from '../db/schema/schema'
import { Problem } from '../errors'
import type { PersonActor } from './actor'
import type { CommandContext } from './commands'
import { requirePin } from './pins'

/**
 * The second name under a decision: somebody else of the workshop, whose PIN came with the command. Answers the
 * person's id; throws fittings.second_name for nobody, oneself, and who does not work at the bench.
 */
export async function provenSecond(
  context: CommandContext<PersonActor>,
  personId: string | undefined,
): Promise<string> {
  const { tx, actor } = context
  if (!personId || personId === actor.personId) throw new Problem('fittings.second_name')
  const [member] = await tx
    .select({ roles: memberships.roles })
    .from(memberships)
    .where(
      and(
        eq(memberships.shopId, actor.shopId),
        eq(memberships.personId, personId),
        isNull(memberships.endedAt),
      ),
    )
  if (!member || !may(member.roles as Role[], 'records.sign')) throw new Problem('fittings.second_name')
  await requirePin(context, personId)
  return personId
}
