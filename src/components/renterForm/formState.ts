import { computed, inject, provide, reactive, ref, type ComputedRef, type InjectionKey, type Ref } from 'vue'
import { useI18n } from 'vue-i18n'
import type { FormFacts } from '#shared/renters/formRules'
import type { FieldProblem, FormField } from '#shared/renters/formRules'
import {
  draftFrom,
  readDraft,
  typedBornOf,
  typedHeightOf,
  typedMassOf,
  type FormDraft,
} from '#shared/renters/draft'
import { ageForTable, ageOnFirstDay } from '#shared/renters/formRules'
import type { RenterLocale } from '#shared/schemas/renters'
import { useProblemWords } from './problemWords'

/** A form while it is typed: what was typed, what it amounts to, and what was found wrong so far. */
export interface FormState {
  draft: FormDraft
  facts: Ref<FormFacts>
  /** Others may see this screen next: nothing is offered from what the browser remembers. */
  shared: boolean
  /** What of it was shown as wrong; it goes away as soon as it is put right. */
  shown: ComputedRef<FieldProblem[]>
  show: (problems: FieldProblem[]) => void
  errorOf: (field: FormField) => string | undefined
  summary: ComputedRef<{ name: string; text: string }[]>
  /** Mass, height and age as far as they can be read. */
  body: ComputedRef<{
    mass: ReturnType<typeof typedMassOf>
    height: ReturnType<typeof typedHeightOf>
    age: number | null
    minor: boolean
  }>
  read: () => ReturnType<typeof readDraft>
}

const key: InjectionKey<FormState> = Symbol('form')

export function useFormState(): FormState {
  const state = inject(key)
  if (!state) throw new Error('a field of the form stands outside of it')
  return state
}

/** Makes the state of a form and gives it to the fields below. */
export function provideFormState({
  facts,
  kept = {},
  first = {},
  shared = false,
}: {
  facts: Ref<FormFacts>
  kept?: Readonly<Record<string, string>>
  first?: Partial<FormDraft>
  shared?: boolean
}): FormState {
  const { locale } = useI18n()
  const words = useProblemWords()
  const { today } = facts.value
  const draft = reactive(draftFrom(kept, { startsOn: today, endsOn: today, ...first }))
  const asked = ref<FieldProblem[]>([])

  const read = () => readDraft({ ...draft }, locale.value as RenterLocale, facts.value)

  /** A problem that was shown stands until the field is right; one that only the server sees, until it is changed. */
  const shown = computed(() => {
    const now = read()
    const open = now.ok ? [] : now.problems
    return asked.value.flatMap((was) => {
      const still = open.find(({ field }) => field === was.field)
      if (still) return [still]
      return serverSees.has(was.reason) ? [was] : []
    })
  })

  const body = computed(() => {
    const born = typedBornOf(draft)
    const known = 'value' in born ? born.value : { birthDate: null, age: null }
    const days = { startsOn: draft.startsOn || facts.value.today, endsOn: draft.endsOn || facts.value.today }
    const firstDay = ageOnFirstDay(known, days.startsOn)
    return {
      mass: typedMassOf(draft),
      height: typedHeightOf(draft),
      age: days.endsOn < days.startsOn ? firstDay : ageForTable(known, days),
      minor: firstDay !== null && firstDay < facts.value.ageOfMajority,
    }
  })

  const state: FormState = {
    draft,
    facts,
    shared,
    shown,
    body,
    read,
    show: (problems) => (asked.value = problems),
    errorOf: (field) => {
      const problem = shown.value.find((each) => each.field === field)
      return problem && words(problem)
    },
    summary: computed(() => shown.value.map((problem) => ({ name: problem.field, text: words(problem) }))),
  }
  provide(key, state)
  return state
}

/** Reasons that only the server gives. */
const serverSees = new Set(['refused'])
