import { markRaw, shallowReactive, type Component } from 'vue'

/** The frames around views. Each is fetched when the first route asks for it. */
const sources = {
  staff: () => import('./StaffLayout.vue'),
  bench: () => import('./BenchLayout.vue'),
  renter: () => import('./RenterLayout.vue'),
  print: () => import('./PrintLayout.vue'),
  plain: () => import('./PlainLayout.vue'),
} satisfies Record<string, () => Promise<{ default: Component }>>

export type LayoutName = keyof typeof sources

const fetched = shallowReactive(new Map<LayoutName, Component>())

/** A guard waits for it, so that a view never stands without its frame. */
export async function loadLayout(name: LayoutName): Promise<void> {
  if (!fetched.has(name)) fetched.set(name, markRaw((await sources[name]()).default))
}

export function layoutOf(name: LayoutName): Component | undefined {
  return fetched.get(name)
}
