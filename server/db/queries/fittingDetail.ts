import { and, asc, desc, eq, sql } from 'drizzle-orm'
import { alias } from 'drizzle-orm/pg-core'
import type { getFitting, getFittingWhy } from '#shared/api/fittings'
import type { AnswerOf } from '#shared/api/define'
import { ageOn } from '#shared/dates/days'
import { outcomeOf, outcomeRowsAway, sidewaysOutcome } from '#shared/fitting/decidedValue'
import type { ReleaseInput } from '#shared/release/releaseInput'
import { releaseSetting } from '#shared/release/releaseSetting'
import type { EditionName } from '#shared/release/selectionTable'
import type { ReleaseOutcome } from '#shared/schemas/fittings'
import type { Reader } from '../../deps'
import { Problem } from '../../errors'
import {
  fittingRecords,
  fittings,
  people,
  rentals,
  renters,
  shops,
  sites,
  skiReadings,
  ticketHolds,
} from '../schema/schema'
import { inputsFact } from './fittingFacts'
import { iso } from './lists'
import { bootLabels, decisionFacts, ownBootsFact, shopBootsFact, skiPairFacts } from './fittingParts'

type FittingAnswer = AnswerOf<typeof getFitting>
type Fitting = typeof fittings.$inferSelect

const clerk = alias(people, 'clerk')
const holder = alias(people, 'holder')

async function fittingRow(db: Reader, shopId: string, id: string) {
  const [row] = await db
    .select({
      fitting: fittings,
      site: sites.name,
      rental: rentals,
      renter: renters,
      majority: shops.ageOfMajority,
      clerk: clerk.name,
      holder: holder.name,
      changed: sql<string[]>`changed_since(fittings)`,
    })
    .from(fittings)
    .innerJoin(sites, eq(sites.id, fittings.siteId))
    .innerJoin(rentals, eq(rentals.id, fittings.rentalId))
    .innerJoin(renters, eq(renters.id, fittings.renterId))
    .innerJoin(shops, eq(shops.id, fittings.shopId))
    .innerJoin(clerk, eq(clerk.id, fittings.claimedBy))
    .leftJoin(holder, eq(holder.id, fittings.heldBy))
    .where(and(eq(fittings.id, id), eq(fittings.shopId, shopId)))
  if (!row) throw new Problem('items.unknown')
  return row
}

/** A fitting with everything that counter, bench and hand-over show of it; no body values. */
export async function fittingDetail(db: Reader, shopId: string, id: string): Promise<FittingAnswer> {
  const {
    fitting,
    site,
    rental,
    renter,
    majority,
    clerk: by,
    holder: held,
    changed,
  } = await fittingRow(db, shopId, id)
  const [skiPair] = await skiPairFacts(db, shopId, { id: fitting.skiPairId })
  const boots = await bootsOf(db, shopId, fitting)
  if (!skiPair || !boots) throw new Problem('items.unknown')
  const { toe, heel, turns, centreShiftMm, gapMm } = fitting.track
  return {
    id,
    number: fitting.number,
    state: fitting.state as FittingAnswer['state'],
    site: { id: fitting.siteId, name: site },
    promisedAt: iso(fitting.promisedAt),
    rental: {
      id: rental.id,
      number: rental.number,
      startsOn: rental.startsOn,
      endsOn: rental.endsOn,
      ownBoots: rental.ownBoots,
    },
    renter: {
      id: renter.id,
      firstName: renter.firstName,
      lastName: renter.lastName,
      minor: renter.birthDate ? ageOn(renter.birthDate, rental.startsOn) < majority : null,
      guardianName: renter.guardianName,
      locale: renter.locale,
    },
    skiPair,
    boots,
    soleLengthMm: fitting.soleLengthMm,
    release: fitting.release,
    value: fitting.value,
    track: { toe, heel, turns, centreShiftMm, gapMm },
    targets: fitting.targets,
    edition: fitting.edition,
    rulesVersion: fitting.rulesVersion,
    approved: fitting.approved,
    decisions: await decisionFacts(db, { ids: fitting.decisionIds }),
    claimedBy: { id: fitting.claimedBy, name: by },
    claimedAt: iso(fitting.claimedAt),
    heldBy: fitting.heldBy && held ? { id: fitting.heldBy, name: held } : null,
    heldSince: fitting.heldSince?.toISOString() ?? null,
    holds: await holdsOf(db, id),
    readings: { left: await latestReading(db, id, 'left'), right: await latestReading(db, id, 'right') },
    record: await recordOf(db, fitting.recordId),
    preparedAt: fitting.preparedAt?.toISOString() ?? null,
    endedAt: fitting.endedAt?.toISOString() ?? null,
    endReason: fitting.endReason,
    changed,
  }
}

async function bootsOf(db: Reader, shopId: string, fitting: Fitting): Promise<FittingAnswer['boots'] | null> {
  if (!fitting.bootsId)
    return fitting.ownBootsId ? ownBootsFact(db, shopId, { id: fitting.ownBootsId }) : null
  const fact = await shopBootsFact(db, shopId, fitting.bootsId)
  return fact ? { ...fact, labels: await bootLabels(db, fact.id) } : null
}

const before = alias(people, 'before')

async function holdsOf(db: Reader, fittingId: string): Promise<FittingAnswer['holds']> {
  const rows = await db
    .select({ by: people.name, from: before.name, at: ticketHolds.occurredAt })
    .from(ticketHolds)
    .innerJoin(people, eq(people.id, ticketHolds.personId))
    .leftJoin(before, eq(before.id, ticketHolds.tookOverFrom))
    .where(eq(ticketHolds.fittingId, fittingId))
    .orderBy(asc(ticketHolds.recordedAt), asc(ticketHolds.id))
  return rows.map((row) => ({ ...row, at: iso(row.at) }))
}

async function latestReading(
  db: Reader,
  fittingId: string,
  side: 'left' | 'right',
): Promise<FittingAnswer['readings']['left']> {
  const [row] = await db
    .select({ reading: skiReadings, by: people.name })
    .from(skiReadings)
    .innerJoin(people, eq(people.id, skiReadings.personId))
    .where(and(eq(skiReadings.fittingId, fittingId), eq(skiReadings.side, side)))
    .orderBy(desc(skiReadings.recordedAt), desc(skiReadings.id))
    .limit(1)
  if (!row) return null
  const { id, skiId, reading, verdict, decisionId, presetVersion, personId, occurredAt } = row.reading
  return {
    id,
    skiId,
    reading,
    verdict,
    decisionId,
    presetVersion,
    by: { id: personId, name: row.by },
    at: iso(occurredAt),
  }
}

async function recordOf(db: Reader, recordId: string | null): Promise<FittingAnswer['record']> {
  if (!recordId) return null
  const [row] = await db
    .select({
      id: fittingRecords.id,
      personId: fittingRecords.signedBy,
      name: people.name,
      signedAt: fittingRecords.signedAt,
    })
    .from(fittingRecords)
    .innerJoin(people, eq(people.id, fittingRecords.signedBy))
    .where(eq(fittingRecords.id, recordId))
  return row
    ? { id: row.id, signedBy: { id: row.personId, name: row.name }, signedAt: iso(row.signedAt) }
    : null
}

/** The values behind a fitting, and whether computing it again gives what was stored. */
export async function fittingWhy(
  db: Reader,
  shopId: string,
  id: string,
): Promise<AnswerOf<typeof getFittingWhy>> {
  const { fitting } = await fittingRow(db, shopId, id)
  const inputs = fitting.inputsId ? await inputsFact(db, fitting.inputsId) : null
  const decisions = await decisionFacts(db, { ids: fitting.decisionIds })
  const decidedRows = decisions.find(({ kind }) => kind === 'value_override')?.rows ?? null
  const sidewaysDecided = decisions.some(({ kind }) => kind === 'sideways_value')
  const { rulesVersion } = fitting
  if (!inputs) return { input: null, decidedRows, sidewaysDecided, rulesVersion, same: null }
  const { mass, height, age, skierType, request } = inputs
  const input: ReleaseInput = {
    mass,
    height,
    age,
    skierType,
    soleLengthMm: fitting.soleLengthMm,
    edition: fitting.edition as EditionName,
    // A decided value counts from the row without any request.
    request: decidedRows === null ? request : 0,
  }
  const again = recomputed(input, decidedRows, sidewaysDecided)
  return { input, decidedRows, sidewaysDecided, rulesVersion, same: sameOutcome(again, fitting.release) }
}

function recomputed(input: ReleaseInput, rows: number | null, sideways: boolean): ReleaseOutcome | null {
  const result = releaseSetting(input)
  if (!result.ok) return sideways ? sidewaysOutcome(result) : null
  return rows === null ? outcomeOf(result) : outcomeRowsAway(result, rows)
}

function sameOutcome(a: ReleaseOutcome | null, b: ReleaseOutcome): boolean {
  const canonical = ({ row, value, sideways, twistNm, forwardLeanNm, rowSteps }: ReleaseOutcome) =>
    JSON.stringify([row, value, sideways, twistNm, forwardLeanNm, rowSteps.map((s) => [s.rule, s.rows])])
  return a !== null && canonical(a) === canonical(b)
}
