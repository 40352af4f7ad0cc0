import { useI18n } from 'vue-i18n'

export interface Band {
  min: number | null
  max: number | null
}

/** A band of the selection table in words: from–to, open at an end, or none. */
export function useBandWords() {
  const { t, n } = useI18n()

  function band(of: Band | null, word: (value: number) => string = (value) => n(value)): string {
    if (!of) return ''
    if (of.min === null) return of.max === null ? '' : t('office.table.upTo', { n: word(of.max) })
    return of.max === null ? t('office.table.from', { n: word(of.min) }) : `${word(of.min)}–${word(of.max)}`
  }
  /** Whole inches as feet and inches: 62 is 5'2". */
  const feet = (inches: number) => `${Math.floor(inches / 12)}'${inches % 12}"`

  return { band, feet }
}
