import type { FormField } from '#shared/renters/formRules'

/** The steps of the form and the fields that each of them asks for. */
export const formSteps = ['name', 'you', 'boots', 'period', 'check'] as const
export type FormStep = (typeof formSteps)[number]

export const fieldsOf: Record<FormStep, readonly FormField[]> = {
  name: [
    'firstName',
    'lastName',
    'birthDate',
    'age',
    'guardianName',
    'guardianRelation',
    'guardianPhone',
    'phone',
    'email',
  ],
  you: ['mass', 'height', 'skierType'],
  boots: ['ownBoots', 'shoe', 'wishes'],
  period: ['startsOn', 'endsOn'],
  check: [],
}

export const isStep = (text: unknown): text is FormStep => formSteps.includes(text as FormStep)

/** The step that asks for a field. */
export const stepOf = (field: FormField): FormStep =>
  formSteps.find((step) => fieldsOf[step].includes(field)) ?? 'name'
