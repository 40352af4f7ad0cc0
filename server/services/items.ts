import { and, desc, eq, isNull, sql } from 'drizzle-orm'
import type { lookUpLabel, moveItem, replaceLabel, undoMove } from '#shared/api/items'
import type { AnswerOf, BodyOf, IdsOf } from '#shared/api/define'
import { parseLabel, parseTyped, replacementLabel, sidedCode } from '#shared/labels/labels'
import type { ItemKind, ItemState } from '#shared/lifecycle/itemStates'
import { stepBetween, type StepTarget } from '#shared/lifecycle/steps'
import { may, type Permission } from '#shared/permissions'
import type { Side } from '#shared/schemas/common'
import { boots, labels, sites, skiPairs, stateChanges } from '../db/schema/schema'
import { iso } from '../db/queries/lists'
import { openFittingOf } from '../db/queries/items'
import type { Reader } from '../deps'
import { Problem } from '../errors'
import type { PersonActor } from './actor'
import type { Service } from './commands'
import { noteOfficeChange } from './office'
import { changeState, lockItem } from './stateChanges'

type Does<C> = Service<BodyOf<C>, IdsOf<C>, PersonActor>

export type FoundLabel =
  | { ok: true; itemKind: ItemKind; itemId: string; side: Side | null }
  /** `replaced`: a label of ours that another one took the place of; `code` is what it was on. */
  | { ok: false; why: 'check_character' | 'unfinished' | 'not_ours' | 'unknown'; code: null }
  | { ok: false; why: 'replaced'; code: string }

/** Finds the item that a scanned or typed label names: with its check character, or typed without. */
export async function findLabel(db: Reader, shopId: string, text: string): Promise<FoundLabel> {
  const scanned = parseLabel(text)
  const parsed = scanned.ok ? scanned : parseTyped(text)
  if (!parsed.ok) return { ok: false, why: scanned.ok ? 'not_ours' : scanned.reason, code: null }
  const worn = await labelsReading(db, shopId, parsed.text, scanned.ok)
  const now = worn.find(({ until }) => until === null)
  if (now) return { ok: true, itemKind: now.itemKind, itemId: now.itemId, side: now.side }
  const itemKind = parsed.kind === 'ski' ? 'ski_pair' : 'boots'
  const table = itemKind === 'ski_pair' ? skiPairs : boots
  // A scanned text is a label; only what was typed without its check character is the code itself.
  if (scanned.ok && worn[0]) {
    const [was] = await db.select({ code: table.code }).from(table).where(eq(table.id, worn[0].itemId))
    return { ok: false, why: 'replaced', code: sidedCode(was!.code, worn[0].side) }
  }
  const [item] = await db
    .select({ id: table.id })
    .from(table)
    .where(and(eq(table.shopId, shopId), eq(table.code, parsed.code)))
  if (!item) return { ok: false, why: 'unknown', code: null }
  return { ok: true, itemKind, itemId: item.id, side: parsed.side }
}

/** Labels with this text; where it was typed without a check character, those that differ in nothing else. */
function labelsReading(db: Reader, shopId: string, text: string, checked: boolean) {
  const reads = checked ? eq(labels.text, text) : eq(sql`left(${labels.text}, -1)`, text)
  return db
    .select({ itemKind: labels.itemKind, itemId: labels.itemId, side: labels.side, until: labels.until })
    .from(labels)
    .where(and(eq(labels.shopId, shopId), reads))
    .orderBy(desc(labels.since))
}

/** What a label names, where it is and who has it. */
export async function lookUp(
  db: Reader,
  shopId: string,
  text: string,
): Promise<AnswerOf<typeof lookUpLabel>> {
  const found = await findLabel(db, shopId, text)
  if (!found.ok) return { found: false, why: found.why, code: found.code }
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

/** One step of the life cycle that is taken by hand. */
export const moveItemService: Does<typeof moveItem> = async (context, body) => {
  const { itemKind, itemId, to, rackPlace, reason } = body
  const item = await lockItem(context.tx, context.actor.shopId, { kind: itemKind, id: itemId })
  if (item.state === 'quarantine') throw new Problem('items.held', { code: item.code })
  const step = stepBetween(item.state, to)
  if (!step) throw new Problem('items.state', { state: item.state, code: item.code })
  requirePermission(context.actor, step.permission)
  if (step.needsReason && !reason) throw new Problem('items.reason', { code: item.code })
  if (to === 'racked' && !rackPlace && !item.rackPlace)
    throw new Problem('items.rack_place', { code: item.code })
  const changeId = await changeState(context, item, {
    from: item.state,
    to,
    siteId: item.siteId,
    rackPlace: rackPlace || null,
    reason: reason || undefined,
  })
  return { changeId }
}

/** Takes a step back: the item's latest change, in time, by somebody who might take the step. */
export const undoMoveService: Does<typeof undoMove> = async (context, { itemKind, itemId, changeId }) => {
  const item = await lockItem(context.tx, context.actor.shopId, { kind: itemKind, id: itemId })
  const [change] = await context.tx
    .select()
    .from(stateChanges)
    .where(and(eq(stateChanges.id, changeId), eq(stateChanges.itemId, itemId)))
  if (!change) throw new Problem('items.unknown')
  const step = stepBetween(change.fromState as ItemState, change.toState as StepTarget)
  if (!step || change.toState !== item.state)
    throw new Problem('items.state', { state: item.state, code: item.code })
  requirePermission(context.actor, step.permission)
  const undoId = await changeState(context, item, {
    from: item.state,
    to: change.fromState as ItemState,
    siteId: item.siteId,
    reason: 'undo',
    undoesId: change.id,
  })
  return { changeId: undoId }
}

function requirePermission({ roles }: PersonActor, permission: Permission) {
  if (!may(roles, permission)) throw new Problem('session.role', { permission })
}

/**
 * A label was lost or cannot be read: it ends, and one with another text takes its place, so that the lost one, if
 * it turns up elsewhere, names nothing any more.
 */
export const replaceLabelService: Does<typeof replaceLabel> = async (context, { itemKind, itemId, side }) => {
  const { tx, actor } = context
  const item = await lockItem(tx, actor.shopId, { kind: itemKind, id: itemId })
  if (item.state === 'quarantine') throw new Problem('items.held', { code: item.code })
  const ofSide = and(eq(labels.itemId, itemId), eq(labels.side, side))
  const text = replacementLabel(item.code, side, await tx.$count(labels, ofSide))
  if (!text) throw new Problem('labels.taken', { code: item.code })
  await tx
    .update(labels)
    .set({ until: context.occurredAt })
    .where(and(ofSide, isNull(labels.until)))
  const [row] = await tx
    .insert(labels)
    .values({ shopId: actor.shopId, text, itemKind, itemId, side, since: context.occurredAt })
    .returning({ id: labels.id })
  await noteOfficeChange(context, 'labels.replace', itemId, [side])
  return { labelId: row!.id }
}
