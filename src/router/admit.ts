import type { RouteLocationNormalized, RouteLocationRaw, Router } from 'vue-router'
import { ApiProblem } from '../api/http'
import { useSessionStore } from '../stores/session'

/** Who is not signed in signs in first and comes back; whose role does not do this is told who can. */
export async function admit(to: RouteLocationNormalized, router: Router): Promise<RouteLocationRaw | true> {
  if (to.meta.access === 'open') return true
  const session = useSessionStore()
  try {
    await session.load()
  } catch (error) {
    if (error instanceof ApiProblem) return { name: 'unreachable', query: { next: to.fullPath } }
    throw error
  }
  if (!session.session) {
    return router.hasRoute('sign-in')
      ? { name: 'sign-in', query: { next: to.fullPath } }
      : { name: 'not-found', params: { path: ['sign-in'] } }
  }
  const { permission } = to.meta
  return !permission || session.may(permission) || { name: 'role-cannot', query: { permission } }
}
