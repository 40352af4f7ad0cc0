import { onBeforeUnmount, onMounted, ref, type Ref, type ShallowRef } from 'vue'

/** The width of an element in px as it changes; 0 until it is known. */
export function useElementWidth(element: Readonly<ShallowRef<HTMLElement | null>>): Ref<number> {
  const width = ref(0)
  let observer: ResizeObserver | undefined
  onMounted(() => {
    if (!element.value) return
    width.value = element.value.clientWidth
    observer = new ResizeObserver(([entry]) => (width.value = entry?.contentRect.width ?? width.value))
    observer.observe(element.value)
  })
  onBeforeUnmount(() => observer?.disconnect())
  return width
}
