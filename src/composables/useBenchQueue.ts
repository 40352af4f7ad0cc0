import { computed, shallowRef, watch } from 'vue'
import type { QueuedTicket } from '#shared/api/tickets'
import { fetchBenchQueue } from '../api/bench'
import { useBoardStore } from '../stores/board'

/** The tickets of this site by promised time, fetched again whenever the board hears of something. */
export function useBenchQueue() {
  const board = useBoardStore()
  const tickets = shallowRef<QueuedTicket[] | null>(null)
  const failed = shallowRef<unknown>(null)
  let asked = 0

  async function refresh() {
    const mine = (asked += 1)
    try {
      const answer = await fetchBenchQueue()
      if (mine !== asked) return
      tickets.value = answer
      failed.value = null
    } catch (error) {
      if (mine === asked) failed.value = error
    }
  }
  watch(
    () => board.board?.seq,
    () => void refresh(),
    { immediate: true },
  )

  const byPairCode = (code: string) => tickets.value?.find((ticket) => ticket.pairCode === code)
  const byBootsCode = (code: string) => tickets.value?.find((ticket) => ticket.bootsCode === code)
  return { tickets, failed: computed(() => failed.value), refresh, byPairCode, byBootsCode }
}
