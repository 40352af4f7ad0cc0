import type { RouteRecordRaw } from 'vue-router'

export const boardRoutes: RouteRecordRaw[] = [
  {
    path: '/board',
    name: 'board',
    component: () => import('../../views/board/BoardView.vue'),
    meta: { permission: 'board.read', texts: ['board'], title: 'board.title', station: 'board' },
  },
]
