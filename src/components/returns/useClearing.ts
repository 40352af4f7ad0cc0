import { computed, ref, shallowRef, watch } from 'vue'
import { recordInspection } from '#shared/api/inspections'
import type { BodyOf } from '#shared/api/define'
import type { ItemKind } from '#shared/lifecycle/itemStates'
import { bootChecks, skiChecks, type Finding } from '#shared/schemas/inspections'
import { sendCommand } from '../../api/commands'
import { fetchClearing, type Clearing } from '../../api/returns'

export type Verdict = 'rack' | 'service' | 'withdraw'
export type Check = (typeof skiChecks)[number] | (typeof bootChecks)[number]

/** Why an outcome cannot be taken yet. */
export type ClearingLack = 'unanswered' | 'fault' | 'reason' | 'missing' | 'place'

/** One item at its clearing: the list as it is answered, and what each outcome still lacks. */
export function useClearing(item: () => { kind: ItemKind; itemId: string }) {
  const clearing = shallowRef<Clearing | null>(null)
  const failed = shallowRef<unknown>(null)
  const problem = shallowRef<unknown>(null)
  const busy = ref<Verdict | null>(null)
  const found = ref<Partial<Record<Check, Finding>>>({})
  const note = ref('')
  const otherPlace = ref('')

  const checks = computed<readonly Check[]>(() => (item().kind === 'ski_pair' ? skiChecks : bootChecks))
  const unanswered = computed(() => checks.value.filter((check) => !found.value[check]))
  const faults = computed(() => checks.value.filter((check) => found.value[check] === 'fault'))
  const place = computed(() => otherPlace.value.trim() || clearing.value?.rackPlace || null)

  async function load() {
    failed.value = null
    try {
      const { kind, itemId } = item()
      clearing.value = await fetchClearing(kind, itemId)
    } catch (error) {
      failed.value = error
    }
  }

  watch(
    () => item().itemId,
    () => {
      clearing.value = null
      found.value = {}
      note.value = ''
      otherPlace.value = ''
      problem.value = null
      void load()
    },
    { immediate: true },
  )

  function lackOf(verdict: Verdict): ClearingLack | null {
    if (unanswered.value.length > 0) return 'unanswered'
    if (verdict !== 'rack') return faults.value.length === 0 && note.value.trim() === '' ? 'reason' : null
    if (clearing.value?.missing.length) return 'missing'
    if (faults.value.length > 0) return 'fault'
    return place.value ? null : 'place'
  }

  /** Records the list with its outcome; answers whether it went through. */
  async function record(verdict: Verdict): Promise<boolean> {
    if (busy.value || lackOf(verdict)) return false
    busy.value = verdict
    problem.value = null
    const { kind, itemId } = item()
    try {
      await sendCommand(recordInspection, {
        itemKind: kind,
        itemId,
        checks: found.value,
        verdict,
        note: note.value.trim(),
        ...(verdict === 'rack' && otherPlace.value.trim() ? { rackPlace: otherPlace.value.trim() } : {}),
      } as BodyOf<typeof recordInspection>)
      return true
    } catch (error) {
      problem.value = error
      void load()
      return false
    } finally {
      busy.value = null
    }
  }

  return {
    clearing,
    failed,
    problem,
    busy,
    found,
    note,
    otherPlace,
    checks,
    unanswered,
    faults,
    place,
    load,
    lackOf,
    record,
  }
}
