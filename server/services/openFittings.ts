import { and, eq, inArray } from 'drizzle-orm'
import { openFittingStates } from '#shared/lifecycle/fittingStates'
import { fittings } from '../db/schema/schema'
import type { CommandContext } from './commands'
import type { ItemRef } from './stateChanges'

/**
 * The open fitting that has an item, locked, or null. Commands lock a fitting before its items, so that none waits
 * for another in a circle: what may end a fitting asks for it here before it locks the item.
 */
export async function lockOpenFittingOf(context: CommandContext, item: ItemRef) {
  const [fitting] = await context.tx
    .select()
    .from(fittings)
    .where(
      and(
        eq(fittings.shopId, context.actor.shopId),
        eq(item.kind === 'ski_pair' ? fittings.skiPairId : fittings.bootsId, item.id),
        inArray(fittings.state, [...openFittingStates]),
      ),
    )
    .for('update')
  return fitting ?? null
}
