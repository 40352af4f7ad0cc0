import { and, eq, isNull } from 'drizzle-orm'
import type { lookUpLabel, moveItem, replaceLabel } from '#shared/api/items'
import type { AnswerOf, BodyOf, IdsOf } from '#shared/api/define'
import { labelFor, parseTyped, parseLabel } from '#shared/labels/labels'
import type { ItemState } from '#shared/lifecycle/itemStates'
import { may, type Permission } from '#shared/permissions'
import { boots, labels, sites, skiPairs } from '../db/schema/schema'
import { iso } from '../db/queries/lists'
import { openFittingOf } from '../db/queries/items'
import type { Reader } from '../deps'
import { Problem } from '../errors'
import type { PersonActor } from './actor'
import type { Service } from './commands'
import { changeState, lockItem } from './stateChanges'

type Does<C> = Service<BodyOf<C>, IdsOf<C>, PersonActor>

/** Finds the item that a scanned or typed label names: with its check character, or typed without. */
export async function findLabel(
  db: Reader,
  shopId: string,
  text: string,
): Promise<
  | { ok: true; itemKind: 'ski_pair' | 'boots'; itemId: string; side: 'left' | 'right' | null }
  | { ok: false; why: 'check_character' | 'unfinished' | 'not_ours' | 'unknown' }
> {
  const scanned = parseLabel(text)
  const parsed = scanned.ok ? scanned : parseTyped(text)
  if (!parsed.ok) return { ok: false, why: scanned.ok ? 'not_ours' : scanned.reason }
  if (scanned.ok) {
    const [label] = await db
      .select({ itemKind: labels.itemKind, itemId: labels.itemId, side: labels.side })
      .from(labels)
      .where(and(eq(labels.shopId, shopId), eq(labels.text, scanned.text), isNull(labels.until)))
    if (label) return { ok: true, ...label }
  }
  const itemKind = parsed.kind === 'ski' ? 'ski_pair' : 'boots'
  const table = itemKind === 'ski_pair' ? skiPairs : boots
  const [item] = await db
    .select({ id: table.id })
    .from(table)
    .where(and(eq(table.shopId, shopId), eq(table.code, parsed.code)))
  return item ? { ok: true, itemKind, itemId: item.id, side: parsed.side } : { ok: false, why: 'unknown' }
}

/** What a label names, where it is and who has it. */
export async function lookUp(
  db: Reader,
  shopId: string,
  text: string,
): Promise<AnswerOf<typeof lookUpLabel>> {
  const found = await findLabel(db, shopId, text)
  if (!found.ok) return { found: false, why: found.why }
  const table = found.itemKind === 'ski_pair' ? skiPairs : boots
  const [item] = await db
    .select({
      code: table.code,
      state: table.state,
      since: table.stateSince,
      site: sites.name,
      rackPlace: table.rackPlace,
    })
    .from(table)
    .innerJoin(sites, eq(sites.id, table.siteId))
    .where(eq(table.id, found.itemId))
  return {
    found: true,
    itemKind: found.itemKind,
    itemId: found.itemId,
    side: found.side,
    ...item!,
    state: item!.state as ItemState,
    since: iso(item!.since),
    fitting: await openFittingOf(db, found.itemId),
  }
}

/** Who may make which step; the rest of the life cycle has commands of its own. */
const stepPermission: Record<BodyOf<typeof moveItem>['to'], Permission> = {
  racked: 'fleet.write',
  service: 'service.work',
  unchecked: 'service.work',
  lost: 'returns.record',
  retired: 'fleet.retire',
  sold: 'fleet.retire',
  under_test: 'fleet.retire',
}
const openStates: readonly ItemState[] = ['claimed', 'prepared', 'quarantine']

export const moveItemService: Does<typeof moveItem> = async (
  context,
  { itemKind, itemId, to, rackPlace, reason },
) => {
  const permission = stepPermission[to]
  if (!may(context.actor.roles, permission)) throw new Problem('session.role', { permission })
  const item = await lockItem(context.tx, context.actor.shopId, { kind: itemKind, id: itemId })
  if (openStates.includes(item.state))
    throw new Problem('items.state', { state: item.state, code: item.code })
  // Only a return makes an item unchecked that is out: this step is for what comes from the workshop.
  if (item.state === 'out' && to !== 'lost')
    throw new Problem('items.state', { state: item.state, code: item.code })
  if (to !== 'racked' && to !== 'unchecked' && !reason) throw new Problem('items.reason', { code: item.code })
  const changeId = await changeState(context, item, {
    from: item.state,
    to,
    siteId: item.siteId,
    rackPlace: rackPlace || null,
    reason: reason || undefined,
  })
  return { changeId }
}

export const replaceLabelService: Does<typeof replaceLabel> = async (context, { itemKind, itemId, side }) => {
  const { tx, actor } = context
  const item = await lockItem(tx, actor.shopId, { kind: itemKind, id: itemId })
  if (item.state === 'quarantine') throw new Problem('items.held', { code: item.code })
  await tx
    .update(labels)
    .set({ until: context.occurredAt })
    .where(and(eq(labels.itemId, itemId), eq(labels.side, side), isNull(labels.until)))
  const [row] = await tx
    .insert(labels)
    .values({
      shopId: actor.shopId,
      text: labelFor(item.code, side),
      itemKind,
      itemId,
      side,
      since: context.occurredAt,
    })
    .returning({ id: labels.id })
  return { labelId: row!.id }
}
