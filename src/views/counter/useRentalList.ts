import { onMounted, ref, shallowRef, watch, type Ref } from 'vue'
import type { RentalRow } from '#shared/api/rentals'
import { fetchRentals } from '../../api/rentals'
import { useBoardStore } from '../../stores/board'

const typingPauseMs = 250

/**
 * Who is here, or whom one looks for. Names are read on their own whenever the board hears of a rental or fitting;
 * a search waits for a pause in typing, and an answer that was overtaken is dropped.
 */
export function useRentalList(search: Ref<string>, site: Ref<string>) {
  const board = useBoardStore()
  const rows = shallowRef<RentalRow[] | null>(null)
  const more = ref(false)
  const error = shallowRef<unknown>(null)
  let asked = 0
  let timer: ReturnType<typeof setTimeout> | undefined

  async function load() {
    clearTimeout(timer)
    const mine = (asked += 1)
    const query = search.value ? { show: 'all', search: search.value } : { show: 'here', site: site.value }
    try {
      const answer = await fetchRentals(query)
      if (mine !== asked) return
      rows.value = answer.rows
      more.value = answer.more
      error.value = null
    } catch (problem) {
      if (mine === asked) error.value = problem
    }
  }
  const soon = () => {
    clearTimeout(timer)
    timer = setTimeout(() => void load(), typingPauseMs)
  }

  watch(search, soon)
  watch(site, () => void load())
  watch(() => [board.board?.rentals, board.board?.fittings], soon)
  onMounted(load)
  return { rows, more, error, load }
}
