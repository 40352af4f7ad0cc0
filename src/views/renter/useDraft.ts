import { onBeforeUnmount, onMounted, ref, watch, type Ref } from 'vue'
import type { FormDraft } from '#shared/renters/draft'
import { ApiProblem } from '../../api/http'
import { fetchForm, saveDraft } from '../../api/forms'

const pauseMs = 700
const againMs = 5000

/** `unsaved`: the server was not reached. `elsewhere`: another page of the same link was faster. */
export type DraftStatus = 'empty' | 'saved' | 'saving' | 'unsaved' | 'elsewhere'

/** Keeps what is typed at the server, on the personal link, a moment after the last key. */
export function useDraft(
  link: string,
  draft: FormDraft,
  version: number,
): { status: Ref<DraftStatus>; stop: () => void } {
  const status = ref<DraftStatus>('empty')
  let known = version
  let kept = JSON.stringify(draft)
  let timer: ReturnType<typeof setTimeout> | undefined
  let stopped = false
  let saving: Promise<void> | null = null

  function later(ms: number) {
    clearTimeout(timer)
    if (!stopped) timer = setTimeout(() => void save(), ms)
  }

  function save(): Promise<void> {
    saving ??= once().finally(() => {
      saving = null
      if (status.value !== 'elsewhere' && JSON.stringify(draft) !== kept) later(pauseMs)
    })
    return saving
  }

  async function once() {
    const now = JSON.stringify(draft)
    if (stopped || now === kept) return
    status.value = 'saving'
    try {
      known = (await saveDraft(link, known, { ...draft })).draftVersion
      kept = now
      status.value = 'saved'
    } catch (error) {
      await refused(error, now)
    }
  }

  /** An answer that was lost on the way looks like another page: then the server has what was typed here. */
  async function refused(error: unknown, now: string) {
    if (error instanceof ApiProblem && error.code === 'command.stale') {
      const there = await fetchForm(link).catch(() => null)
      if (there && sameFields(there.draft, now)) {
        known = there.draftVersion
        kept = now
        status.value = 'saved'
      } else if (there) status.value = 'elsewhere'
      else unsaved()
      return
    }
    unsaved()
  }

  function unsaved() {
    status.value = 'unsaved'
    later(againMs)
  }

  const soon = () => later(pauseMs)
  const atOnce = () => void save()
  watch(draft, soon)
  onMounted(() => {
    window.addEventListener('online', atOnce)
    document.addEventListener('visibilitychange', atOnce)
  })
  const stop = () => {
    stopped = true
    clearTimeout(timer)
  }
  onBeforeUnmount(() => {
    stop()
    window.removeEventListener('online', atOnce)
    document.removeEventListener('visibilitychange', atOnce)
  })
  return { status, stop }
}

function sameFields(there: Record<string, string> | null, now: string): boolean {
  const mine = JSON.parse(now) as Record<string, string>
  return there !== null && Object.entries(mine).every(([key, value]) => there[key] === value)
}
