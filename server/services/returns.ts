import { and, desc, eq, inArray, isNull } from 'drizzle-orm'
import type { BodyOf, IdsOf } from '#shared/api/define'
import type { returnOwnBoots, scanReturn } from '#shared/api/returns'
import type { ItemKind } from '#shared/lifecycle/itemStates'
import type { Side } from '#shared/schemas/common'
import { openFittingStates } from '#shared/lifecycle/fittingStates'
import { fittings, rentalItems, rentals, returns, stateChanges } from '../db/schema/schema'
import { Problem } from '../errors'
import { deviceIdOf, personIdOf, type PersonActor } from './actor'
import type { CommandContext, Service } from './commands'
import { openCallBack } from './doubt'
import { findLabel } from './items'
import { changeState, lockItem } from './stateChanges'

type Does<C> = Service<BodyOf<C>, IdsOf<C>, PersonActor>
type LockedItem = Awaited<ReturnType<typeof lockItem>>
type HandSide = Side | 'both'

/**
 * A ski or boot came back. It is never refused when it is one of ours: what was out becomes unchecked, what was
 * lost is found, what is held stays held, and anything else is written down and left as it is. Scanned again
 * without having been out in between, it answers what the first scan made.
 */
export const scanReturnService: Does<typeof scanReturn> = async (context, body) => {
  const { itemKind, itemId, side } = await whatCameBack(context, body)
  const item = await lockItem(context.tx, context.actor.shopId, { kind: itemKind, id: itemId })
  const sides = side === 'both' ? (['left', 'right'] as const) : [side]
  const earlier = await sinceItWentOut(context, item)
  const taken = []
  for (const each of sides) taken.push(await takeBack(context, item, each, earlier))
  const rentalId = taken.find((one) => one.rentalId)?.rentalId ?? null
  const state = await becomesUnchecked(context, item)
  if (rentalId) await settleRental(context, rentalId)
  return {
    itemKind,
    itemId,
    returnIds: taken.map((one) => one.returnId),
    rentalId,
    already: taken.every((one) => one.already),
    stateBefore: item.state,
    state,
  }
}

async function whatCameBack(
  { tx, actor }: CommandContext,
  body: BodyOf<typeof scanReturn>,
): Promise<{ itemKind: ItemKind; itemId: string; side: HandSide }> {
  if ('itemId' in body) return body
  const found = await findLabel(tx, actor.shopId, body.text)
  if (!found.ok) throw new Problem('labels.unknown', { text: body.text, why: found.why })
  const side = found.side ?? body.side
  if (!side) throw new Problem('returns.side', { text: body.text })
  return { itemKind: found.itemKind, itemId: found.itemId, side }
}

/** Returns of this item's sides since it last went out: the newest of each side. */
async function sinceItWentOut({ tx }: CommandContext, item: LockedItem) {
  const [wentOut] = await tx
    .select({ recordedAt: stateChanges.recordedAt })
    .from(stateChanges)
    .where(and(eq(stateChanges.itemId, item.id), eq(stateChanges.toState, 'out')))
    .orderBy(desc(stateChanges.itemSeq))
    .limit(1)
  if (!wentOut) return []
  const rows = await tx
    .select({
      id: returns.id,
      side: returns.side,
      rentalId: returns.rentalId,
      recordedAt: returns.recordedAt,
    })
    .from(returns)
    .where(eq(returns.itemId, item.id))
    .orderBy(desc(returns.recordedAt))
  return rows.filter((row) => row.rentalId && row.recordedAt >= wentOut.recordedAt)
}

/** Writes down that this side is back, unless it is known already, and ends its row of the rental. */
async function takeBack(
  context: CommandContext,
  item: LockedItem,
  side: Side,
  earlier: Awaited<ReturnType<typeof sinceItWentOut>>,
) {
  const { tx } = context
  const [out] = await tx
    .select({ id: rentalItems.id, rentalId: rentalItems.rentalId })
    .from(rentalItems)
    .where(and(eq(rentalItems.itemId, item.id), eq(rentalItems.side, side), isNull(rentalItems.backAt)))
  const known = earlier.find((row) => row.side === side || row.side === 'both')
  const waitsHere = item.state === 'unchecked' || item.state === 'quarantine'
  if (!out && known && waitsHere) return { returnId: known.id, rentalId: known.rentalId, already: true }
  const returnId = await writeReturn(context, {
    siteId: placeOf(context, item.siteId),
    itemKind: item.kind,
    itemId: item.id,
    side,
    rentalId: out?.rentalId ?? null,
    stateBefore: item.state,
  })
  if (out) await endOut(context, [out.id], returnId)
  return { returnId, rentalId: out?.rentalId ?? null, already: false }
}

/** The returns desk's own site, or where the thing was thought to be when no device says it. */
const placeOf = (context: CommandContext, otherwise: string) => context.actor.siteId ?? otherwise

async function writeReturn(
  context: CommandContext,
  fact: Pick<
    typeof returns.$inferInsert,
    'siteId' | 'itemKind' | 'itemId' | 'side' | 'rentalId' | 'stateBefore' | 'soleLengthReadMm'
  >,
) {
  const [row] = await context.tx
    .insert(returns)
    .values({
      ...fact,
      shopId: context.actor.shopId,
      personId: personIdOf(context.actor),
      deviceId: deviceIdOf(context.actor),
      commandId: context.commandId,
      occurredAt: context.occurredAt,
    })
    .returning({ id: returns.id })
  return row!.id
}

async function endOut(context: CommandContext, rentalItemIds: string[], returnId: string) {
  await context.tx
    .update(rentalItems)
    .set({ backAt: context.occurredAt, returnId })
    .where(inArray(rentalItems.id, rentalItemIds))
}

/** The first side that comes back makes the item unchecked; the second finds it so. */
async function becomesUnchecked(context: CommandContext, item: LockedItem) {
  context.touchItem(item.kind, item.id)
  if (item.state !== 'out' && item.state !== 'lost') return item.state
  await changeState(context, item, {
    from: item.state,
    to: 'unchecked',
    siteId: placeOf(context, item.siteId),
    reason: item.state === 'lost' ? 'found' : 'returned',
  })
  return 'unchecked' as const
}

/**
 * A rental of which nothing is out any more is returned; with a fitting still open it is back at the desk. The row
 * is locked before counting, so that the last two things scanned at once do not both see the other missing.
 */
async function settleRental(context: CommandContext, rentalId: string) {
  const { tx } = context
  context.touchRental(rentalId)
  const [rental] = await tx
    .select({ state: rentals.state })
    .from(rentals)
    .where(eq(rentals.id, rentalId))
    .for('update')
  if (rental?.state !== 'out') return
  const stillOut = await tx.$count(
    rentalItems,
    and(eq(rentalItems.rentalId, rentalId), isNull(rentalItems.backAt)),
  )
  if (stillOut > 0) return
  const openFittings = await tx.$count(
    fittings,
    and(eq(fittings.rentalId, rentalId), inArray(fittings.state, [...openFittingStates])),
  )
  await tx
    .update(rentals)
    .set({ state: openFittings > 0 ? 'open' : 'returned' })
    .where(eq(rentals.id, rentalId))
}

/**
 * The renter's own boots were read at return. Another length than the skis were set for is kept; when something of
 * the set is still out it is a call-back, for the renter skis on boots that nobody set.
 */
export const returnOwnBootsService: Does<typeof returnOwnBoots> = async (context, body) => {
  const { tx, actor } = context
  const [rental] = await tx
    .select({ siteId: rentals.siteId })
    .from(rentals)
    .where(and(eq(rentals.id, body.rentalId), eq(rentals.shopId, actor.shopId)))
    .for('update')
  const boots = rental ? await ownBootsOf(context, body.rentalId) : []
  const latest = boots[0]
  if (!rental || !latest) throw new Problem('returns.nothing_out', {})
  const differs = latest.fittedMm !== body.soleLengthMm
  const open = boots.filter((row) => row.backAt === null)
  const known = open.length === 0 ? await readingOf(context, latest.itemId) : null
  if (known?.soleLengthReadMm === body.soleLengthMm)
    return { returnId: known.id, already: true, differs, callBackId: null }
  const returnId = await writeReturn(context, {
    siteId: placeOf(context, rental.siteId),
    itemKind: 'own_boots',
    itemId: latest.itemId,
    side: 'both',
    rentalId: body.rentalId,
    stateBefore: null,
    soleLengthReadMm: body.soleLengthMm,
  })
  if (open.length > 0)
    await endOut(
      context,
      open.map((row) => row.id),
      returnId,
    )
  await settleRental(context, body.rentalId)
  const callBackId = differs ? await doubtOwnBoots(context, latest, body.soleLengthMm) : null
  return { returnId, already: false, differs, callBackId }
}

/** Own boots of a rental with the fitting they were measured for, the latest hand-over first. */
function ownBootsOf({ tx }: CommandContext, rentalId: string) {
  return tx
    .select({
      id: rentalItems.id,
      itemId: rentalItems.itemId,
      backAt: rentalItems.backAt,
      rentalId: rentalItems.rentalId,
      fittingId: fittings.id,
      recordId: fittings.recordId,
      fittedMm: fittings.soleLengthMm,
    })
    .from(rentalItems)
    .innerJoin(fittings, eq(fittings.id, rentalItems.fittingId))
    .where(and(eq(rentalItems.rentalId, rentalId), eq(rentalItems.itemKind, 'own_boots')))
    .orderBy(desc(rentalItems.outAt), desc(rentalItems.id))
}

async function readingOf({ tx }: CommandContext, ownBootsId: string) {
  const [row] = await tx
    .select({ id: returns.id, soleLengthReadMm: returns.soleLengthReadMm })
    .from(returns)
    .where(and(eq(returns.itemId, ownBootsId), eq(returns.itemKind, 'own_boots')))
    .orderBy(desc(returns.recordedAt), desc(returns.id))
    .limit(1)
  return row ?? null
}

async function doubtOwnBoots(
  context: CommandContext,
  boots: Awaited<ReturnType<typeof ownBootsOf>>[number],
  readMm: number,
): Promise<string | null> {
  const stillOut = await context.tx.$count(
    rentalItems,
    and(eq(rentalItems.fittingId, boots.fittingId), isNull(rentalItems.backAt)),
  )
  if (stillOut === 0) return null
  const fitting = { id: boots.fittingId, rentalId: boots.rentalId, recordId: boots.recordId }
  return openCallBack(context, fitting, 'own_boots_differ', `${boots.fittedMm} / ${readMm} mm`)
}
