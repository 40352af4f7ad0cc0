import type { RouteRecordRaw } from 'vue-router'

/** What a renter's phone opens, by link and without an account. */
export const renterRoutes: RouteRecordRaw[] = [
  {
    path: '/door/:token',
    name: 'door',
    component: () => import('../../views/renter/DoorView.vue'),
    meta: { layout: 'renter', access: 'open', texts: ['form'], title: 'form.page' },
  },
  {
    path: '/f/:token',
    name: 'renter-form',
    component: () => import('../../views/renter/FormView.vue'),
    meta: { layout: 'renter', access: 'open', texts: ['form'], title: 'form.page' },
  },
]
