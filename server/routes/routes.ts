import type { AppPassport } from '../auth/passport'
import { benchRoutes } from './bench'
import { boardRoutes } from './board'
import { formRoutes } from './forms'
import { rentalRoutes } from './rentals'
import { callBackRoutes } from './callBacks'
import { fittingRoutes } from './fittings'
import { returnsRoutes } from './returns'
import type { Route } from './route'
import { thingsRoutes } from './things'
import { officeRoutes } from './office'
import { openApiRoute } from './openApi'
import { doorRoutes, sessionRoutes } from './session'

/** Every route of the API, in the order of the day. */
export function routes(passport: AppPassport): Route[] {
  const described = [
    ...sessionRoutes(passport),
    ...doorRoutes(),
    ...officeRoutes,
    ...boardRoutes,
    ...formRoutes,
    ...rentalRoutes,
    ...thingsRoutes,
    ...fittingRoutes,
    ...benchRoutes,
    ...returnsRoutes,
    ...callBackRoutes,
  ]
  return [...described, openApiRoute(described)]
}
