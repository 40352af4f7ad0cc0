import type { RouteRecordRaw, Router } from 'vue-router'
import { useSessionStore } from '../../stores/session'
import { homesOf } from '../home'

const Nothing = { render: () => null }

/** Pages of no station: the start, which leads on, and those for what cannot be shown. */
export function basicRoutes(router: Router): RouteRecordRaw[] {
  return [
    {
      path: '/',
      name: 'home',
      component: Nothing,
      beforeEnter: () => {
        const { session } = useSessionStore()
        const name = session && homesOf(session).find((each) => router.hasRoute(each))
        return name ? { name } : { name: 'not-found', params: { path: ['home'] } }
      },
    },
    {
      path: '/not-your-role',
      name: 'role-cannot',
      component: () => import('../../views/RoleCannotView.vue'),
      meta: { title: 'staff.role.title' },
    },
    {
      path: '/unreachable',
      name: 'unreachable',
      component: () => import('../../views/UnreachableView.vue'),
      meta: { layout: 'plain', access: 'open' },
    },
  ]
}

/** The living page of all components, for those who build screens. */
export const designRoutes: RouteRecordRaw[] = import.meta.env.DEV
  ? [
      {
        path: '/design',
        name: 'design',
        component: () => import('../../views/DesignView.vue'),
        meta: { access: 'open', texts: ['design'], title: 'design.title', station: 'fleet' },
      },
    ]
  : []
