import type { RouteRecordRaw } from 'vue-router'

export const renterRoutes: RouteRecordRaw[] = []
