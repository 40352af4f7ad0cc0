import { createRouter, createWebHistory, type Router } from 'vue-router'
import { installGuards } from './guards'
import './meta'
import { basicRoutes, designRoutes } from './routes/basic'
import { benchRoutes } from './routes/bench'
import { boardRoutes } from './routes/board'
import { counterRoutes } from './routes/counter'
import { fleetRoutes } from './routes/fleet'
import { officeRoutes } from './routes/office'
import { renterRoutes } from './routes/renter'
import { returnsRoutes } from './routes/returns'

export const router: Router = createRouter({
  history: createWebHistory(),
  scrollBehavior: (to, _from, saved) => saved ?? (to.hash ? { el: to.hash } : { top: 0 }),
  routes: [
    ...renterRoutes,
    ...counterRoutes,
    ...benchRoutes,
    ...returnsRoutes,
    ...boardRoutes,
    ...fleetRoutes,
    ...officeRoutes,
    ...designRoutes,
    ...basicRoutes(() => router),
  ],
})

installGuards(router)
