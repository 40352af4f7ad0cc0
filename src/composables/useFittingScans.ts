import { computed, ref } from 'vue'
import { useI18n } from 'vue-i18n'
import { sidedCode } from '#shared/labels/labels'
import { fetchLabel, type FoundLabel } from '../api/fittings'
import type { FittingDesk } from './useFittingDesk'
import { useScanner, type ScannedLabel, type ScanResult } from './useScanner'

type FoundItem = Extract<FoundLabel, { found: true }>

const notFound = {
  check_character: 'fitting.scan.checkCharacter',
  unfinished: 'fitting.scan.unfinished',
  not_ours: 'fitting.scan.notOurs',
  unknown: 'fitting.scan.unknown',
  replaced: 'fitting.scan.replaced',
} as const

/** Scans and typed labels at the fitting: each is looked up, taken, and answered in words and by a tone. */
export function useFittingScans(desk: FittingDesk) {
  const { t } = useI18n()
  /** A half of another pair that was scanned while one half was still wanted. */
  const instead = ref<FoundItem | null>(null)

  async function take({ text, parsed }: ScannedLabel): Promise<ScanResult> {
    instead.value = null
    // A misread label stops here, without asking the server.
    if (!parsed.ok) return { tone: 'refused', message: t(notFound[parsed.reason], { text }) }
    const found = await fetchLabel(text).catch(() => null)
    if (!found) return { tone: 'refused', message: t('fitting.scan.unreachable', { text }) }
    if (!found.found)
      return { tone: 'refused', message: t(notFound[found.why], { text, code: found.code ?? '' }) }
    return takeFound(found)
  }

  async function takeFound(found: FoundItem): Promise<ScanResult> {
    const label = sidedCode(found.code, found.side)
    const half = desk.mixedWith(found)
    if (half) {
      instead.value = found
      const other = sidedCode(half, found.side)
      const named = { label, code: half, other, instead: found.code }
      return { tone: 'refused', message: t('fitting.scan.mixed', named) }
    }
    const sides = await desk.takeItem(found)
    if (!found.side) return { tone: 'taken', message: t('fitting.scan.whole', { code: found.code }) }
    const key = sides.size === 2 ? 'both' : 'taken'
    return { tone: 'taken', message: t(`fitting.scan.${key}`, { label, code: found.code }) }
  }

  async function takeInstead() {
    const found = instead.value
    instead.value = null
    if (!found) return
    await desk.takeItem(found)
  }

  /** The half that is still wanted, or what to scan at all. */
  const next = computed(() => {
    const { skiPair, boots } = desk.facts.value ?? {}
    for (const [item, key] of [
      [boots?.kind === 'shop' ? boots : null, 'nextBoot'],
      [skiPair, 'nextSki'],
    ] as const) {
      const sides = item ? desk.seen.get(item.id) : undefined
      if (!item || sides?.size !== 1) continue
      const missing = sides.has('left') ? 'right' : 'left'
      return t(`fitting.scan.${key}`, { code: sidedCode(item.code, missing) })
    }
    return t('fitting.scan.next')
  })

  const scanner = useScanner(take, { alreadyMessage: (label) => t('fitting.scan.already', { label }) })
  return { ...scanner, next, instead, takeInstead }
}
