import { eq } from 'drizzle-orm'
import type { ItemKind, ItemState } from '#shared/lifecycle/itemStates'
import { boots, skiPairs, stateChanges } from '../db/schema/schema'
import type { Tx } from '../deps'
import { Problem } from '../errors'
import { deviceIdOf, personIdOf } from './actor'
import type { CommandContext } from './commands'

export interface ItemRef {
  kind: ItemKind
  id: string
}

/**
 * Moves an item along one edge of its life cycle. The state change is the fact; the database projects it onto the
 * item in the same statement and refuses it when the item is no longer in `from` (another clerk was faster) or the
 * edge does not exist.
 */
export async function changeState(
  context: CommandContext,
  item: ItemRef,
  change: {
    from: ItemState
    to: ItemState
    siteId: string
    rackPlace?: string | null
    reason?: string
    subjectId?: string
    undoesId?: string
  },
): Promise<string> {
  const [row] = await context.tx
    .insert(stateChanges)
    .values({
      shopId: context.actor.shopId,
      itemKind: item.kind,
      itemId: item.id,
      fromState: change.from,
      toState: change.to,
      siteId: change.siteId,
      rackPlace: change.rackPlace ?? null,
      reason: change.reason,
      subjectId: change.subjectId,
      undoesId: change.undoesId,
      personId: personIdOf(context.actor),
      deviceId: deviceIdOf(context.actor),
      commandId: context.commandId,
      occurredAt: context.occurredAt,
    })
    .returning({ id: stateChanges.id })
  context.touchItem(item.kind, item.id)
  return row!.id
}

/** The item's row, locked until the command ends; `items.unknown` when the shop has no such item. */
export async function lockItem(tx: Tx, shopId: string, item: ItemRef) {
  const table = item.kind === 'ski_pair' ? skiPairs : boots
  const [row] = await tx
    .select({
      id: table.id,
      shopId: table.shopId,
      code: table.code,
      state: table.state,
      siteId: table.siteId,
      homeSiteId: table.homeSiteId,
      rackPlace: table.rackPlace,
      stateSince: table.stateSince,
    })
    .from(table)
    .where(eq(table.id, item.id))
    .for('update')
  if (!row || row.shopId !== shopId) throw new Problem('items.unknown')
  return { ...row, kind: item.kind, state: row.state as ItemState }
}

/** Locks several items in id order, so that two commands never wait for each other. */
export async function lockItems(tx: Tx, shopId: string, items: ItemRef[]) {
  const inOrder = [...items].sort((a, b) => (a.id < b.id ? -1 : 1))
  const rows = []
  for (const item of inOrder) rows.push(await lockItem(tx, shopId, item))
  return rows
}
