import { computed, ref, watch } from 'vue'
import type { Side } from '#shared/schemas/common'
import type { TicketDesk } from '../../composables/useTicket'
import {
  checkSteps,
  isRead,
  judgeSoFar,
  nextStep,
  seenOf,
  stepOf,
  withRead,
  type CheckStep,
  type ReadStep,
  type TicketStep,
} from './readDraft'

const sides = ['left', 'right'] as const

/** Which ski is in hand, what is asked of it now, and what follows from each answer. */
export function useBenchWork(desk: TicketDesk) {
  const { fitting, target, drafts, settled } = desk
  const chosen = ref<Side | null>(null)
  /** A step that was asked for out of its turn. */
  const asked = ref<ReadStep | CheckStep | null>(null)
  const typed = ref('')
  const readingElsewhere = ref(false)
  /** A ski that was read and is read once more. */
  const reopened = ref<Side | null>(null)
  /** A scan opens this ticket; the scanned ski is the one in hand once it is here. */
  let awaited: { fittingId: string; side: Side } | null = null

  watch(
    () => fitting.value?.id,
    (id) => {
      chosen.value = awaited && awaited.fittingId === id ? awaited.side : null
      if (id) awaited = null
      reopened.value = null
      stepBack()
    },
  )
  function stepBack() {
    asked.value = null
    typed.value = ''
    readingElsewhere.value = false
  }

  watch(readingElsewhere, () => (typed.value = ''))

  const isSettled = (which: Side) => reopened.value !== which && settled(which) !== null
  const side = computed<Side | null>(() => {
    if (chosen.value && !isSettled(chosen.value)) return chosen.value
    return sides.find((each) => !isSettled(each)) ?? null
  })
  const draft = computed(() => (side.value ? drafts.value[side.value] : null))
  const judged = computed(() =>
    target.value && side.value && draft.value ? judgeSoFar(target.value, side.value, draft.value) : null,
  )
  const step = computed<TicketStep>(() => {
    if (!target.value || !draft.value) return 'done'
    return asked.value ?? nextStep(target.value.model, draft.value)
  })
  const complete = computed(() =>
    Boolean(target.value && draft.value && seenOf(target.value.model, draft.value)),
  )
  /** What was read and cannot stand as it is; put off until the end where a head technician is asked. */
  const mismatch = computed(() => {
    const found = judged.value?.mismatch ?? null
    if (!found || !draft.value || asked.value) return null
    return draft.value.deferred && found.decides === 'head_technician' && !complete.value ? null : found
  })
  const windowDecides = computed(() => {
    const verdict = judged.value?.verdict
    return verdict?.verdict === 'window_decides' ? verdict.part : null
  })

  /** Takes a ski in hand; one that was read already is read once more. */
  function choose(which: Side) {
    if (isSettled(which)) {
      desk.forget(which)
      reopened.value = which
    }
    chosen.value = which
    stepBack()
  }
  /** Takes a ski in hand as soon as its ticket is open; one that was read stays read. */
  function chooseOnOpening(fittingId: string, side: Side) {
    awaited = { fittingId, side }
  }
  function ask(which: ReadStep | CheckStep) {
    const model = target.value?.model
    // The checks come after the marks and values: only then does the boot sit as it will.
    if (!model || !draft.value) return
    const early = (checkSteps as readonly string[]).includes(which) && !isAllRead()
    if (early) return
    stepBack()
    if (isCheck(which)) reopen(which)
    asked.value = which
  }
  const isCheck = (which: ReadStep | CheckStep): which is CheckStep =>
    (checkSteps as readonly string[]).includes(which)
  function isAllRead() {
    return (
      draft.value !== null &&
      target.value !== null &&
      isCheckOrDone(nextStep(target.value.model, draft.value))
    )
  }
  const isCheckOrDone = (at: TicketStep) => at === 'done' || (checkSteps as readonly string[]).includes(at)

  function write(change: Partial<typeof drafts.value.left>) {
    if (!side.value) return
    drafts.value = { ...drafts.value, [side.value]: { ...drafts.value[side.value], ...change } }
  }
  function reopen(check: CheckStep) {
    write(check === 'forwardPressure' ? { forwardPressure: null } : { [check]: false })
  }

  /** Takes what was read. Moving a unit after the checks means checking again. */
  function takeRead(which: ReadStep, read: number) {
    if (!draft.value) return
    const before = isRead(draft.value, which)
    const checks = before
      ? { soleClearance: false, forwardPressure: null, brake: false, function: false }
      : {}
    const deferred = !before && draft.value.deferred
    write({ ...withRead(draft.value, which, read), ...checks, deferred })
    stepBack()
  }

  /** Confirms a check; the last one sends the ski. */
  async function confirm(check: CheckStep) {
    write(check === 'forwardPressure' ? { forwardPressure: 'in' } : { [check]: true })
    stepBack()
    if (complete.value && !judged.value?.mismatch) await take()
  }

  /** Forward pressure stands outside: the heel (or the screw) is moved and everything that hangs on it read again. */
  function moveAgain() {
    const model = target.value?.model
    if (!model) return
    const screw = model.fineScrew !== null && windowDecides.value !== 'heel'
    write({
      ...(screw ? { turns: null } : model.coupled ? { heel: null, toe: null } : { heel: null }),
      soleClearance: false,
      forwardPressure: null,
      brake: false,
      function: false,
      deferred: false,
    })
    stepBack()
  }

  /** The thing that differs is read again. */
  function readAgain() {
    const model = target.value?.model
    if (!model || !mismatch.value || !draft.value) return
    const which = stepOf(model, mismatch.value)
    if (which === 'forwardPressure') return moveAgain()
    write({ ...withRead(draft.value, which, null), deferred: false })
    stepBack()
  }
  const defer = () => write({ deferred: true })

  async function decide(reason: string) {
    if (side.value) await desk.decide(side.value, reason)
  }
  async function take() {
    if (!side.value || !(await desk.take(side.value))) return
    reopened.value = null
    chosen.value = null
  }
  async function standsElsewhere(stands: { toe: number; heel: number; turns: number | null }) {
    if (side.value && (await desk.elsewhere(side.value, stands))) stepBack()
  }
  return {
    side,
    draft,
    step,
    typed,
    mismatch,
    windowDecides,
    complete,
    readingElsewhere,
    choose,
    chooseOnOpening,
    ask,
    takeRead,
    confirm,
    moveAgain,
    readAgain,
    defer,
    decide,
    take,
    standsElsewhere,
    isSettled,
  }
}
export type BenchWork = ReturnType<typeof useBenchWork>
