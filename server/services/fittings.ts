import { eq, sql } from 'drizzle-orm'
import type { claimFitting, decideFitting, giveBackFitting } from '#shared/api/fittings'
import type { BodyOf, IdsOf } from '#shared/api/define'
import { computeFitting, type FittingComputation } from '#shared/fitting/computeFitting'
import type { Stop } from '#shared/fitting/stops'
import { valueOptions } from '#shared/fitting/valueOptions'
import { RULES_VERSION } from '#shared/release/rules'
import type { FittingFacts } from '#shared/schemas/fittingFacts'
import { fittingFactsOf, openFittingOf } from '../db/queries/fittingFacts'
import { holderOf } from '../db/queries/fittingParts'
import {
  bindingModels,
  fittingDecisions,
  fittings,
  shopSequences,
  skiModels,
  skiPairs,
} from '../db/schema/schema'
import type { Tx } from '../deps'
import { Problem } from '../errors'
import type { PersonActor } from './actor'
import type { CommandContext, Service } from './commands'
import { endFitting, itemsOf, lockFitting } from './doubt'
import { provenSecond } from './secondName'
import { lockRental } from './renters'
import { changeState, lockItems, type ItemRef } from './stateChanges'

type Does<C> = Service<BodyOf<C>, IdsOf<C>, PersonActor>
type Locked = Awaited<ReturnType<typeof lockItems>>

/**
 * Takes boots and a ski pair for a renter: computed again from the items' own rows, stored without body values.
 * Locks rental and renter, the fitting that it replaces, the items in id order, then their models, so that nothing
 * that it computes with changes meanwhile; of two clerks the second is told who has the item and since when.
 */
export const claimFittingService: Does<typeof claimFitting> = async (context, body) => {
  const { tx, actor } = context
  await lockRental(context, body.rentalId)
  const replaced = await replacedFitting(context, body)
  const items: ItemRef[] = [
    { kind: 'ski_pair', id: body.skiPairId },
    ...(body.bootsId ? [{ kind: 'boots', id: body.bootsId } as const] : []),
  ]
  const locked = await lockItems(
    tx,
    actor.shopId,
    distinct([...items, ...(replaced ? itemsOf(replaced) : [])]),
  )
  await refuseTaken(context, locked, items, replaced?.id)
  await keepModelsOf(context, body.skiPairId)

  const { facts, rental, renter } = await fittingFactsOf(tx, actor.shopId, {
    rentalId: body.rentalId,
    skiPairId: body.skiPairId,
    boots: body.bootsId ? { id: body.bootsId } : 'own',
  })
  const computed = readyFitting(facts)
  if (replaced) await endFitting(context, replaced, { state: 'void', reason: 'refitted' })
  const fittingId = await insertFitting(context, facts, computed, {
    siteId: rental.siteId,
    renterId: renter.id,
    promisedAt: rental.promisedAt,
  })
  for (const item of await lockItems(tx, actor.shopId, items)) {
    const { siteId } = item
    await changeState(context, item, { from: 'racked', to: 'claimed', siteId, subjectId: fittingId })
  }
  context.touchFitting(fittingId)
  context.touchRental(rental.id)
  return { fittingId }
}

/** The rental's open fitting, locked. One that the caller did not name is refused: somebody else was here. */
async function replacedFitting(context: CommandContext, body: BodyOf<typeof claimFitting>) {
  const open = await openFittingOf(context.tx, body.rentalId)
  if (!open) {
    if (body.replacesFittingId) throw new Problem('fittings.not_open', { state: 'ended' })
    return null
  }
  if (open.id !== body.replacesFittingId) {
    throw new Problem('fittings.open', { number: open.number, by: open.by, since: open.since })
  }
  return lockFitting(context, open.id)
}

const distinct = (items: ItemRef[]) => [...new Map(items.map((item) => [item.id, item])).values()]

/** An item that another open fitting has: by whom and since when. */
async function refuseTaken(
  { tx, actor }: CommandContext,
  locked: Locked,
  wanted: ItemRef[],
  replacedId: string | undefined,
) {
  for (const item of locked) {
    const taken = item.state === 'claimed' || item.state === 'prepared'
    if (!taken || !wanted.some(({ id }) => id === item.id)) continue
    const holder = await holderOf(tx, actor.shopId, item.id)
    if (!holder || holder.fittingId === replacedId) continue
    const { by, since, number } = holder
    throw new Problem('items.taken', { code: item.code, by, since, number })
  }
}

/** What the pair's models say stays as it is read here until the claim is done: an edit waits, or was first. */
async function keepModelsOf({ tx }: CommandContext, skiPairId: string) {
  await tx
    .select({ id: skiPairs.id })
    .from(skiPairs)
    .innerJoin(skiModels, eq(skiModels.id, skiPairs.skiModelId))
    .innerJoin(bindingModels, eq(bindingModels.id, skiPairs.bindingModelId))
    .where(eq(skiPairs.id, skiPairId))
    .for('share', { of: [skiModels, bindingModels] })
}

type ReadyFitting = FittingComputation & {
  outcome: NonNullable<FittingComputation['outcome']>
  targets: NonNullable<FittingComputation['targets']>
  plan: Extract<FittingComputation['plan'], { ok: true }>
}

/** The computed fitting, or why it stops and who can decide. */
function readyFitting(facts: FittingFacts): ReadyFitting {
  const computed = computeFitting(facts)
  if (computed.missing.length > 0) throw new Problem('fittings.stop', { reasons: computed.missing })
  const { stops, outcome, targets, plan } = computed
  if (stops.length > 0) throw stopProblem(stops)
  if (!computed.ready || !outcome || !targets || !plan?.ok) {
    throw new Problem('fittings.stop', { reasons: ['inputs_unreadable'] })
  }
  return { ...computed, outcome, targets, plan }
}

/** Reasons only: a refusal is kept for a week and holds no body value. */
function stopProblem(stops: Stop[]): Problem {
  const reasons = stops.map((stop) => stop.reason)
  const decides = [...new Set(stops.map((stop) => stop.decides))]
  const code = decides.includes('nobody') ? 'fittings.stop' : 'fittings.needs_decision'
  return new Problem(code, { reasons, decides })
}

async function insertFitting(
  { tx, actor, occurredAt }: CommandContext<PersonActor>,
  { inputs, boots, skiPair, rental, edition, approved }: FittingFacts,
  { outcome, targets, plan, decisions }: ReadyFitting,
  { siteId, renterId, promisedAt }: { siteId: string; renterId: string; promisedAt: Date },
): Promise<string> {
  const { toe, heel, centreShiftMm, gapMm, turns } = plan
  const [row] = await tx
    .insert(fittings)
    .values({
      shopId: actor.shopId,
      siteId,
      number: await nextFittingNumber(tx, actor.shopId),
      rentalId: rental.id,
      renterId,
      inputsId: inputs!.id,
      skiPairId: skiPair!.id,
      bootsId: boots!.kind === 'shop' ? boots!.id : null,
      ownBootsId: boots!.kind === 'own' ? boots!.id : null,
      soleLengthMm: boots!.soleLengthMm,
      release: outcome,
      value: outcome.value,
      track: { ok: true, toe, heel, centreShiftMm, gapMm, turns, moves: null },
      targets,
      edition,
      rulesVersion: RULES_VERSION,
      approved,
      decisionIds: decisions.map((decision) => decision.id),
      promisedAt,
      claimedBy: actor.personId,
      claimedDeviceId: actor.deviceId,
      claimedAt: occurredAt,
    })
    .returning({ id: fittings.id })
  return row!.id
}

/** Taken after the items were locked: it holds the shop's counter until the command ends. */
async function nextFittingNumber(tx: Tx, shopId: string): Promise<number> {
  const [row] = await tx
    .update(shopSequences)
    .set({ lastFittingNumber: sql`${shopSequences.lastFittingNumber} + 1` })
    .where(eq(shopSequences.shopId, shopId))
    .returning({ number: shopSequences.lastFittingNumber })
  return row!.number
}

/** Boots and pair go back to their places; a preset stays as it was last read. */
export const giveBackFittingService: Does<typeof giveBackFitting> = async (
  context,
  { fittingId, reason },
) => {
  const fitting = await lockFitting(context, fittingId)
  await endFitting(context, fitting, { state: 'given_back', reason })
  return { fittingId }
}

/**
 * A head technician decides what the program does not. Only what stands open can be decided, and a value only
 * within its borders; what nobody decides is refused.
 */
export const decideFittingService: Does<typeof decideFitting> = async (context, body) => {
  const { tx, actor } = context
  await lockRental(context, body.rentalId)
  const { facts } = await fittingFactsOf(tx, actor.shopId, {
    rentalId: body.rentalId,
    skiPairId: body.skiPairId,
    boots: body.bootsId ? { id: body.bootsId } : 'own',
  })
  if (!facts.boots) throw new Problem('fittings.stop', { reasons: ['boots'] })
  const decided = await decidedValue(context, facts, body)
  const [row] = await tx
    .insert(fittingDecisions)
    .values({
      shopId: actor.shopId,
      rentalId: body.rentalId,
      skiPairId: body.skiPairId,
      bootsId: facts.boots.kind === 'shop' ? facts.boots.id : null,
      ownBootsId: facts.boots.kind === 'own' ? facts.boots.id : null,
      kind: body.kind,
      reason: body.reason,
      ...decided,
      personId: actor.personId,
      deviceId: actor.deviceId,
      occurredAt: context.occurredAt,
    })
    .returning({ id: fittingDecisions.id })
  context.touchRental(body.rentalId)
  return { decisionId: row!.id }
}

type DecidedColumns = Partial<Pick<typeof fittingDecisions.$inferInsert, 'rows' | 'value' | 'secondPersonId'>>

async function decidedValue(
  context: CommandContext<PersonActor>,
  facts: FittingFacts,
  body: BodyOf<typeof decideFitting>,
): Promise<DecidedColumns> {
  if (body.kind !== 'value_override') {
    const open = computeFitting(facts).stops.find((stop) => stop.kind === body.kind)
    if (!open) throw new Problem('fittings.nothing_to_decide', { kind: body.kind })
    return body.kind === 'sideways_value' ? { value: Number(open.params.value) } : {}
  }
  if (body.rows === undefined) throw new Problem('request.malformed')
  if (body.rows === 0) return { rows: 0 }
  const option = valueOptions(facts).find((each) => each.rows === body.rows)
  if (!option || option.refused || option.value === null) {
    throw new Problem('fittings.value_not_decidable', { why: option?.refused ?? 'no_value' })
  }
  const secondPersonId = option.secondName ? await provenSecond(context, body.secondPersonId) : undefined
  return { rows: body.rows, value: option.value, secondPersonId }
}
