import { computed, ref, shallowRef } from 'vue'
import { defineStore } from 'pinia'
import type { SessionAnswer } from '#shared/api/session'
import type { Permission } from '#shared/permissions'
import { whenSignedOut } from '../api/http'
import { endSession, fetchSession, startSession } from '../api/session'

/** Who works at this screen, where, and what they may do. Menus and routes ask it; the server decides again. */
export const useSessionStore = defineStore('session', () => {
  const session = shallowRef<SessionAnswer | null>(null)
  const asked = ref(false)
  /** The server no longer knows the session; the screen keeps what was typed and asks to sign in again. */
  const expired = ref(false)

  const person = computed(() => session.value?.person ?? null)
  const site = computed(() => {
    const { sites = [], device = null } = session.value ?? {}
    return sites.find(({ id }) => id === device?.siteId) ?? sites[0] ?? null
  })

  function may(permission: Permission): boolean {
    return session.value?.permissions.includes(permission) ?? false
  }

  function take(answer: SessionAnswer | null) {
    session.value = answer
    asked.value = true
    expired.value = false
  }

  /** Asks the server once; `again` asks anew, after a change of person at a station. */
  async function load({ again = false } = {}): Promise<SessionAnswer | null> {
    if (!asked.value || again) take(await fetchSession())
    return session.value
  }

  /** What the server says of this session now; ended, the screen stays and asks to sign in again. */
  function meet(answer: SessionAnswer | null) {
    if (answer) take(answer)
    else expired.value = session.value !== null
  }

  async function signIn(email: string, password: string) {
    take(await startSession(email, password))
  }

  async function signOut() {
    await endSession()
    take(null)
  }

  whenSignedOut(() => (expired.value = session.value !== null))

  return { session, person, site, expired, may, load, meet, signIn, signOut }
})
