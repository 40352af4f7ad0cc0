import type { RouteRecordRaw } from 'vue-router'

export const counterRoutes: RouteRecordRaw[] = [
  {
    path: '/counter',
    name: 'counter',
    component: () => import('../../views/counter/CounterHome.vue'),
    meta: { permission: 'renters.read', texts: ['rentals'], title: 'rentals.desk', station: 'counter' },
  },
  {
    path: '/counter/new',
    name: 'rental-new',
    component: () => import('../../views/counter/RentalNewView.vue'),
    meta: {
      permission: 'renters.write',
      texts: ['rentals', 'form'],
      title: 'rentals.new.title',
      station: 'counter',
    },
  },
  {
    path: '/counter/door',
    name: 'door-code',
    component: () => import('../../views/counter/DoorCodeView.vue'),
    meta: {
      permission: 'renters.write',
      texts: ['rentals'],
      title: 'rentals.door.short',
      station: 'counter',
    },
  },
  {
    path: '/counter/rentals/:rentalId/data',
    name: 'rental-data',
    component: () => import('../../views/counter/RentalDataView.vue'),
    props: true,
    meta: {
      permission: 'renters.write',
      texts: ['rentals', 'form'],
      title: 'rentals.data.page',
      station: 'counter',
    },
  },
  {
    path: '/counter/rentals/:rentalId',
    name: 'fitting',
    component: () => import('../../views/counter/FittingView.vue'),
    props: true,
    meta: { permission: 'fittings.claim', texts: ['fitting'], title: 'fitting.title', station: 'counter' },
  },
]
