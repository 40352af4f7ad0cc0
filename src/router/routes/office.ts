import type { RouteRecordRaw } from 'vue-router'
import { useSessionStore } from '../../stores/session'

const meta = { texts: ['office'], station: 'office' } as const

/** Before anybody works: signing in, going on at a station, the first start of a real shop. */
const doorRoutes: RouteRecordRaw[] = [
  {
    path: '/sign-in',
    name: 'sign-in',
    component: () => import('../../views/SignInView.vue'),
    meta: {
      layout: 'plain',
      access: 'open',
      texts: ['staff', 'staffProblems', 'signIn'],
      title: 'signIn.title',
    },
  },
  {
    path: '/setup',
    name: 'setup',
    component: () => import('../../views/SetupView.vue'),
    meta: {
      layout: 'plain',
      access: 'open',
      texts: ['staffProblems', 'signIn'],
      title: 'signIn.setup.title',
    },
  },
  {
    path: '/station',
    name: 'station',
    component: () => import('../../views/StationView.vue'),
    meta: { layout: 'bench', access: 'open', texts: ['station'], title: 'station.title' },
  },
]

/** The pages of the office, in the order in which somebody lands on the first that their roles open. */
const pages: RouteRecordRaw[] = [
  {
    path: 'people',
    name: 'people',
    component: () => import('../../views/office/PeopleView.vue'),
    meta: { ...meta, permission: 'people.manage', title: 'office.people.title' },
  },
  {
    path: 'devices',
    name: 'devices',
    component: () => import('../../views/office/DevicesView.vue'),
    meta: { ...meta, permission: 'devices.manage', title: 'office.devices.title' },
  },
  {
    path: 'shop',
    name: 'shop',
    component: () => import('../../views/office/ShopView.vue'),
    meta: { ...meta, permission: 'shop.manage', title: 'office.shop.title' },
  },
  {
    path: 'texts',
    name: 'texts',
    component: () => import('../../views/office/TextsView.vue'),
    meta: { ...meta, permission: 'shop.manage', title: 'office.texts.title' },
  },
  {
    path: 'table-edition',
    name: 'table-edition',
    component: () => import('../../views/office/TableEditionView.vue'),
    meta: { ...meta, permission: 'fittings.read', title: 'office.table.title' },
  },
  {
    path: 'me',
    name: 'me',
    component: () => import('../../views/office/MeView.vue'),
    meta: { ...meta, title: 'office.me.title' },
  },
]

/** Names of the office's pages that the roles of whoever is signed in open. */
export function officePages(): string[] {
  const session = useSessionStore()
  return pages
    .filter(({ meta: page }) => !page?.permission || session.may(page.permission))
    .map(({ name }) => String(name))
}

export const officeRoutes: RouteRecordRaw[] = [
  ...doorRoutes,
  {
    path: '/office',
    component: () => import('../../views/office/OfficeFrame.vue'),
    children: [
      {
        path: '',
        name: 'office',
        component: () => import('../../views/office/MeView.vue'),
        meta: { ...meta, title: 'office.title' },
        beforeEnter: () => ({ name: officePages()[0] }),
      },
      ...pages,
    ],
  },
]
