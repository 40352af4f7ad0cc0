import type { AppPassport } from '../auth/passport'
import { boardRoutes } from './board'
import type { Route } from './route'
import { thingsRoutes } from './things'
import { sessionRoutes } from './session'

/** Every route of the API, in the order of the day. */
export function routes(passport: AppPassport): Route[] {
  return [...sessionRoutes(passport), ...boardRoutes, ...thingsRoutes]
}
