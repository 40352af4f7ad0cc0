import { computed, type WritableComputedRef } from 'vue'
import type { FormDraft } from '#shared/renters/draft'

/** One choice of a draft for a control that knows "nothing chosen" as null. */
export function useChoice(draft: FormDraft, key: keyof FormDraft): WritableComputedRef<string | null> {
  return computed({
    get: () => draft[key] || null,
    set: (value) => (draft[key] = value ?? ''),
  })
}
