import { ref, watch } from 'vue'
import type { getBoardNames } from '#shared/api/board'
import type { AnswerOf } from '#shared/api/define'
import { request } from '../../api/http'
import { useBoardStore } from '../../stores/board'

/** Names of the people on the board, read on their own: events carry none. Asked again when somebody new is there. */
export function useBoardNames() {
  const board = useBoardStore()
  const names = ref(new Map<string, string>())
  let asking = false

  async function ask() {
    if (asking) return
    asking = true
    try {
      const answer = await request<AnswerOf<typeof getBoardNames>>('GET', '/api/board/names')
      names.value = new Map(answer.names.map(({ rentalId, name }) => [rentalId, name]))
    } catch {
      // The board stands without names; the next change asks again.
    } finally {
      asking = false
    }
  }

  watch(
    () => board.board?.rentals,
    (rentals) => {
      if (rentals && [...rentals.keys()].some((id) => !names.value.has(id))) void ask()
    },
    { immediate: true },
  )
  return names
}
