import { readonly, ref } from 'vue'
import type { Tone } from '../tones'

/** How long a toast stays, and how long its undo is offered. */
export const toastMs = 10_000

export interface Toast {
  id: number
  text: string
  tone: Exclude<Tone, 'press' | 'calm'>
  note?: string
  undo?: () => void | Promise<void>
}

const toasts = ref<Toast[]>([])
const timers = new Map<number, ReturnType<typeof setTimeout>>()
let last = 0

function dismiss(id: number) {
  clearTimeout(timers.get(id))
  timers.delete(id)
  toasts.value = toasts.value.filter((toast) => toast.id !== id)
}

/** Says what was done and offers to take it back for ten seconds. Three at most stand at once; the oldest goes. */
function show(toast: Omit<Toast, 'id' | 'tone'> & { tone?: Toast['tone'] }): number {
  last += 1
  const id = last
  toasts.value = [...toasts.value, { tone: 'done' as const, ...toast, id }]
  while (toasts.value.length > 3) dismiss(toasts.value[0]!.id)
  timers.set(
    id,
    setTimeout(() => dismiss(id), toastMs),
  )
  return id
}

async function undo(id: number) {
  const toast = toasts.value.find((each) => each.id === id)
  dismiss(id)
  await toast?.undo?.()
}

export function useToasts() {
  return { toasts: readonly(toasts), show, dismiss, undo }
}
