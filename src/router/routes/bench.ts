import type { RouteRecordRaw } from 'vue-router'

/** The workshop's bench, the record that leaves it on paper, and the set that leaves with its renter. */
export const benchRoutes: RouteRecordRaw[] = [
  {
    path: '/bench/:fittingId?',
    name: 'bench',
    component: () => import('../../views/bench/BenchView.vue'),
    meta: {
      layout: 'bench',
      permission: 'tickets.work',
      texts: ['bench', 'fitting'],
      title: 'bench.title',
      station: 'bench',
    },
  },
  {
    path: '/records/:recordId/print',
    name: 'record-print',
    component: () => import('../../views/RecordPrintView.vue'),
    props: true,
    meta: {
      layout: 'print',
      permission: 'renters.read',
      texts: ['record', 'callBacks'],
      title: 'record.title',
    },
  },
  {
    path: '/hand-over/:fittingId?',
    name: 'hand-over',
    component: () => import('../../views/counter/HandOverView.vue'),
    meta: {
      permission: 'handOvers.record',
      texts: ['handOver'],
      title: 'handOver.title',
      station: 'counter',
    },
  },
]
