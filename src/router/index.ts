import type { App } from 'vue'
import { createRouter, createWebHistory, type Router } from 'vue-router'
import { installFrames } from './frames'
import './meta'
import { renterRoutes } from './routes/renter'

/**
 * The renter's phone needs two routes and nothing of the shop's: everything else (the staff's routes, who is signed
 * in, stores) is fetched when an address is none of theirs.
 */
export function createAppRouter(app: App): Router {
  const router = createRouter({
    history: createWebHistory(),
    scrollBehavior: (to, _from, saved) => saved ?? (to.hash ? { el: to.hash } : { top: 0 }),
    routes: [
      ...renterRoutes,
      {
        path: '/:path(.*)*',
        name: 'not-found',
        component: () => import('../views/NotFoundView.vue'),
        meta: { layout: 'plain', access: 'open', title: 'common.page.notFoundTitle' },
      },
    ],
  })

  let complete = false
  router.beforeEach(async (to) => {
    if (complete || to.name !== 'not-found') return true
    const { installStaff } = await import('./staff')
    installStaff(app, router)
    complete = true
    return { path: to.path, query: to.query, hash: to.hash, replace: true }
  })
  installFrames(router)
  return router
}
