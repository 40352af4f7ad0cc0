import { getClearing, listUnchecked, recordInspection } from '#shared/api/inspections'
import { getReturnSet, getReturnsToday, returnOwnBoots, scanReturn } from '#shared/api/returns'
import { returnSet, returnsToday } from '../db/queries/returns'
import { clearingOf, uncheckedItems } from '../db/queries/unchecked'
import { recordInspectionService } from '../services/inspections'
import { returnOwnBootsService, scanReturnService } from '../services/returns'
import { answers, does, type Route } from './route'

/** Without a site asked for it is the device's own; a browser that is enrolled nowhere sees all sites. */
export const returnsRoutes: Route[] = [
  does(scanReturn, scanReturnService),
  does(returnOwnBoots, returnOwnBootsService),
  does(recordInspection, recordInspectionService),
  answers(getReturnsToday, (deps, actor, { query }) =>
    returnsToday(deps.db, actor.shopId, query.siteId ?? actor.siteId, deps.now()),
  ),
  answers(listUnchecked, async (deps, actor, { query }) => ({
    rows: await uncheckedItems(deps.db, actor.shopId, query.siteId ?? actor.siteId),
  })),
  answers(getReturnSet, (deps, actor, { params }) => returnSet(deps.db, actor.shopId, params.rentalId)),
  answers(getClearing, (deps, actor, { params }) =>
    clearingOf(deps.db, actor.shopId, params.kind, params.itemId),
  ),
]
