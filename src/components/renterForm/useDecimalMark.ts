import { computed, type ComputedRef } from 'vue'
import { useI18n } from 'vue-i18n'
import type { DecimalMark } from '#shared/units/typed'

/** The decimal mark of the language on the screen. */
export function useDecimalMark(): ComputedRef<DecimalMark> {
  const { locale } = useI18n()
  return computed(() => (locale.value === 'de' ? ',' : '.'))
}
