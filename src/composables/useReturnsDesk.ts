import { ref, shallowRef, watch } from 'vue'
import { useI18n } from 'vue-i18n'
import type { UncheckedItem } from '#shared/api/inspections'
import { returnOwnBoots, scanReturn, type ReturnSet } from '#shared/api/returns'
import type { IdsOf } from '#shared/api/define'
import { sidedCode } from '#shared/labels/labels'
import { mixedPair, type MixedPair, type ScannedIn } from '#shared/returns/mixedPair'
import { sendCommand } from '../api/commands'
import { fetchReturnSet, fetchReturnsToday, fetchUnchecked, type ReturnsToday } from '../api/returns'
import { useProblemText } from '../components/base/feedback/useProblemText'
import { useBoardStore } from '../stores/board'
import type { ScannedLabel, ScanResult } from './useScanner'

type Side = 'left' | 'right' | 'both'

/** The last thing that was scanned in, and its renter's set. */
export interface LastReturn extends IdsOf<typeof scanReturn> {
  code: string
  side: Side
  set: ReturnSet | null
}

/** A code that does not say which ski or boot it is: the hand has to. */
export interface AskedSide {
  text: string
  code: string
}

/** What stands and happens at the returns desk. Scans are worked off one after the other, in the order they came. */
export function useReturnsDesk() {
  const { t } = useI18n()
  const problemText = useProblemText()
  const board = useBoardStore()

  const today = shallowRef<ReturnsToday | null>(null)
  const unchecked = shallowRef<UncheckedItem[] | null>(null)
  const failed = shallowRef<unknown>(null)
  const last = shallowRef<LastReturn | null>(null)
  const mixed = shallowRef<MixedPair | null>(null)
  const asked = shallowRef<AskedSide | null>(null)
  const scanProblem = shallowRef<unknown>(null)

  let before: ScannedIn | null = null
  let work: Promise<unknown> = Promise.resolve()
  const inTurn = <Result>(task: () => Promise<Result>): Promise<Result> => {
    const done = work.then(task)
    work = done.catch(() => undefined)
    return done
  }

  const refreshing = ref(false)
  let again = false
  /** Fetches the lists; what changes meanwhile is fetched once more after that. */
  async function refresh() {
    if (refreshing.value) {
      again = true
      return
    }
    refreshing.value = true
    do {
      again = false
      try {
        const [day, waiting] = await Promise.all([fetchReturnsToday(), fetchUnchecked()])
        today.value = day
        unchecked.value = waiting.rows
        failed.value = null
      } catch (error) {
        failed.value = error
      }
    } while (again)
    refreshing.value = false
  }

  /** Somebody else's scans and clearings come by the board. */
  watch(
    () => board.board?.seq,
    () => void refresh(),
  )

  async function take({ text, parsed }: ScannedLabel): Promise<ScanResult> {
    asked.value = null
    if (!parsed.ok) return refused(t(`returns.misread.${parsed.reason}`, { text }))
    const { code, side } = parsed
    if (side) return inTurn(() => record({ text: parsed.text, code, side }))
    asked.value = { text: parsed.text, code }
    mixed.value = null
    return { tone: 'already', message: t('returns.which.title', { code }) }
  }

  const refused = (message: string): ScanResult => ({ tone: 'refused', message })

  /** Which ski or boot the typed code meant. */
  async function answerSide(side: Side) {
    const question = asked.value
    asked.value = null
    if (question) await inTurn(() => record({ ...question, side }, { saidSide: true }))
  }

  async function record(
    { text, code, side }: { text: string; code: string; side: Side },
    { saidSide = false } = {},
  ): Promise<ScanResult> {
    try {
      const { ids } = await sendCommand(scanReturn, saidSide ? { text, side } : { text })
      scanProblem.value = null
      const set = ids.rentalId ? await fetchReturnSet(ids.rentalId).catch(() => null) : null
      last.value = { ...ids, code, side, set }
      mixed.value = side === 'both' ? null : judgeMixed({ ...ids, code, side, set })
      void refresh()
      return { tone: mixed.value || ids.already ? 'already' : 'taken', message: spoken(last.value) }
    } catch (error) {
      scanProblem.value = error
      return refused(problemText(error).what)
    }
  }

  function judgeMixed(scan: LastReturn & { side: 'left' | 'right' }): MixedPair | null {
    const missing = (scan.set?.parts ?? []).flatMap((part) =>
      part.itemId === scan.itemId && !part.back && part.side !== 'both' ? [part.side] : [],
    )
    const now: ScannedIn = { itemKind: scan.itemKind, code: scan.code, side: scan.side, missing }
    const found = mixedPair(before, now)
    before = now
    return found
  }

  const spoken = ({ code, side, already, state }: LastReturn) => {
    const what = sidedCode(code, side === 'both' ? null : side)
    return already ? t('returns.already', { code: what }) : `${what}: ${t(`staff.states.${state}`)}`
  }

  /** The sole length read at the renter's own boots; answers what came of it. */
  async function readOwnBoots(soleLengthMm: number): Promise<IdsOf<typeof returnOwnBoots> | null> {
    const scan = last.value
    if (!scan?.rentalId) return null
    const { ids } = await sendCommand(returnOwnBoots, { rentalId: scan.rentalId, soleLengthMm })
    const set = await fetchReturnSet(scan.rentalId).catch(() => scan.set)
    if (last.value === scan) last.value = { ...scan, set }
    void refresh()
    return ids
  }

  return {
    today,
    unchecked,
    failed,
    last,
    mixed,
    asked,
    scanProblem,
    refresh,
    take,
    answerSide,
    readOwnBoots,
  }
}
