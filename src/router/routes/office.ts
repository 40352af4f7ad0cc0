import type { RouteRecordRaw } from 'vue-router'

export const officeRoutes: RouteRecordRaw[] = []
