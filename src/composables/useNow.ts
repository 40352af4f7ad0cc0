import { onBeforeUnmount, ref, type Ref } from 'vue'

/** The time, moved on every few seconds, for waits that grow while one looks. */
export function useNow(everyMs = 10_000): Ref<Date> {
  const now = ref(new Date())
  const timer = setInterval(() => (now.value = new Date()), everyMs)
  onBeforeUnmount(() => clearInterval(timer))
  return now
}
