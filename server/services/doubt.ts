import { and, eq, inArray, isNull, or, sql, type SQL } from 'drizzle-orm'
import type { ItemState } from '#shared/lifecycle/itemStates'
import { openFittingStates, type VoidReason } from '#shared/lifecycle/fittingStates'
import { callBacks, fittings, rentalItems } from '../db/schema/schema'
import { Problem } from '../errors'
import { personIdOf } from './actor'
import type { CommandContext } from './commands'
import { changeState, lockItems, type ItemRef } from './stateChanges'

type Fitting = typeof fittings.$inferSelect

/** The fitting's row, locked; `fittings.not_open` when it is not one of this shop. */
export async function lockFitting(context: CommandContext, fittingId: string): Promise<Fitting> {
  const [fitting] = await context.tx
    .select()
    .from(fittings)
    .where(and(eq(fittings.id, fittingId), eq(fittings.shopId, context.actor.shopId)))
    .for('update')
  if (!fitting) throw new Problem('fittings.not_open', { state: 'unknown' })
  return fitting
}

export const itemsOf = (fitting: Pick<Fitting, 'skiPairId' | 'bootsId'>): ItemRef[] => [
  { kind: 'ski_pair', id: fitting.skiPairId },
  ...(fitting.bootsId ? [{ kind: 'boots', id: fitting.bootsId } as const] : []),
]

/**
 * Ends an open fitting: void, or given back. Its items go back to the rack unless `to` names another state for one
 * of them; a preset stays as it was last read.
 */
export async function endFitting(
  context: CommandContext,
  fitting: Fitting,
  end: {
    state: 'void' | 'given_back'
    reason: VoidReason | 'given_back' | 'no_show'
    to?: Record<string, ItemState>
    /** In a person's words, for an item that does not go back to the rack. */
    why?: string
  },
) {
  if (fitting.state !== 'claimed' && fitting.state !== 'prepared') {
    throw new Problem('fittings.not_open', { state: fitting.state })
  }
  const items = await lockItems(context.tx, context.actor.shopId, itemsOf(fitting))
  await context.tx
    .update(fittings)
    .set({
      state: end.state,
      endReason: end.reason,
      endedAt: context.occurredAt,
      heldBy: null,
      heldDeviceId: null,
      heldSince: null,
    })
    .where(eq(fittings.id, fitting.id))
  for (const item of items) {
    const to = end.to?.[item.id] ?? 'racked'
    await changeState(context, item, {
      from: item.state,
      to,
      siteId: item.siteId,
      reason: to === 'racked' ? end.reason : (end.why ?? end.reason),
      subjectId: fitting.id,
    })
  }
  context.touchFitting(fitting.id)
  context.touchRental(fitting.rentalId)
}

/**
 * Something that these fittings were computed from is no longer true: the open ones become void, and for one that
 * was handed over and is still out a call-back is opened.
 */
export async function doubtFittings(
  context: CommandContext,
  of: { renterId?: string; bootsId?: string; skiPairId?: string; skiPairIds?: string[] },
  reason: VoidReason,
) {
  const subject = or(
    of.renterId ? eq(fittings.renterId, of.renterId) : undefined,
    of.bootsId ? eq(fittings.bootsId, of.bootsId) : undefined,
    of.skiPairId ? eq(fittings.skiPairId, of.skiPairId) : undefined,
    of.skiPairIds?.length ? inArray(fittings.skiPairId, of.skiPairIds) : undefined,
  )
  if (!subject) return
  await waitForHandOvers(context, subject)
  const stillOut = sql`exists (select 1 from ${rentalItems} where ${rentalItems.fittingId} = ${fittings.id} and ${rentalItems.backAt} is null)`
  const found = await context.tx
    .select()
    .from(fittings)
    .where(
      and(
        eq(fittings.shopId, context.actor.shopId),
        subject,
        or(inArray(fittings.state, [...openFittingStates]), and(eq(fittings.state, 'handed_over'), stillOut)),
      ),
    )
    .orderBy(fittings.id)
    .for('update')
  for (const fitting of found) {
    if (fitting.state === 'handed_over') await openCallBack(context, fitting, reason)
    else await endFitting(context, fitting, { state: 'void', reason })
  }
}

/**
 * Locks the open fittings. One that is handed over at this very moment is waited for, and what that wrote shows only
 * to a statement that begins afterwards.
 */
async function waitForHandOvers({ tx, actor }: CommandContext, subject: SQL) {
  await tx
    .select({ id: fittings.id })
    .from(fittings)
    .where(and(eq(fittings.shopId, actor.shopId), subject, inArray(fittings.state, [...openFittingStates])))
    .orderBy(fittings.id)
    .for('update')
}

/** Opens a call-back for a fitting that is out; one open entry per fitting and cause. */
export async function openCallBack(
  context: CommandContext,
  fitting: Pick<Fitting, 'id' | 'rentalId' | 'recordId'>,
  cause: string,
  detail = '',
): Promise<string | null> {
  const [row] = await context.tx
    .insert(callBacks)
    .values({
      shopId: context.actor.shopId,
      fittingId: fitting.id,
      rentalId: fitting.rentalId,
      recordId: fitting.recordId,
      cause,
      detail,
      openedBy: personIdOf(context.actor),
      openedAt: context.occurredAt,
    })
    .onConflictDoNothing({
      target: [callBacks.fittingId, callBacks.cause],
      where: isNull(callBacks.closedAt),
    })
    .returning({ id: callBacks.id })
  context.touchCallBacks()
  return row?.id ?? null
}
