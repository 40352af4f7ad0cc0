import type { RouteRecordRaw } from 'vue-router'

export const fleetRoutes: RouteRecordRaw[] = []
