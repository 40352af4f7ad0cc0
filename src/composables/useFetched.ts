import { onScopeDispose, ref, shallowRef, watch, type WatchSource } from 'vue'

/** How long changes that come together are waited for before the list is fetched once. */
const togetherMs = 150

/**
 * Something that the server is asked for, now and whenever `when` changes. An answer that came too late for what is
 * asked now is dropped; what was there stays until the next one is here.
 */
export function useFetched<Answer>(ask: () => Promise<Answer>, when?: WatchSource | WatchSource[]) {
  const answer = shallowRef<Answer | null>(null)
  const failed = shallowRef<unknown>(null)
  const loading = ref(false)
  let question = 0
  let timer: ReturnType<typeof setTimeout> | undefined

  async function load() {
    clearTimeout(timer)
    const mine = (question += 1)
    loading.value = true
    try {
      const fetched = await ask()
      if (mine !== question) return
      answer.value = fetched
      failed.value = null
    } catch (error) {
      if (mine === question) failed.value = error
    } finally {
      if (mine === question) loading.value = false
    }
  }
  function loadSoon() {
    clearTimeout(timer)
    timer = setTimeout(() => void load(), togetherMs)
  }

  void load()
  if (when) watch(when, loadSoon)
  onScopeDispose(() => {
    question += 1
    clearTimeout(timer)
  })
  return { answer, failed, loading, load }
}
