import { onBeforeUnmount, watch } from 'vue'
import { useRoute } from 'vue-router'
import { fetchSession } from '../api/session'
import { useBoardStore } from '../stores/board'
import { useSessionStore } from '../stores/session'

/** The answer that changes the cookie of this browser may still be on its way to another tab. */
const cookieMs = 300

/**
 * The board lives with whoever is signed in: it starts, ends and starts anew with them. When the server lets go of
 * this screen, the session says why: ended, then it is asked to sign in again; somebody else went on at this browser,
 * then the screen begins anew as theirs, for what stands on it was the other's.
 */
export function useLiveBoard() {
  const session = useSessionStore()
  const board = useBoardStore()
  const route = useRoute()

  watch(
    () => session.session,
    (now, before) => {
      const same = now?.person.id === before?.person.id
      if (now && same && board.status === 'live' && !board.denied) return
      board.stop()
      if (now) board.start()
    },
    { immediate: true },
  )

  watch(
    () => board.denied,
    async (denied) => {
      const before = session.person
      // Where people change, the change itself says who is here now.
      if (!denied || !before || route.name === 'station') return
      await new Promise((resume) => setTimeout(resume, cookieMs))
      const answer = await fetchSession().catch(() => undefined)
      // Somebody signed in or out on this very screen meanwhile: then that is what holds.
      if (answer === undefined || session.person?.id !== before.id) return
      if (answer && answer.person.id !== before.id) location.assign('/')
      else session.meet(answer)
    },
  )

  onBeforeUnmount(() => board.stop())
}
