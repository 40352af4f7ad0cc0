import { and, eq, sql } from 'drizzle-orm'
import type { changeBoots, createBoots } from '#shared/api/boots'
import type { BodyOf, IdsOf } from '#shared/api/define'
import { labelFor } from '#shared/labels/labels'
import { boots, labels } from '../db/schema/schema'
import { isDuplicate, Problem } from '../errors'
import type { PersonActor } from './actor'
import type { Service } from './commands'
import { doubtFittings } from './doubt'
import { changedFields, noteOfficeChange } from './office'
import { lockOpenFittingOf } from './openFittings'
import { requireSite } from './shops'

type Does<C> = Service<BodyOf<C>, IdsOf<C>, PersonActor>

export const createBootsService: Does<typeof createBoots> = async (context, body) => {
  const { tx, actor } = context
  const { shopId } = actor
  await requireSite(tx, shopId, body.homeSiteId)
  try {
    const [row] = await tx
      .insert(boots)
      .values({
        ...body,
        rackPlace: body.rackPlace || null,
        shopId,
        siteId: body.homeSiteId,
        stateSince: context.occurredAt,
      })
      .returning({ id: boots.id })
    const bootsId = row!.id
    for (const side of ['left', 'right'] as const) {
      await tx
        .insert(labels)
        .values({ shopId, text: labelFor(body.code, side), itemKind: 'boots', itemId: bootsId, side })
    }
    await noteOfficeChange(context, 'boots.create', bootsId, Object.keys(body))
    context.touchItem('boots', bootsId)
    return { bootsId }
  } catch (error) {
    if (isDuplicate(error, 'boots_code') || isDuplicate(error, 'labels_text')) {
      throw new Problem('items.code_taken', { code: body.code })
    }
    throw error
  }
}

export const changeBootsService: Does<typeof changeBoots> = async (context, { id, version, ...values }) => {
  const { tx, actor } = context
  await lockOpenFittingOf(context, { kind: 'boots', id })
  const [before] = await tx
    .select()
    .from(boots)
    .where(and(eq(boots.id, id), eq(boots.shopId, actor.shopId)))
    .for('update')
  if (!before) throw new Problem('items.unknown')
  if (before.state === 'quarantine') throw new Problem('items.held', { code: before.code })
  if (before.version !== version) throw new Problem('items.changed', { code: before.code })
  await requireSite(tx, actor.shopId, values.homeSiteId)
  const otherSole = values.soleLengthMm !== before.soleLengthMm || values.soleType !== before.soleType
  if (otherSole) await doubtFittings(context, { bootsId: id }, 'sole_changed')
  const now = { ...values, rackPlace: values.rackPlace || null }
  await tx
    .update(boots)
    .set({ ...now, version: sql`${boots.version} + 1` })
    .where(eq(boots.id, id))
  await noteOfficeChange(context, 'boots.change', id, changedFields(before, now))
  context.touchItem('boots', id)
  return { bootsId: id }
}
