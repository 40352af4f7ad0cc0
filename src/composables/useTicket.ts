import { computed, ref, shallowRef, watch, type Ref } from 'vue'
import { signRecord } from '#shared/api/records'
import {
  cannotBeSet,
  decideReading,
  leaveTicket,
  openTicket,
  readSki,
  standsElsewhere,
} from '#shared/api/tickets'
import { sameReading, type BenchTarget } from '#shared/fitting/readBack'
import type { Side } from '#shared/schemas/common'
import { partReading } from '#shared/schemas/records'
import { fetchTicket, type Ticket } from '../api/bench'
import { sendCommand } from '../api/commands'
import { ApiProblem } from '../api/http'
import { emptyDraft, seenOf, type SideDraft } from '../components/bench/readDraft'
import { useBoardStore } from '../stores/board'
import { useSessionStore } from '../stores/session'

type Drafts = Record<Side, SideDraft>

const keptAs = (fittingId: string) => `notchwise.bench.${fittingId}`

/** Half-read skis stay on this tablet: marks and values only, nothing of a person. */
function keptDrafts(fittingId: string): Drafts {
  const fresh = { left: emptyDraft(), right: emptyDraft() }
  try {
    const kept = JSON.parse(sessionStorage.getItem(keptAs(fittingId)) ?? '{}') as Partial<Drafts>
    return { left: { ...fresh.left, ...kept.left }, right: { ...fresh.right, ...kept.right } }
  } catch {
    return fresh
  }
}

/** One ticket at the bench: what is known of it, what was read so far, and everything that is done with it. */
export function useTicket(fittingId: Ref<string | null>) {
  const session = useSessionStore()
  const board = useBoardStore()
  const ticket = shallowRef<Ticket | null>(null)
  const failed = shallowRef<unknown>(null)
  /** What the last thing done was refused with; gone with the next. */
  const problem = shallowRef<unknown>(null)
  const busy = ref(false)
  const drafts = ref<Drafts>({ left: emptyDraft(), right: emptyDraft() })

  const fitting = computed(() => ticket.value?.fitting ?? null)
  const target = computed<BenchTarget | null>(() =>
    fitting.value
      ? {
          model: fitting.value.skiPair.binding.track,
          track: fitting.value.track,
          targets: fitting.value.targets,
        }
      : null,
  )
  /** Somebody else has it. */
  const heldBy = computed(() => {
    const holder = fitting.value?.heldBy
    return holder && holder.id !== session.person?.id ? holder : null
  })
  const mine = computed(() => fitting.value?.heldBy?.id === session.person?.id)
  /** A ski whose latest reading is still where it stands. */
  const settled = (side: Side) => {
    const reading = fitting.value?.readings[side]
    if (!reading) return null
    return reading.presetVersion === fitting.value?.skiPair.skis[side].presetVersion ? reading : null
  }

  async function load() {
    const id = fittingId.value
    if (!id) return
    try {
      const answer = await fetchTicket(id)
      if (fittingId.value !== id) return
      ticket.value = answer
      failed.value = null
    } catch (error) {
      if (fittingId.value === id) failed.value = error
    }
  }

  /** Runs one command after the other; what it changed is fetched before the next touch. */
  async function act(task: () => Promise<unknown>): Promise<boolean> {
    if (busy.value) return false
    busy.value = true
    problem.value = null
    try {
      await task()
      return true
    } catch (error) {
      problem.value = error
      return false
    } finally {
      await load()
      busy.value = false
    }
  }

  const open = (takeOver = false) =>
    act(() => sendCommand(openTicket, { fittingId: fittingId.value!, takeOver }))

  watch(
    fittingId,
    async (id) => {
      ticket.value = null
      problem.value = null
      failed.value = null
      if (!id) return
      drafts.value = keptDrafts(id)
      await load()
      // A free ticket is taken by looking at it; somebody else's only when asked for.
      if (fitting.value?.state === 'claimed' && !fitting.value.heldBy) await open()
    },
    { immediate: true },
  )
  watch(
    () => board.board?.seq,
    () => {
      if (!busy.value) void load()
    },
  )
  watch(
    drafts,
    (now) => {
      if (!fittingId.value) return
      try {
        sessionStorage.setItem(keptAs(fittingId.value), JSON.stringify(now))
      } catch {
        // A browser that keeps nothing loses a half-read ski with a reload, no more.
      }
    },
    { deep: true },
  )

  const forget = (side: Side) => (drafts.value = { ...drafts.value, [side]: emptyDraft() })
  const presetVersion = (side: Side) => fitting.value!.skiPair.skis[side].presetVersion

  /** Stores what was read at a ski. */
  async function take(side: Side): Promise<boolean> {
    const seen = target.value ? seenOf(target.value.model, drafts.value[side]) : null
    if (!seen) return false
    const body = { fittingId: fittingId.value!, side, reading: seen, presetVersion: presetVersion(side) }
    const done = await act(() => sendCommand(readSki, body))
    if (done) forget(side)
    else if (problem.value instanceof ApiProblem && problem.value.code === 'fittings.preset_moved')
      forget(side)
    return done
  }

  /** The decision that lets what was read at a ski stand; null while there is none. */
  function decisionFor(side: Side) {
    const seen = target.value ? seenOf(target.value.model, drafts.value[side]) : null
    return (
      (seen && ticket.value?.decided.find((each) => each.side === side && sameReading(seen, each.reading))) ??
      null
    )
  }

  function decide(side: Side, reason: string): Promise<boolean> {
    const seen = target.value ? seenOf(target.value.model, drafts.value[side]) : null
    if (!seen) return Promise.resolve(false)
    const reading = partReading.parse(seen)
    return act(() => sendCommand(decideReading, { fittingId: fittingId.value!, side, reading, reason }))
  }

  async function elsewhere(side: Side, stands: { toe: number; heel: number; turns: number | null }) {
    const { id: skiId } = fitting.value!.skiPair.skis[side]
    const body = { fittingId: fittingId.value!, skiId, ...stands, presetVersion: presetVersion(side) }
    const done = await act(() => sendCommand(standsElsewhere, body))
    if (done) forget(side)
    return done
  }

  const sign = (pin: string) => act(() => sendCommand(signRecord, { fittingId: fittingId.value! }, { pin }))
  const leave = () => act(() => sendCommand(leaveTicket, { fittingId: fittingId.value! }))
  const giveUp = (reason: string, to: 'service' | 'unchecked') =>
    act(() => sendCommand(cannotBeSet, { fittingId: fittingId.value!, reason, to }))

  return {
    ticket,
    fitting,
    target,
    failed,
    problem,
    busy,
    drafts,
    heldBy,
    mine,
    settled,
    load,
    open,
    forget,
    take,
    decisionFor,
    decide,
    elsewhere,
    sign,
    leave,
    giveUp,
  }
}
export type TicketDesk = ReturnType<typeof useTicket>
