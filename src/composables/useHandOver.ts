import { computed, ref, shallowRef, watch, type Ref } from 'vue'
import { useI18n } from 'vue-i18n'
import { recordHandOver } from '#shared/api/handOvers'
import { sidedCode } from '#shared/labels/labels'
import { fetchFittingWhy, fetchHandOver, type FittingWhy, type HandOverToSign } from '../api/bench'
import { sendCommand } from '../api/commands'
import { useBoardStore } from '../stores/board'
import type { ScannedLabel, ScanResult } from './useScanner'

/** One thing of the set that is scanned before it leaves. */
export interface SetLabel {
  code: string
  kind: 'ski' | 'boot'
  side: 'left' | 'right'
  /** As it was scanned or typed; null while it was not. */
  scanned: string | null
}

const sides = ['left', 'right'] as const

/** One set at the hand-over: its labels ticked one by one, then what the renter reads and signs. */
export function useHandOver(fittingId: Ref<string | null>) {
  const { t, locale } = useI18n()
  const board = useBoardStore()
  const toSign = shallowRef<HandOverToSign | null>(null)
  const why = shallowRef<FittingWhy | null>(null)
  const failed = shallowRef<unknown>(null)
  const problem = shallowRef<unknown>(null)
  const busy = ref(false)
  const scans = ref<Record<string, string>>({})
  const soleLengthMm = ref<number | null>(null)

  const fitting = computed(() => toSign.value?.fitting ?? null)
  const ownBoots = computed(() => fitting.value?.boots.kind === 'own')
  const labels = computed<SetLabel[]>(() => {
    const { skiPair, boots } = fitting.value ?? {}
    if (!skiPair || !boots) return []
    const things = [
      { code: skiPair.code, kind: 'ski' as const },
      ...(boots.kind === 'shop' ? [{ code: boots.code, kind: 'boot' as const }] : []),
    ]
    return things.flatMap(({ code, kind }) =>
      sides.map((side) => {
        const sided = sidedCode(code, side)
        return { code: sided, kind, side, scanned: scans.value[sided] ?? null }
      }),
    )
  })
  const nextLabel = computed(() => labels.value.find(({ scanned }) => scanned === null) ?? null)
  const soleRead = computed(
    () => soleLengthMm.value !== null && soleLengthMm.value >= 150 && soleLengthMm.value <= 400,
  )
  const complete = computed(
    () => labels.value.length > 0 && nextLabel.value === null && (!ownBoots.value || soleRead.value),
  )

  async function load() {
    const id = fittingId.value
    if (!id) return
    try {
      const [answer, reasons] = await Promise.all([fetchHandOver(id, locale.value), fetchFittingWhy(id)])
      if (fittingId.value !== id) return
      toSign.value = answer
      why.value = reasons
      failed.value = null
    } catch (error) {
      if (fittingId.value === id) failed.value = error
    }
  }
  watch(
    fittingId,
    () => {
      toSign.value = null
      why.value = null
      problem.value = null
      scans.value = {}
      soleLengthMm.value = null
      void load()
    },
    { immediate: true },
  )
  watch(locale, () => void load())
  watch(
    () => board.board?.seq,
    () => {
      if (!busy.value) void load()
    },
  )

  /** Ticks a label of this set; anything else is named with what was expected. */
  function take({ parsed }: ScannedLabel): ScanResult {
    if (!parsed.ok || !parsed.side) return { tone: 'refused', message: t('handOver.scan.unreadable') }
    const code = sidedCode(parsed.code, parsed.side)
    const label = labels.value.find((each) => each.code === code)
    if (!label) {
      const expected = nextLabel.value?.code ?? fitting.value?.skiPair.code ?? ''
      return { tone: 'refused', message: t('handOver.scan.wrong', { scanned: code, expected }) }
    }
    if (label.scanned) return { tone: 'already', message: t('handOver.scan.already', { code }) }
    scans.value = { ...scans.value, [code]: parsed.text }
    return { tone: 'taken', message: t('handOver.scan.taken', { code }) }
  }

  /** Hands the set over with what the renter signed. */
  async function sign(signed: {
    picture: string
    name: string
    as: 'renter' | 'guardian'
  }): Promise<boolean> {
    const text = toSign.value?.text
    if (!text || busy.value) return false
    busy.value = true
    problem.value = null
    try {
      await sendCommand(recordHandOver, {
        fittingId: fittingId.value!,
        labels: labels.value.map((label) => label.scanned ?? label.code),
        ...(ownBoots.value && soleLengthMm.value !== null ? { soleLengthReadMm: soleLengthMm.value } : {}),
        signaturePng: signed.picture,
        signedName: signed.name,
        signedAs: signed.as,
        textId: text.id,
      })
      return true
    } catch (error) {
      problem.value = error
      return false
    } finally {
      await load()
      busy.value = false
    }
  }

  return {
    toSign,
    why,
    fitting,
    failed,
    problem,
    busy,
    labels,
    nextLabel,
    ownBoots,
    soleLengthMm,
    complete,
    load,
    take,
    sign,
  }
}
export type HandOverDesk = ReturnType<typeof useHandOver>
