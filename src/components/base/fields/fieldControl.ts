import { computed, inject, provide, useId, type ComputedRef, type InjectionKey } from 'vue'

/** What a field gives the control in it, so that label, hint and error are tied to it by themselves. */
export interface FieldControl {
  id: string
  labelId: string
  describedBy: string | undefined
  invalid: boolean
}
const key: InjectionKey<ComputedRef<FieldControl>> = Symbol('field')

export function provideField(control: ComputedRef<FieldControl>) {
  provide(key, control)
}

/** The field around a control; a control without one still has an id of its own. */
export function useFieldControl(): ComputedRef<FieldControl> {
  const own = useId()
  const alone = computed<FieldControl>(() => ({
    id: own,
    labelId: `${own}-label`,
    describedBy: undefined,
    invalid: false,
  }))
  return inject(key, alone)
}
