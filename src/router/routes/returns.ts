import type { RouteRecordRaw } from 'vue-router'

/** Returns and what follows from them: scanning in, clearing, calling back. */
export const returnsRoutes: RouteRecordRaw[] = [
  {
    path: '/returns',
    name: 'returns',
    component: () => import('../../views/returns/ReturnsView.vue'),
    meta: { permission: 'returns.record', texts: ['returns'], title: 'returns.title', station: 'returns' },
    children: [
      {
        path: ':kind(ski_pair|boots)/:itemId',
        name: 'returns-clearing',
        component: () => import('../../views/returns/ReturnsClearingView.vue'),
        props: true,
      },
    ],
  },
  {
    path: '/call-backs',
    name: 'call-backs',
    component: () => import('../../views/returns/CallBacksView.vue'),
    meta: {
      permission: 'callBacks.read',
      texts: ['callBacks'],
      title: 'callBacks.title',
      station: 'callBacks',
    },
  },
]
