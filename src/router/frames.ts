import type { RouteLocationNormalized, Router } from 'vue-router'
import { useToasts } from '../components/base/feedback/useToasts'
import { i18n, loadTexts } from '../i18n/i18n'
import { loadLayout, type LayoutName } from '../layouts/layouts'

/** Texts that every view of a layout may need. The renter's phone carries none of the staff's. */
const layoutTexts: Record<LayoutName, readonly string[]> = {
  staff: ['problems', 'staffProblems', 'staff', 'rule'],
  bench: ['problems', 'staffProblems', 'staff', 'rule'],
  print: ['problems', 'staffProblems', 'staff', 'rule'],
  plain: ['problems'],
  renter: ['problems'],
}

const layoutName = (to: RouteLocationNormalized): LayoutName => to.meta.layout ?? 'staff'

async function serverAnswers(): Promise<boolean> {
  return fetch('/livez', { cache: 'no-store' }).then(
    ({ ok }) => ok,
    () => false,
  )
}

/** A view is shown when its layout and its texts are there; then the title and the keyboard's place follow it. */
export function installFrames(router: Router) {
  router.beforeResolve(async (to) => {
    const layout = layoutName(to)
    await Promise.all([loadLayout(layout), loadTexts([...layoutTexts[layout], ...(to.meta.texts ?? [])])])
  })

  router.afterEach((to, from, failure) => {
    if (failure) return
    const { t } = i18n.global
    document.title = to.meta.title ? `${t(to.meta.title)} · Notchwise` : 'Notchwise'
    // After a change of page the keyboard starts at its content; on the first page it starts where browsers start.
    if (from.matched.length > 0 && to.name !== from.name) {
      requestAnimationFrame(() => document.getElementById('content')?.focus({ preventScroll: true }))
    }
  })

  // A new build has other file names: the page is fetched anew, once. While the server is away nothing is fetched,
  // since the browser would put its own error page in the place of what is still on the screen.
  router.onError(async (error: Error, to, from) => {
    const lostFile = /dynamically imported module|Importing a module script failed|preload CSS/i.test(
      error.message,
    )
    if (lostFile && from.matched.length > 0 && !(await serverAnswers())) {
      const { t } = i18n.global
      useToasts().show({
        text: t('common.page.notOpened'),
        note: t('common.page.notOpenedNext'),
        tone: 'stop',
      })
      return
    }
    if (!lostFile || sessionStorage.getItem('notchwise.reloaded') === to.fullPath) throw error
    sessionStorage.setItem('notchwise.reloaded', to.fullPath)
    location.assign(to.fullPath)
  })
}
