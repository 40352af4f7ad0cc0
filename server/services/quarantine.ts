import { and, eq, isNull } from 'drizzle-orm'
import type { openQuarantine, releaseQuarantine, reviewQuarantine } from '#shared/api/items'
import type { BodyOf, IdsOf } from '#shared/api/define'
import { memberships, quarantines } from '../db/schema/schema'
import { Problem } from '../errors'
import type { PersonActor } from './actor'
import type { CommandContext, Service } from './commands'
import { endFitting } from './doubt'
import { lockOpenFittingOf } from './openFittings'
import { shopById, shopDay } from './shops'
import { changeState, lockItem, type ItemRef } from './stateChanges'

type Does<C> = Service<BodyOf<C>, IdsOf<C>, PersonActor>

/** Anybody may hold an item, whatever its state; a fitting that has it becomes void first. */
export const openQuarantineService: Does<typeof openQuarantine> = async (context, body) => {
  const { tx, actor } = context
  await requireOwner(context, body.ownerId)
  await requireReviewDay(context, body.reviewOn)
  const item = await lockFreeItem(context, { kind: body.itemKind, id: body.itemId })
  if (item.state === 'quarantine') throw new Problem('quarantine.open', { code: item.code })
  const [hold] = await tx
    .insert(quarantines)
    .values({
      shopId: actor.shopId,
      itemKind: body.itemKind,
      itemId: body.itemId,
      reason: body.reason,
      ownerId: body.ownerId,
      reviewOn: body.reviewOn,
      openedBy: actor.personId,
      openedAt: context.occurredAt,
    })
    .returning({ id: quarantines.id })
  await changeState(context, item, {
    from: item.state,
    to: 'quarantine',
    siteId: item.siteId,
    reason: body.reason,
    subjectId: hold!.id,
  })
  return { quarantineId: hold!.id }
}

/** The item, locked, after the fitting that has it ended; also when somebody claims it at this very moment. */
async function lockFreeItem(context: CommandContext, ref: ItemRef) {
  for (;;) {
    const fitting = await lockOpenFittingOf(context, ref)
    const reason = ref.kind === 'ski_pair' ? 'ski_pair_changed' : 'boots_changed'
    if (fitting) await endFitting(context, fitting, { state: 'void', reason })
    const item = await lockItem(context.tx, context.actor.shopId, ref)
    if (item.state !== 'claimed' && item.state !== 'prepared') return item
  }
}

/** A hold is looked at again on a day that is still to come, today included. */
async function requireReviewDay(context: CommandContext, reviewOn: string) {
  const shop = await shopById(context.tx, context.actor.shopId)
  const today = shopDay(shop, context.deps.now())
  if (reviewOn < today) throw new Problem('quarantine.review_day', { today })
}

async function requireOwner(context: CommandContext, personId: string) {
  const members = await context.tx.$count(
    memberships,
    and(
      eq(memberships.shopId, context.actor.shopId),
      eq(memberships.personId, personId),
      isNull(memberships.endedAt),
    ),
  )
  if (members === 0) throw new Problem('items.unknown')
}

async function lockHold(context: CommandContext, quarantineId: string) {
  const [hold] = await context.tx
    .select()
    .from(quarantines)
    .where(and(eq(quarantines.id, quarantineId), eq(quarantines.shopId, context.actor.shopId)))
    .for('update')
  if (!hold) throw new Problem('items.unknown')
  if (hold.releasedAt) throw new Problem('quarantine.release')
  return hold
}

export const reviewQuarantineService: Does<typeof reviewQuarantine> = async (context, body) => {
  await lockHold(context, body.quarantineId)
  await requireOwner(context, body.ownerId)
  await requireReviewDay(context, body.reviewOn)
  await context.tx
    .update(quarantines)
    .set({ ownerId: body.ownerId, reviewOn: body.reviewOn })
    .where(eq(quarantines.id, body.quarantineId))
  return { quarantineId: body.quarantineId }
}

export const releaseQuarantineService: Does<typeof releaseQuarantine> = async (context, body) => {
  const hold = await lockHold(context, body.quarantineId)
  const item = await lockItem(context.tx, context.actor.shopId, { kind: hold.itemKind, id: hold.itemId })
  await context.tx
    .update(quarantines)
    .set({
      releasedBy: context.actor.personId,
      releasedAt: context.occurredAt,
      releasedTo: body.to,
      releaseReason: body.reason,
    })
    .where(eq(quarantines.id, hold.id))
  await changeState(context, item, {
    from: 'quarantine',
    to: body.to,
    siteId: item.siteId,
    reason: body.reason,
    subjectId: hold.id,
  })
  return { quarantineId: hold.id }
}
