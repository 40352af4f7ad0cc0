import { ref, shallowRef } from 'vue'
import { ApiProblem } from '../api/http'
import { NotSent } from '../api/commands'

/** One command at a time, with what came of it: a second press while it is on its way is none. */
export function useSaving() {
  const busy = ref(false)
  const problem = shallowRef<unknown>(null)

  /** What the work answered, or null when it was refused, could not be sent, or is on its way already. */
  async function save<Answer>(work: () => Promise<Answer>): Promise<Answer | null> {
    if (busy.value) return null
    busy.value = true
    problem.value = null
    try {
      return await work()
    } catch (error) {
      if (!(error instanceof ApiProblem) && !(error instanceof NotSent)) throw error
      problem.value = error
      return null
    } finally {
      busy.value = false
    }
  }
  return { busy, problem, save }
}
