import { createPinia } from 'pinia'
import type { App } from 'vue'
import type { Router } from 'vue-router'
import { admit } from './admit'
import { basicRoutes, designRoutes } from './routes/basic'
import { benchRoutes } from './routes/bench'
import { boardRoutes } from './routes/board'
import { counterRoutes } from './routes/counter'
import { fleetRoutes } from './routes/fleet'
import { officeRoutes } from './routes/office'
import { returnsRoutes } from './routes/returns'

/** Everything behind the counter: stores, the stations' routes, and the guard that asks who is there. */
export function installStaff(app: App, router: Router) {
  app.use(createPinia())
  const routes = [
    ...counterRoutes,
    ...benchRoutes,
    ...returnsRoutes,
    ...boardRoutes,
    ...fleetRoutes,
    ...officeRoutes,
    ...designRoutes,
    ...basicRoutes(router),
  ]
  routes.forEach((route) => router.addRoute(route))
  router.beforeEach((to) => admit(to, router))
}
