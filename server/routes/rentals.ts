import {
  cancelRental,
  changeContact,
  changeInputs,
  changePeriod,
  createRental,
  getRental,
  getRentalFormFacts,
  listRentals,
  readOwnBoots,
  requestRow,
  secondLook,
  takeRental,
} from '#shared/api/rentals'
import { rentalById } from '../db/queries/rental'
import { rentalList } from '../db/queries/rentals'
import { readOwnBootsService, secondLookService } from '../services/ownBoots'
import {
  cancelRentalService,
  changePeriodService,
  createRentalService,
  takeRentalService,
} from '../services/rentals'
import { sentencesReviewed } from '../services/texts'
import { changeContactService, changeInputsService, requestRowService } from '../services/renters'
import { shopById, shopDay } from '../services/shops'
import { answers, does, type Route } from './route'

/** Renters and their rentals at the desk. */
export const rentalRoutes: Route[] = [
  answers(listRentals, (deps, { shopId }, { query }) => rentalList(deps.db, shopId, query)),
  answers(getRental, (deps, { shopId }, { params }) => rentalById(deps.db, shopId, params.id, deps.now())),
  answers(getRentalFormFacts, async (deps, { shopId }) => {
    const shop = await shopById(deps.db, shopId)
    const { name, ageOfMajority, nearMassKg, nearHeightCm, promiseMinutes } = shop
    return {
      shop: name,
      today: shopDay(shop, deps.now()),
      ageOfMajority,
      nearMassKg,
      nearHeightCm,
      promiseMinutes,
      sentencesReviewed: await sentencesReviewed(deps.db, shopId),
    }
  }),
  does(createRental, createRentalService),
  does(takeRental, takeRentalService),
  does(cancelRental, cancelRentalService),
  does(changePeriod, changePeriodService),
  does(changeContact, changeContactService),
  does(changeInputs, changeInputsService),
  does(requestRow, requestRowService),
  does(readOwnBoots, readOwnBootsService),
  does(secondLook, secondLookService),
]
