import type { RouteRecordRaw } from 'vue-router'

export const benchRoutes: RouteRecordRaw[] = []
