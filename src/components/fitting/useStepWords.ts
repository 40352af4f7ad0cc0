import { useI18n } from 'vue-i18n'
import type { ReleaseStep } from '#shared/release/releaseResult'
import { useBodyWords } from './useBodyWords'

/** One line of the explanation: what was looked at, and the row or value that it gave. */
export interface StepLine {
  words: string
  gives: string
}

/** The steps of a release value in the reader's words. */
export function useStepWords() {
  const { t } = useI18n()
  const { massWords, heightWords, bandWords, plain } = useBodyWords()

  function shiftWords(rows: number): string {
    if (rows === 0) return t('fitting.why.stay')
    return t(rows < 0 ? 'fitting.why.up' : 'fitting.why.down', Math.abs(rows))
  }

  const ageKey = { child: 'ageChild', senior: 'ageSenior', neither: 'ageNeither' } as const

  function wordsOf(step: ReleaseStep): string {
    switch (step.rule) {
      case 'mass': {
        const named = { given: massWords(step.given), band: bandWords(step.band, step.unit) }
        return t(step.row === null ? 'fitting.why.massNone' : 'fitting.why.mass', named)
      }
      case 'height':
        return t('fitting.why.height', {
          given: heightWords(step.given),
          band: bandWords(step.band, step.unit),
        })
      case 'nearer_top':
        return t('fitting.why.nearerTop')
      case 'type':
        return t('fitting.why.type', { type: step.skierType, shift: shiftWords(step.shift) })
      case 'age':
        return t(`fitting.why.${ageKey[step.because]}`, { shift: shiftWords(step.shift) })
      case 'request':
        return step.request === 0
          ? t('fitting.why.requestNone')
          : t('fitting.why.request', { shift: shiftWords(step.shift) })
      case 'clamp':
        return step.clampedAt === null
          ? t('fitting.why.moved', { shift: shiftWords(step.shift) })
          : t(step.clampedAt === 'A' ? 'fitting.why.clampA' : 'fitting.why.clampP')
      case 'column':
        return t('fitting.why.column', { length: plain(step.given), band: bandWords(step.band, 'mm') })
      case 'cell':
        return t(step.value === null ? 'fitting.why.cellEmpty' : 'fitting.why.cell', { row: step.row })
      case 'sideways': {
        const right = step.column > step.fromColumn
        return t(right ? 'fitting.why.sidewaysRight' : 'fitting.why.sidewaysLeft', {
          band: bandWords(step.band, 'mm'),
        })
      }
      case 'light_skier':
        return t('fitting.why.lightSkier', { limit: `${step.upTo} ${step.unit}`, type: step.skierType })
      case 'request_of_child':
        return t('fitting.why.requestOfChild', { age: step.ageUpTo, limit: `${step.upTo} ${step.unit}` })
    }
  }

  function givesOf(step: ReleaseStep): string {
    if ((step.rule === 'cell' || step.rule === 'sideways') && step.value !== null) return plain(step.value)
    const named = step.rule === 'mass' || step.rule === 'height' || step.rule === 'nearer_top'
    if (named || step.rule === 'clamp') return step.row ?? ''
    return ''
  }

  const stepLine = (step: ReleaseStep): StepLine => ({ words: wordsOf(step), gives: givesOf(step) })

  return { stepLine, shiftWords }
}
