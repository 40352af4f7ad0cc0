import { ref, shallowRef } from 'vue'
import type { FieldProblem } from '#shared/renters/formRules'
import type { RenterForm } from '#shared/schemas/renters'
import { NotSent } from '../../api/commands'
import { sendForm } from '../../api/forms'
import { ApiProblem } from '../../api/http'
import { refusedFields } from '../../components/renterForm/problemWords'

/**
 * Sends the form once. Where no answer came, the same form is sent again as the very same command; what the server
 * refuses field by field is handed to the form.
 */
export function useSending(
  link: string,
  on: { sent: () => void; refused: (problems: FieldProblem[]) => void },
) {
  const busy = ref(false)
  const error = shallowRef<unknown>(null)
  let waiting: { text: string; again: NotSent['again'] } | null = null

  async function send(form: RenterForm) {
    if (busy.value) return
    busy.value = true
    error.value = null
    const text = JSON.stringify(form)
    try {
      await (waiting?.text === text ? waiting.again() : sendForm(link, form))
      waiting = null
      on.sent()
    } catch (problem) {
      if (problem instanceof NotSent) waiting = { text, again: problem.again }
      handle(problem)
    } finally {
      busy.value = false
    }
  }

  function handle(problem: unknown) {
    if (problem instanceof ApiProblem) {
      // It was taken before, by this page or another: what became of it is what matters now.
      if (problem.code === 'forms.sent') return on.sent()
      const fields = refusedFields(problem)
      if (fields.length > 0) return on.refused(fields)
    }
    error.value = problem
  }

  return { busy, error, send }
}
