import { useI18n } from 'vue-i18n'
import { ApiProblem } from '../../../api/http'
import { NotSent } from '../../../api/commands'
import type { ProblemParams } from '#shared/errors'

/** What happened, and what is safe and to be done next. */
export interface ProblemText {
  what: string
  next: string
}

/**
 * Words a refusal of the server, or the lack of an answer, in the reader's language. Problems that everybody may
 * meet lie in the texts `problems`, those of the staff's work in `staffProblems`.
 */
export function useProblemText(): (error: unknown) => ProblemText {
  const { t, te, locale } = useI18n()

  const codeOf = (error: unknown) =>
    error instanceof ApiProblem ? error.code : error instanceof NotSent ? 'network.not_sent' : 'server.fault'

  /** States travel as their codes and lists as arrays; both are put into words. */
  function wordsOf(name: string, value: ProblemParams[string]): string | number {
    if (Array.isArray(value)) return new Intl.ListFormat(locale.value).format(value.map(String))
    if (typeof value === 'number') return value
    const state = `staff.states.${value}`
    return name === 'state' && te(state) ? t(state) : String(value ?? '–')
  }

  const paramsOf = (error: unknown) =>
    error instanceof ApiProblem
      ? Object.fromEntries(Object.entries(error.params).map(([name, value]) => [name, wordsOf(name, value)]))
      : {}

  return (error) => {
    const code = codeOf(error)
    const area = ['problems', 'staffProblems'].find((each) => te(`${each}.${code}.what`))
    const key = area ? `${area}.${code}` : 'problems.server.fault'
    const params = paramsOf(error)
    return { what: t(`${key}.what`, params), next: t(`${key}.next`, params) }
  }
}
