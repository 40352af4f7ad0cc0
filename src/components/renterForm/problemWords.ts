import { useI18n } from 'vue-i18n'
import type { ApiProblem } from '../../api/http'
import { formFields, type FieldProblem, type FormField } from '#shared/renters/formRules'

/** Words a problem of a field: those of the field itself, else those that fit every field. */
export function useProblemWords(): (problem: FieldProblem) => string {
  const { t, te } = useI18n()
  return ({ field, reason, limits }) => {
    const own = `form.errors.${field}.${reason}`
    const params = { label: t(`form.labels.${field}`), min: limits?.min ?? '', max: limits?.max ?? '' }
    return t(te(own) ? own : `form.errors.any.${reason}`, params)
  }
}

const parts: Record<string, FormField> = {
  'guardian.name': 'guardianName',
  'guardian.relation': 'guardianRelation',
  'guardian.phone': 'guardianPhone',
}

const isField = (name: string): name is FormField => (formFields as readonly string[]).includes(name)

/** The fields that the server refused, from either kind of its refusals; empty where it is about something else. */
export function refusedFields({ code, params, issues }: ApiProblem): FieldProblem[] {
  if (code === 'renters.unfinished' && Array.isArray(params.fields)) {
    return params.fields.flatMap((each) => {
      const [field = '', reason = ''] = String(each).split(':')
      return isField(field) ? [{ field, reason }] : []
    })
  }
  return issues.flatMap(({ path }) => {
    const names = path.map(String).filter((name) => name !== 'body' && name !== 'form')
    const field = parts[names.slice(0, 2).join('.')] ?? names[0] ?? ''
    return isField(field) ? [{ field, reason: 'refused' }] : []
  })
}
