import { mount } from '@vue/test-utils'
import { defineComponent } from 'vue'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { useIdle } from '../../../../src/views/renter/useIdle'

let begun = 0

function tablet() {
  let idle!: ReturnType<typeof useIdle>
  const wrapper = mount(
    defineComponent({
      setup() {
        idle = useIdle({ afterS: 60, warnS: 10, done: () => (begun += 1) })
        return () => null
      },
    }),
  )
  return { idle, wrapper }
}
const touch = () => window.dispatchEvent(new Event('pointerdown'))

beforeEach(() => {
  begun = 0
  vi.useFakeTimers()
})
afterEach(() => vi.useRealTimers())

describe('a shared tablet that nobody touches', () => {
  it('warns for the last ten seconds and starts anew after sixty', () => {
    const { idle } = tablet()
    vi.advanceTimersByTime(49_500)
    expect(idle.warning.value).toBe(false)
    vi.advanceTimersByTime(1000)
    expect([idle.warning.value, idle.left.value]).toEqual([true, 10])
    vi.advanceTimersByTime(9250)
    expect(begun).toBe(0)
    vi.advanceTimersByTime(500)
    expect([begun, idle.warning.value]).toEqual([1, false])
  })

  it('counts from every touch, and after the warning only from the key', () => {
    const { idle } = tablet()
    vi.advanceTimersByTime(40_000)
    touch()
    vi.advanceTimersByTime(40_000)
    expect([begun, idle.warning.value]).toEqual([0, false])
    vi.advanceTimersByTime(12_000)
    touch()
    vi.advanceTimersByTime(250)
    expect(idle.warning.value).toBe(true)
    idle.stay()
    vi.advanceTimersByTime(40_000)
    expect([begun, idle.warning.value]).toEqual([0, false])
  })

  it('counts no longer once the form is left', () => {
    const { wrapper } = tablet()
    wrapper.unmount()
    vi.advanceTimersByTime(120_000)
    expect(begun).toBe(0)
  })
})
