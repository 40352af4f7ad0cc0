import type { RouteRecordRaw } from 'vue-router'

const meta = { permission: 'fleet.read', texts: ['fleet'], station: 'fleet' } as const
const write = { ...meta, permission: 'fleet.write' } as const

/** The fleet: pairs, boots, their models, and what is held. */
export const fleetRoutes: RouteRecordRaw[] = [
  {
    path: '/fleet',
    component: () => import('../../views/fleet/FleetFrame.vue'),
    children: [
      { path: '', redirect: { name: 'ski-pairs' } },
      {
        path: 'ski-pairs',
        name: 'ski-pairs',
        component: () => import('../../views/fleet/SkiPairsView.vue'),
        meta: { ...meta, title: 'fleet.skiPairs' },
      },
      {
        path: 'boots',
        name: 'boots-list',
        component: () => import('../../views/fleet/BootsListView.vue'),
        meta: { ...meta, title: 'fleet.boots' },
      },
      {
        path: 'ski-models',
        name: 'ski-models',
        component: () => import('../../views/fleet/SkiModelsView.vue'),
        meta: { ...meta, title: 'fleet.skiModels' },
      },
      {
        path: 'binding-models',
        name: 'binding-models',
        component: () => import('../../views/fleet/BindingModelsView.vue'),
        meta: { ...meta, title: 'fleet.bindingModels' },
      },
      {
        path: 'quarantine',
        name: 'quarantine',
        component: () => import('../../views/fleet/QuarantineView.vue'),
        meta: { ...meta, title: 'fleet.quarantine' },
      },
    ],
  },
  {
    path: '/fleet/ski-pairs/:id',
    name: 'ski-pair',
    component: () => import('../../views/fleet/SkiPairView.vue'),
    props: true,
    meta: { ...meta, title: 'fleet.skiPair' },
  },
  {
    path: '/fleet/boots/:id',
    name: 'boots',
    component: () => import('../../views/fleet/BootsView.vue'),
    props: true,
    meta: { ...meta, title: 'fleet.boots' },
  },
  {
    path: '/fleet/binding-models/new',
    name: 'binding-model-new',
    component: () => import('../../views/fleet/BindingModelEditView.vue'),
    meta: { ...write, title: 'fleet.binding.new' },
  },
  {
    path: '/fleet/binding-models/:id',
    name: 'binding-model',
    component: () => import('../../views/fleet/BindingModelView.vue'),
    props: true,
    meta: { ...meta, title: 'fleet.bindingModel' },
  },
  {
    path: '/fleet/binding-models/:id/edit',
    name: 'binding-model-edit',
    component: () => import('../../views/fleet/BindingModelEditView.vue'),
    props: true,
    meta: { ...write, title: 'fleet.bindingModel' },
  },
]
