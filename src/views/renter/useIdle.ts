import { onBeforeUnmount, onMounted, ref } from 'vue'

const touches = ['pointerdown', 'keydown', 'input', 'wheel'] as const

/**
 * Seconds until a shared tablet starts anew, counted from the last touch; the last ten are for a warning. `stay`
 * counts from the beginning again.
 */
export function useIdle({ afterS, warnS, done }: { afterS: number; warnS: number; done: () => void }) {
  const left = ref(afterS)
  const warning = ref(false)
  let touchedAt = Date.now()
  let clock: ReturnType<typeof setInterval> | undefined

  function stay() {
    touchedAt = Date.now()
    left.value = afterS
    warning.value = false
  }
  /** A touch during the warning must say so by the key: a coat sleeve is no person. */
  function touched() {
    if (!warning.value) touchedAt = Date.now()
  }
  function tick() {
    left.value = Math.max(0, Math.ceil(afterS - (Date.now() - touchedAt) / 1000))
    warning.value = left.value <= warnS
    if (left.value === 0) {
      stay()
      done()
    }
  }

  onMounted(() => {
    for (const touch of touches) window.addEventListener(touch, touched, { passive: true })
    clock = setInterval(tick, 250)
  })
  onBeforeUnmount(() => {
    for (const touch of touches) window.removeEventListener(touch, touched)
    clearInterval(clock)
  })
  return { left, warning, stay }
}
