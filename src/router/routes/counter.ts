import type { RouteRecordRaw } from 'vue-router'

export const counterRoutes: RouteRecordRaw[] = []
