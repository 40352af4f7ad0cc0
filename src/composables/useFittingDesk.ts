import { computed, onBeforeUnmount, reactive, ref, shallowRef, watch, type Ref } from 'vue'
import { claimFitting, giveBackFitting } from '#shared/api/fittings'
import { computeFitting } from '#shared/fitting/computeFitting'
import type { Side } from '#shared/schemas/common'
import {
  fetchBootSuggestions,
  fetchFittingFacts,
  fetchPairSuggestions,
  type BootSuggestions,
  type ChosenBoots,
  type FittingDeskFacts,
  type FoundLabel,
  type PairSuggestions,
} from '../api/fittings'
import { sendCommand } from '../api/commands'
import { useBoardStore } from '../stores/board'

type FoundItem = Extract<FoundLabel, { found: true }>

/** Several events of one command, and of two clerks at once, are answered by one fetch. */
const settleMs = 150

/**
 * One renter's fitting at the counter: what is chosen, what the shared calculation makes of it at once, and what
 * other clerks do to the same things meanwhile.
 */
export function useFittingDesk(rentalId: Ref<string>) {
  const board = useBoardStore()
  const facts = shallowRef<FittingDeskFacts | null>(null)
  const failed = shallowRef<unknown>(null)
  const refused = shallowRef<unknown>(null)
  const sending = ref(false)
  const pairs = shallowRef<PairSuggestions | null>(null)
  const bootList = shallowRef<BootSuggestions | null>(null)
  const chosen = reactive<{ skiPairId: string | null; boots: ChosenBoots }>({ skiPairId: null, boots: null })
  /** Sides of each chosen item whose label was scanned. */
  const seen = reactive(new Map<string, Set<Side>>())

  const fitting = computed(() => (facts.value ? computeFitting(facts.value) : null))
  const bootsId = computed(() => (typeof chosen.boots === 'object' ? (chosen.boots?.id ?? null) : null))
  const open = computed(() => facts.value?.openFitting ?? null)
  /** What is chosen and its value are what the open fitting already has. */
  const unchanged = computed(() => {
    if (!open.value || !fitting.value) return false
    const sameThings =
      open.value.skiPairId === chosen.skiPairId &&
      open.value.bootsId === bootsId.value &&
      chosen.boots !== null
    return sameThings && fitting.value.outcome?.value === open.value.value
  })

  let latest = 0
  /** Fetches the facts of what is chosen; an answer that was overtaken by a newer question is dropped. */
  async function load() {
    const asked = (latest += 1)
    try {
      const answer = await fetchFittingFacts(rentalId.value, { ...chosen })
      if (asked !== latest) return
      facts.value = answer
      failed.value = null
    } catch (error) {
      if (asked === latest) failed.value = error
    }
  }

  /** What the rental already has is chosen at the start. */
  async function begin() {
    facts.value = null
    pairs.value = null
    bootList.value = null
    refused.value = null
    seen.clear()
    Object.assign(chosen, { skiPairId: null, boots: null })
    await load()
    const { openFitting, rental } = (facts.value as FittingDeskFacts | null) ?? {}
    if (openFitting) {
      const { skiPairId, bootsId: held } = openFitting
      Object.assign(chosen, { skiPairId, boots: held ? { id: held } : 'own' })
    } else if (rental?.ownBoots) {
      chosen.boots = 'own'
    }
    if (chosen.boots) await load()
    await Promise.all([loadPairs(), loadBoots()])
  }

  async function loadPairs() {
    if (!facts.value?.boots) {
      pairs.value = null
      return
    }
    const asked = chosen.boots
    const answer = await fetchPairSuggestions(rentalId.value, bootsId.value).catch(() => null)
    if (asked === chosen.boots) pairs.value = answer
  }

  /** Free boots near the size by the form, or near the one given: mondopoint times ten. */
  async function loadBoots(mondo?: number) {
    bootList.value = await fetchBootSuggestions(rentalId.value, mondo).catch(() => null)
  }

  async function chooseBoots(boots: ChosenBoots) {
    if (chosen.boots && typeof chosen.boots === 'object') seen.delete(chosen.boots.id)
    chosen.boots = boots
    await load()
    await loadPairs()
  }

  async function choosePair(skiPairId: string | null) {
    if (chosen.skiPairId) seen.delete(chosen.skiPairId)
    chosen.skiPairId = skiPairId
    await load()
  }

  /** The other half of a pair whose first half was scanned; null when nothing is half scanned. */
  function mixedWith(found: FoundItem): string | null {
    const item = found.itemKind === 'ski_pair' ? facts.value?.skiPair : facts.value?.boots
    if (!item || item.id === found.itemId || !('code' in item)) return null
    return seen.get(item.id)?.size === 1 ? item.code : null
  }

  /** Takes what a label named; answers the sides of it that were scanned by now. */
  async function takeItem(found: FoundItem): Promise<Set<Side>> {
    const current = found.itemKind === 'ski_pair' ? chosen.skiPairId : bootsId.value
    if (found.itemKind === 'ski_pair' && current !== found.itemId) await choosePair(found.itemId)
    if (found.itemKind === 'boots' && current !== found.itemId) await chooseBoots({ id: found.itemId })
    const sides = seen.get(found.itemId) ?? new Set<Side>()
    for (const side of found.side ? [found.side] : (['left', 'right'] as const)) sides.add(side)
    seen.set(found.itemId, sides)
    return sides
  }

  async function sendToBench(): Promise<boolean> {
    if (sending.value || !chosen.skiPairId || !chosen.boots) return false
    sending.value = true
    refused.value = null
    try {
      await sendCommand(claimFitting, {
        rentalId: rentalId.value,
        skiPairId: chosen.skiPairId,
        bootsId: bootsId.value,
        ...(open.value ? { replacesFittingId: open.value.id } : {}),
      })
      return true
    } catch (error) {
      refused.value = error
      return false
    } finally {
      await load()
      sending.value = false
    }
  }

  async function giveBack(): Promise<boolean> {
    if (!open.value) return false
    try {
      await sendCommand(giveBackFitting, { fittingId: open.value.id, reason: 'given_back' })
      await begin()
      return true
    } catch (error) {
      refused.value = error
      await load()
      return false
    }
  }

  /** Rows that the screen shows: when one of them changes for anybody, the facts are asked anew. */
  const watched = computed(() => {
    const now = board.board
    if (!now) return []
    const ids = [chosen.skiPairId, bootsId.value].flatMap((id) => (id ? [now.items.get(id)] : []))
    const own = [...now.fittings.values()].filter((each) => each.rentalId === rentalId.value)
    return [now.rentals.get(rentalId.value), ...ids, ...own]
  })
  let settle: ReturnType<typeof setTimeout> | undefined
  watch(watched, (now, before) => {
    const same = now.length === before.length && now.every((row, index) => row === before[index])
    if (same || before.length === 0) return
    clearTimeout(settle)
    settle = setTimeout(() => void load(), settleMs)
  })
  onBeforeUnmount(() => clearTimeout(settle))

  /** Listed pairs and boots that are still free, as the board knows it. */
  const stillFree = (id: string) => (board.board?.items.get(id)?.state ?? 'racked') === 'racked'
  const freePairs = computed(() => pairs.value?.pairs.filter(({ id }) => stillFree(id)) ?? [])
  const freeBoots = computed(() => bootList.value?.boots.filter(({ id }) => stillFree(id)) ?? [])

  watch(rentalId, begin, { immediate: true })

  return {
    facts,
    fitting,
    failed,
    refused,
    sending,
    chosen,
    bootsId,
    seen,
    open,
    unchanged,
    pairs,
    freePairs,
    bootList,
    freeBoots,
    begin,
    load,
    loadPairs,
    chooseBoots,
    choosePair,
    loadBoots,
    mixedWith,
    takeItem,
    sendToBench,
    giveBack,
  }
}
export type FittingDesk = ReturnType<typeof useFittingDesk>
