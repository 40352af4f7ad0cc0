import { computed, ref } from 'vue'
import { ApiProblem } from '../api/http'

/** Six digits being typed, which are never shown, and what came of the last try. */
export function usePinEntry() {
  const digits = ref('')
  const triesLeft = ref<number | null>(null)
  const locked = ref(false)
  const typed = computed(() => digits.value.length)
  const full = computed(() => typed.value === 6)

  function type(digit: string) {
    if (!full.value && !locked.value) digits.value += digit
  }
  const remove = () => void (digits.value = digits.value.slice(0, -1))
  const clear = () => void (digits.value = '')

  /** Another person: nothing of the one before is left. */
  function forget(isLocked = false) {
    clear()
    triesLeft.value = null
    locked.value = isLocked
  }

  /** Whether a refusal was about the digits; then it is kept here, and the digits are typed anew. */
  function heard(error: unknown): boolean {
    clear()
    if (!(error instanceof ApiProblem)) return false
    if (error.code === 'pin.wrong') triesLeft.value = Number(error.params.triesLeft)
    else if (error.code === 'pin.locked') locked.value = true
    else return false
    return true
  }

  return { digits, typed, full, triesLeft, locked, type, remove, clear, forget, heard }
}
