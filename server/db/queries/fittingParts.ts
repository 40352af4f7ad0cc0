import { and, asc, desc, eq, inArray, isNull, or, sql } from 'drizzle-orm'
import { alias } from 'drizzle-orm/pg-core'
import { may, type Role } from '#shared/permissions'
import type { Side } from '#shared/schemas/common'
import type {
  BootsFact,
  DecisionFact,
  DecisionKind,
  HolderFact,
  SkiFact,
  SkiPairFact,
} from '#shared/schemas/fittingFacts'
import { openFittingStates } from '#shared/lifecycle/fittingStates'
import type { Reader } from '../../deps'
import {
  bindingModels,
  boots,
  fittingDecisions,
  fittings,
  labels,
  memberships,
  ownBoots,
  people,
  skiModels,
  skiPairs,
  skis,
} from '../schema/schema'

/** The parts that a fitting is computed from, each read from its own row. Another shop's are not found. */

const approved = sql<boolean>`binding_model_approved(${bindingModels.id})`

const pairColumns = {
  id: skiPairs.id,
  code: skiPairs.code,
  state: skiPairs.state,
  siteId: skiPairs.siteId,
  rackPlace: skiPairs.rackPlace,
  lengthCm: skiPairs.lengthCm,
  model: skiModels.name,
  waistMm: skiModels.waistMm,
  offsetMm: skiModels.offsetMm,
  binding: {
    id: bindingModels.id,
    name: bindingModels.name,
    track: bindingModels.track,
    accepts: bindingModels.accepts,
    refuses: bindingModels.refuses,
    brakeMm: bindingModels.brakeMm,
    approved,
    blockedReason: sql<string | null>`case when ${bindingModels.blockedAt} is null then null
      else coalesce(${bindingModels.blockedReason}, '') end`,
    manualDocument: bindingModels.manualDocument,
    manualEdition: bindingModels.manualEdition,
    manualPage: bindingModels.manualPage,
    windowNote: bindingModels.windowNote,
    hasWindowPicture: sql<boolean>`${bindingModels.windowPicture} is not null`,
  },
}

/** Ski pairs of the shop: one by id, or all that stand in the racks. */
export async function skiPairFacts(
  db: Reader,
  shopId: string,
  which: { id: string } | 'racked',
): Promise<SkiPairFact[]> {
  const rows = await db
    .select(pairColumns)
    .from(skiPairs)
    .innerJoin(skiModels, eq(skiModels.id, skiPairs.skiModelId))
    .innerJoin(bindingModels, eq(bindingModels.id, skiPairs.bindingModelId))
    .where(
      and(
        eq(skiPairs.shopId, shopId),
        which === 'racked' ? eq(skiPairs.state, 'racked') : eq(skiPairs.id, which.id),
      ),
    )
  const bySide = await skiFacts(
    db,
    rows.map((row) => row.id),
  )
  return rows.flatMap((row) => {
    const [left, right] = [bySide.get(`${row.id} left`), bySide.get(`${row.id} right`)]
    if (!left || !right) return []
    return [{ ...row, state: row.state as SkiPairFact['state'], skis: { left, right } }]
  })
}

async function skiFacts(db: Reader, pairIds: string[]): Promise<Map<string, SkiFact>> {
  if (pairIds.length === 0) return new Map()
  const rows = await db
    .select({ ski: skis, label: labels.text })
    .from(skis)
    .leftJoin(
      labels,
      and(eq(labels.itemId, skis.skiPairId), eq(labels.side, skis.side), isNull(labels.until)),
    )
    .where(inArray(skis.skiPairId, pairIds))
  return new Map(
    rows.map(({ ski, label }) => [
      `${ski.skiPairId} ${ski.side}`,
      {
        id: ski.id,
        label,
        preset:
          ski.presetToe === null || ski.presetHeel === null
            ? null
            : { toe: ski.presetToe, heel: ski.presetHeel, turns: ski.presetTurns },
        presetReadAt: ski.presetReadAt?.toISOString() ?? null,
        presetVersion: ski.presetVersion,
        toeCorrection: ski.toeCorrection,
        heelCorrection: ski.heelCorrection,
      },
    ]),
  )
}

export async function shopBootsFact(db: Reader, shopId: string, id: string) {
  const [row] = await db
    .select()
    .from(boots)
    .where(and(eq(boots.id, id), eq(boots.shopId, shopId)))
  return row ? bootsFactOf(row) : null
}

export function bootsFactOf(row: typeof boots.$inferSelect): Extract<BootsFact, { kind: 'shop' }> {
  const { id, code, model, siteId, rackPlace, soleLengthMm, mondo } = row
  type Fact = Extract<BootsFact, { kind: 'shop' }>
  return {
    kind: 'shop',
    id,
    code,
    model,
    state: row.state as Fact['state'],
    siteId,
    rackPlace,
    soleLengthMm,
    soleType: row.soleType as Fact['soleType'],
    mondo,
  }
}

const judge = alias(people, 'judge')
const second = alias(people, 'second')

/** The renter's own boots: one reading by id, or the latest of a rental. */
export async function ownBootsFact(
  db: Reader,
  shopId: string,
  which: { id: string } | { rentalId: string },
): Promise<Extract<BootsFact, { kind: 'own' }> | null> {
  const [row] = await db
    .select({
      own: ownBoots,
      judgedBy: judge.name,
      judgeRoles: memberships.roles,
      secondLookBy: second.name,
    })
    .from(ownBoots)
    .innerJoin(judge, eq(judge.id, ownBoots.judgedBy))
    .leftJoin(
      memberships,
      and(eq(memberships.personId, ownBoots.judgedBy), eq(memberships.shopId, ownBoots.shopId)),
    )
    .leftJoin(second, eq(second.id, ownBoots.secondLookBy))
    .where(
      and(
        eq(ownBoots.shopId, shopId),
        'id' in which ? eq(ownBoots.id, which.id) : eq(ownBoots.rentalId, which.rentalId),
      ),
    )
    // The same order as the database's own: the latest counts.
    .orderBy(desc(ownBoots.recordedAt), desc(ownBoots.id))
    .limit(1)
  if (!row) return null
  const { id, description, soleLengthMm, soleType, wear, judgedBy } = row.own
  return {
    kind: 'own',
    id,
    description,
    soleLengthMm,
    soleType: soleType as BootsFact['soleType'],
    wear,
    judgedBy: row.judgedBy,
    judgedById: judgedBy,
    judgedByHead: may((row.judgeRoles ?? []) as Role[], 'fittings.decide'),
    secondLookBy: row.secondLookBy,
  }
}

const decider = alias(people, 'decider')
const coDecider = alias(people, 'co_decider')

/** Decisions of a rental, oldest first; of the kinds given, or all. */
export async function decisionFacts(
  db: Reader,
  where: { rentalId: string } | { ids: string[] },
): Promise<(Omit<DecisionFact, 'kind'> & { kind: string })[]> {
  if ('ids' in where && where.ids.length === 0) return []
  const rows = await db
    .select({ decision: fittingDecisions, by: decider.name, secondBy: coDecider.name })
    .from(fittingDecisions)
    .innerJoin(decider, eq(decider.id, fittingDecisions.personId))
    .leftJoin(coDecider, eq(coDecider.id, fittingDecisions.secondPersonId))
    .where(
      'ids' in where
        ? inArray(fittingDecisions.id, where.ids)
        : eq(fittingDecisions.rentalId, where.rentalId),
    )
    .orderBy(asc(fittingDecisions.recordedAt), asc(fittingDecisions.id))
  return rows.map(({ decision, by, secondBy }) => ({
    id: decision.id,
    kind: decision.kind as DecisionKind,
    skiPairId: decision.skiPairId,
    bootsId: decision.bootsId ?? decision.ownBootsId,
    rows: decision.rows,
    value: decision.value,
    reason: decision.reason,
    by,
    secondBy,
    at: decision.recordedAt.toISOString(),
  }))
}

/** Who has an item in an open fitting, since when; null when nobody has. */
export async function holderOf(db: Reader, shopId: string, itemId: string): Promise<HolderFact | null> {
  const [row] = await db
    .select({
      fittingId: fittings.id,
      number: fittings.number,
      rentalId: fittings.rentalId,
      by: people.name,
      since: fittings.claimedAt,
    })
    .from(fittings)
    .innerJoin(people, eq(people.id, fittings.claimedBy))
    .where(
      and(
        eq(fittings.shopId, shopId),
        inArray(fittings.state, [...openFittingStates]),
        or(eq(fittings.skiPairId, itemId), eq(fittings.bootsId, itemId)),
      ),
    )
  return row ? { ...row, since: row.since.toISOString() } : null
}

/** The labels of a pair of boots by side. */
export async function bootLabels(db: Reader, bootsId: string): Promise<Record<Side, string | null>> {
  const rows = await db
    .select({ side: labels.side, text: labels.text })
    .from(labels)
    .where(and(eq(labels.itemId, bootsId), isNull(labels.until)))
  const of = (side: Side) => rows.find((row) => row.side === side)?.text ?? null
  return { left: of('left'), right: of('right') }
}
