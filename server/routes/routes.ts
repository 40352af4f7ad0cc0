import type { AppPassport } from '../auth/passport'
import { boardRoutes } from './board'
import { formRoutes } from './forms'
import { rentalRoutes } from './rentals'
import { callBackRoutes } from './callBacks'
import { fittingRoutes } from './fittings'
import { returnsRoutes } from './returns'
import type { Route } from './route'
import { thingsRoutes } from './things'
import { sessionRoutes } from './session'

/** Every route of the API, in the order of the day. */
export function routes(passport: AppPassport): Route[] {
  return [
    ...sessionRoutes(passport),
    ...boardRoutes,
    ...formRoutes,
    ...rentalRoutes,
    ...thingsRoutes,
    ...fittingRoutes,
    ...returnsRoutes,
    ...callBackRoutes,
  ]
}
