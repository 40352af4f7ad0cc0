import { and, desc, eq, inArray } from 'drizzle-orm'
import { alias } from 'drizzle-orm/pg-core'
import {
  decisionKinds,
  type DecisionFact,
  type FittingFacts,
  type FittingInputsFact,
} from '#shared/schemas/fittingFacts'
import { openFittingStates } from '#shared/lifecycle/fittingStates'
import type { Reader } from '../../deps'
import { Problem } from '../../errors'
import { fittingInputs, fittings, people, rentals, renters, shops } from '../schema/schema'
import { decisionFacts, holderOf, ownBootsFact, shopBootsFact, skiPairFacts } from './fittingParts'
import { shopEdition, tableApproval } from './tableApproval'

export interface FittingParts {
  rentalId: string
  skiPairId: string | null
  /** `own`: the renter's own boots as last read; null: not chosen yet. */
  boots: { id: string } | 'own' | null
}

const isFittingDecision = (decision: { kind: string }): decision is DecisionFact =>
  (decisionKinds as readonly string[]).includes(decision.kind)

/**
 * Everything that a fitting of these parts is computed from, and the renter's row. Read after the locks of a
 * command, or without any for a screen. `items.unknown` for what is not this shop's.
 */
export async function fittingFactsOf(db: Reader, shopId: string, parts: FittingParts) {
  const [found] = await db
    .select({ rental: rentals, renter: renters, shop: shops })
    .from(rentals)
    .innerJoin(renters, eq(renters.id, rentals.renterId))
    .innerJoin(shops, eq(shops.id, rentals.shopId))
    .where(and(eq(rentals.id, parts.rentalId), eq(rentals.shopId, shopId)))
  if (!found) throw new Problem('items.unknown')
  const { rental, renter, shop } = found
  const [skiPair] = parts.skiPairId ? await skiPairFacts(db, shopId, { id: parts.skiPairId }) : []
  if (parts.skiPairId && !skiPair) throw new Problem('items.unknown')
  const boots = await bootsOf(db, shopId, parts)
  const facts: FittingFacts = {
    rental: {
      id: rental.id,
      number: rental.number,
      state: rental.state as FittingFacts['rental']['state'],
      siteId: rental.siteId,
      startsOn: rental.startsOn,
      endsOn: rental.endsOn,
      ownBoots: rental.ownBoots,
    },
    inputs: renter.currentInputsId ? await inputsFact(db, renter.currentInputsId) : null,
    boots,
    bootsHolder: boots?.kind === 'shop' ? await holderOf(db, shopId, boots.id) : null,
    skiPair: skiPair ?? null,
    skiPairHolder: skiPair ? await holderOf(db, shopId, skiPair.id) : null,
    decisions: (await decisionFacts(db, { rentalId: rental.id })).filter(isFittingDecision),
    openFitting: await openFittingOf(db, rental.id),
    edition: shopEdition,
    approved: (await tableApproval(db, shopId)).approved,
    near: { massKg: shop.nearMassKg, heightCm: shop.nearHeightCm },
  }
  return { facts, rental, renter, shop }
}

async function bootsOf(db: Reader, shopId: string, { boots, rentalId }: FittingParts) {
  if (boots === null) return null
  if (boots === 'own') return ownBootsFact(db, shopId, { rentalId })
  const fact = await shopBootsFact(db, shopId, boots.id)
  if (!fact) throw new Problem('items.unknown')
  return fact
}

const massPerson = alias(people, 'mass_person')
const heightPerson = alias(people, 'height_person')

/** A renter's inputs with the names of who measured; null once they were erased. */
export async function inputsFact(db: Reader, inputsId: string): Promise<FittingInputsFact | null> {
  const [row] = await db
    .select({ inputs: fittingInputs, massBy: massPerson.name, heightBy: heightPerson.name })
    .from(fittingInputs)
    .leftJoin(massPerson, eq(massPerson.id, fittingInputs.massBy))
    .leftJoin(heightPerson, eq(heightPerson.id, fittingInputs.heightBy))
    .where(eq(fittingInputs.id, inputsId))
  if (!row) return null
  const {
    id,
    mass,
    massSource,
    height,
    heightSource,
    age,
    skierType,
    request,
    requestSignedName,
    createdAt,
  } = row.inputs
  return {
    id,
    mass,
    massSource,
    massBy: row.massBy,
    height,
    heightSource,
    heightBy: row.heightBy,
    age,
    skierType: skierType as FittingInputsFact['skierType'],
    request: request as FittingInputsFact['request'],
    requestSignedName,
    at: createdAt.toISOString(),
  }
}

/** The rental's open fitting, which a new one replaces. */
export async function openFittingOf(db: Reader, rentalId: string): Promise<FittingFacts['openFitting']> {
  const [row] = await db
    .select({ fitting: fittings, by: people.name })
    .from(fittings)
    .innerJoin(people, eq(people.id, fittings.claimedBy))
    .where(and(eq(fittings.rentalId, rentalId), inArray(fittings.state, [...openFittingStates])))
    .orderBy(desc(fittings.claimedAt))
    .limit(1)
  if (!row) return null
  const { id, number, state, skiPairId, bootsId, value, claimedAt } = row.fitting
  return {
    id,
    number,
    state: state === 'prepared' ? 'prepared' : 'claimed',
    skiPairId,
    bootsId,
    value,
    by: row.by,
    since: claimedAt.toISOString(),
  }
}
