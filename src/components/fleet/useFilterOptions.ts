import { computed } from 'vue'
import { useI18n } from 'vue-i18n'
import { itemStates } from '#shared/lifecycle/itemStates'
import { useSessionStore } from '../../stores/session'

/** The states and the shop's sites as things to choose from. */
export function useFilterOptions() {
  const { t } = useI18n()
  const session = useSessionStore()
  const states = computed(() =>
    itemStates.map((state) => ({ value: state, label: t(`staff.states.${state}`) })),
  )
  const sites = computed(() =>
    (session.session?.sites ?? []).map(({ id, name }) => ({ value: id, label: name })),
  )
  return { states, sites }
}
