import { eq } from 'drizzle-orm'
import { labelFor } from '#shared/labels/labels'
import {
  bindingModels,
  fittingRecordParts,
  fittingRecords,
  fittings,
  handOvers,
  ownBoots,
  rentalItems,
  rentals,
  skis,
} from '../../server/db/schema/schema'
import type { TestShop } from './shop'
import { addStateChange, type TestBoots, type TestPair } from './things'
import type { RentalValues, TestRental } from './rentals'

type Db = TestShop['db']
const sides = ['left', 'right'] as const

export interface TestSet {
  rental: TestRental
  pair: TestPair
  boots: TestBoots | null
  ownBootsId: string | null
  fittingId: string
  recordId: string
}

/**
 * A set as the bench leaves it: its record is signed, written straight into the database. For tests of what
 * happens afterwards; those of bench and hand-over use their commands.
 */
export async function preparedSet(
  shop: TestShop,
  {
    ownSoleLengthMm,
    pair: given,
    boots: givenBoots,
    ...values
  }: RentalValues & { ownSoleLengthMm?: number; pair?: TestPair; boots?: TestBoots | null } = {},
): Promise<TestSet> {
  const { db } = shop
  const pair = given ?? (await shop.rackedPair())
  const rental = await shop.rental({ ...values, ownBoots: ownSoleLengthMm !== undefined })
  const boots = ownSoleLengthMm === undefined ? (givenBoots ?? (await shop.rackedBoots())) : null
  const ownBootsId =
    ownSoleLengthMm === undefined ? null : await readOwnBoots(shop, rental.id, ownSoleLengthMm)
  const { id: fittingId } = await shop.fitting({
    rental,
    pair,
    boots: boots ?? { id: ownBootsId!, own: true },
    soleLengthMm: ownSoleLengthMm,
  })
  const recordId = await db.transaction((tx) =>
    signRecord(tx as unknown as Db, shop, { pair, boots, fittingId }),
  )
  return { rental, pair, boots, ownBootsId, fittingId, recordId }
}

/** A set that is out with its renter. */
export async function setOut(
  shop: TestShop,
  values: Parameters<typeof preparedSet>[1] = {},
): Promise<TestSet> {
  const set = await preparedSet(shop, values)
  await shop.db.transaction((tx) => handOver(tx as unknown as Db, shop, set))
  return set
}

async function readOwnBoots(shop: TestShop, rentalId: string, soleLengthMm: number) {
  const [row] = await shop.db
    .insert(ownBoots)
    .values({
      shopId: shop.id,
      rentalId,
      soleLengthMm,
      soleType: 'ISO 5355 A',
      wear: 'sound',
      judgedBy: shop.people.head_technician.id,
      occurredAt: new Date(),
    })
    .returning({ id: ownBoots.id })
  return row!.id
}

const itemsOf = (set: { pair: TestPair; boots: TestBoots | null }) => [
  { kind: 'ski_pair', id: set.pair.id } as const,
  ...(set.boots ? [{ kind: 'boots', id: set.boots.id } as const] : []),
]

async function signRecord(
  db: Db,
  shop: TestShop,
  set: { pair: TestPair; boots: TestBoots | null; fittingId: string },
) {
  const [fitting] = await db.select().from(fittings).where(eq(fittings.id, set.fittingId))
  const [binding] = await db.select().from(bindingModels).where(eq(bindingModels.id, set.pair.bindingModelId))
  const { track, release, targets } = fitting!
  const [record] = await db
    .insert(fittingRecords)
    .values({
      shopId: shop.id,
      siteId: fitting!.siteId,
      fittingId: set.fittingId,
      number: fitting!.number,
      renterId: fitting!.renterId,
      inputsCommitment: 'tests',
      inputsHash: fitting!.inputsHash,
      edition: fitting!.edition,
      rulesVersion: fitting!.rulesVersion,
      approved: false,
      row: release.row,
      value: fitting!.value,
      sideways: release.sideways,
      twistNm: release.twistNm,
      forwardLeanNm: release.forwardLeanNm,
      rowSteps: release.rowSteps,
      skiPairId: set.pair.id,
      skiPairCode: set.pair.code,
      bindingModelId: set.pair.bindingModelId,
      bindingModelName: binding!.name,
      bindingContentSha256: binding!.contentSha256,
      bootsId: set.boots?.id ?? null,
      bootsCode: set.boots?.code ?? null,
      bootsOwner: set.boots ? 'shop' : 'renter',
      soleLengthMm: fitting!.soleLengthMm,
      soleType: 'ISO 5355 A',
      targetToe: track.toe,
      targetHeel: track.heel,
      targetTurns: track.turns,
      decisionIds: [],
      signedBy: shop.people.technician.id,
      signedAt: new Date(),
    })
    .returning({ id: fittingRecords.id })
  for (const side of sides) {
    const [ski] = await db.select().from(skis).where(eq(skis.id, set.pair.skis[side].id))
    await db.insert(fittingRecordParts).values({
      shopId: shop.id,
      recordId: record!.id,
      skiId: ski!.id,
      side,
      label: labelFor(set.pair.code, side),
      targetToeValue: targets[side].toe,
      targetHeelValue: targets[side].heel,
      reading: {
        toe: track.toe,
        heel: track.heel,
        turns: track.turns,
        toeValue: targets[side].toe,
        heelValue: targets[side].heel,
        soleClearance: true,
        forwardPressure: true,
        brake: true,
        function: true,
      },
      verdict: 'matches',
      presetVersion: ski!.presetVersion,
      readBy: shop.people.technician.id,
      readAt: new Date(),
    })
  }
  await db
    .update(fittings)
    .set({ state: 'prepared', recordId: record!.id, preparedAt: new Date() })
    .where(eq(fittings.id, set.fittingId))
  for (const item of itemsOf(set))
    await addStateChange(db, shop.inShop, item, 'claimed', 'prepared', { subjectId: set.fittingId })
  return record!.id
}

/** The prepared set leaves. */
export async function handOver(db: Db, shop: TestShop, set: TestSet) {
  await db.insert(handOvers).values({
    shopId: shop.id,
    siteId: shop.inShop.siteId,
    fittingId: set.fittingId,
    recordId: set.recordId,
    rentalId: set.rental.id,
    signatureSha256: 'tests',
    signedAs: 'renter',
    textId: set.rental.id,
    textVersion: 1,
    textSha256: 'tests',
    personId: shop.people.counter.id,
    occurredAt: new Date(),
  })
  await db
    .update(fittings)
    .set({ state: 'handed_over', endedAt: new Date() })
    .where(eq(fittings.id, set.fittingId))
  await db.update(rentals).set({ state: 'out' }).where(eq(rentals.id, set.rental.id))
  const row = { shopId: shop.id, rentalId: set.rental.id, fittingId: set.fittingId, outAt: new Date() }
  for (const item of itemsOf(set)) {
    await addStateChange(db, shop.inShop, item, 'prepared', 'out', { subjectId: set.fittingId })
    for (const side of sides)
      await db.insert(rentalItems).values({ ...row, itemKind: item.kind, itemId: item.id, side })
  }
  if (set.ownBootsId)
    await db
      .insert(rentalItems)
      .values({ ...row, itemKind: 'own_boots', itemId: set.ownBootsId, side: 'both' })
}
