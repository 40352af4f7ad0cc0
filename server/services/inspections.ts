import { and, eq, isNull } from 'drizzle-orm'
import type { BodyOf, IdsOf } from '#shared/api/define'
import type { recordInspection } from '#shared/api/inspections'
import { lastRackedSites } from '../db/queries/rackPlaces'
import { inspections, rentalItems } from '../db/schema/schema'
import { Problem } from '../errors'
import type { PersonActor } from './actor'
import type { CommandContext, Service } from './commands'
import { changeState, lockItem } from './stateChanges'

type Body = BodyOf<typeof recordInspection>

const leadsTo = { rack: 'racked', service: 'service', withdraw: 'withdrawn' } as const

/** Clears an unchecked item to its rack place, or sends it to service, or withdraws it. */
export const recordInspectionService: Service<Body, IdsOf<typeof recordInspection>, PersonActor> = async (
  context,
  body,
) => {
  const { tx, actor } = context
  const item = await lockItem(tx, actor.shopId, { kind: body.itemKind, id: body.itemId })
  if (item.state !== 'unchecked') throw new Problem('items.state', { state: item.state, code: item.code })
  const siteId = actor.siteId ?? item.siteId
  requireVerdictFits(body)
  const rackPlace = body.verdict === 'rack' ? await placeFor(context, item, siteId, body) : null
  const [inspection] = await tx
    .insert(inspections)
    .values({
      shopId: actor.shopId,
      itemKind: body.itemKind,
      itemId: body.itemId,
      checks: body.checks,
      verdict: body.verdict,
      note: body.note,
      personId: actor.personId,
      deviceId: actor.deviceId,
      commandId: context.commandId,
      occurredAt: context.occurredAt,
    })
    .returning({ id: inspections.id })
  const changeId = await changeState(context, item, {
    from: 'unchecked',
    to: leadsTo[body.verdict],
    siteId,
    rackPlace,
    reason: body.note || undefined,
    subjectId: inspection!.id,
  })
  return { inspectionId: inspection!.id, changeId }
}

/** A fault that was not put right keeps an item off the rack; an item without one needs a reason to go elsewhere. */
function requireVerdictFits({ checks, verdict, note }: Body) {
  const faults = Object.entries(checks).flatMap(([check, found]) => (found === 'fault' ? [check] : []))
  if (verdict === 'rack' && faults.length > 0) throw new Problem('inspections.fault_left', { faults })
  if (verdict !== 'rack' && faults.length === 0 && !note) throw new Problem('inspections.reason', {})
}

async function placeFor(
  { tx }: CommandContext,
  item: Awaited<ReturnType<typeof lockItem>>,
  siteId: string,
  body: Body,
): Promise<string> {
  const missing = await tx
    .select({ side: rentalItems.side })
    .from(rentalItems)
    .where(and(eq(rentalItems.itemId, item.id), isNull(rentalItems.backAt)))
  if (missing.length > 0)
    throw new Problem('inspections.part_missing', { code: item.code, sides: missing.map(({ side }) => side) })
  const racked = await lastRackedSites(tx, [item.id])
  // A place at another site is none here.
  const place = body.rackPlace || (racked.get(item.id) === siteId ? item.rackPlace : null)
  if (!place) throw new Problem('inspections.rack_place', { code: item.code })
  return place
}
