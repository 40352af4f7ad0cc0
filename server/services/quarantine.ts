import { and, eq, inArray, isNull } from 'drizzle-orm'
import type { openQuarantine, releaseQuarantine, reviewQuarantine } from '#shared/api/items'
import type { BodyOf, IdsOf } from '#shared/api/define'
import { fittings, memberships, quarantines } from '../db/schema/schema'
import { Problem } from '../errors'
import type { PersonActor } from './actor'
import type { CommandContext, Service } from './commands'
import { endFitting } from './doubt'
import { changeState, lockItem } from './stateChanges'

type Does<C> = Service<BodyOf<C>, IdsOf<C>, PersonActor>

/** Anybody may hold an item; a fitting that has it becomes void first. */
export const openQuarantineService: Does<typeof openQuarantine> = async (context, body) => {
  const { tx, actor } = context
  await requireOwner(context, body.ownerId)
  await endOpenFitting(context, body)
  const item = await lockItem(tx, actor.shopId, { kind: body.itemKind, id: body.itemId })
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

async function endOpenFitting(context: CommandContext, { itemKind, itemId }: BodyOf<typeof openQuarantine>) {
  const [fitting] = await context.tx
    .select()
    .from(fittings)
    .where(
      and(
        eq(fittings.shopId, context.actor.shopId),
        eq(itemKind === 'ski_pair' ? fittings.skiPairId : fittings.bootsId, itemId),
        inArray(fittings.state, ['claimed', 'prepared']),
      ),
    )
    .for('update')
  const reason = itemKind === 'ski_pair' ? 'ski_pair_changed' : 'boots_changed'
  if (fitting) await endFitting(context, fitting, { state: 'void', reason })
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
