import {
  bootsFor,
  claimFitting,
  decideFitting,
  getFitting,
  getFittingFacts,
  getFittingWhy,
  giveBackFitting,
  suggestPairs,
} from '#shared/api/fittings'
import { fittingDetail, fittingWhy } from '../db/queries/fittingDetail'
import { fittingFactsOf } from '../db/queries/fittingFacts'
import { claimFittingService, decideFittingService, giveBackFittingService } from '../services/fittings'
import { bootsForRental, suggestPairsFor } from '../services/suggestPairs'
import { answers, does, type Route } from './route'

/** Fittings at the counter. The reads with names of their own stand before the one by id. */
export const fittingRoutes: Route[] = [
  does(claimFitting, claimFittingService),
  does(giveBackFitting, giveBackFittingService),
  does(decideFitting, decideFittingService, { signedBy: (body) => body.secondPersonId ?? null }),
  answers(getFittingFacts, async (deps, actor, { query }) => {
    const { facts, rental, renter } = await fittingFactsOf(deps.db, actor.shopId, {
      rentalId: query.rentalId,
      skiPairId: query.skiPairId ?? null,
      boots: query.bootsId ? { id: query.bootsId } : query.boots === 'own' ? 'own' : null,
    })
    const { id, firstName, lastName, guardianName } = renter
    return {
      ...facts,
      renter: { id, firstName, lastName, guardianName },
      promisedAt: rental.promisedAt.toISOString(),
      arrivedAt: rental.arrivedAt.toISOString(),
      wishes: rental.wishes,
    }
  }),
  answers(suggestPairs, (deps, actor, { query }) => suggestPairsFor(deps, actor.shopId, query)),
  answers(bootsFor, (deps, actor, { query }) => bootsForRental(deps, actor.shopId, query)),
  answers(getFitting, (deps, actor, { params }) => fittingDetail(deps.db, actor.shopId, params.id)),
  answers(getFittingWhy, (deps, actor, { params }) => fittingWhy(deps.db, actor.shopId, params.id)),
]
