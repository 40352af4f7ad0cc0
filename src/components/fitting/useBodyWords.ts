import { useI18n } from 'vue-i18n'
import type { Band } from '#shared/release/selectionTable'
import type { Height, Mass } from '#shared/units/bodySchemas'
import { heightShownIn, massShownIn } from '#shared/units/convert'

/** Body values in words, in the unit in which they were given and beside it in the other system. */
export function useBodyWords() {
  const { t, n } = useI18n()
  const plain = (value: number) => n(value, { maximumFractionDigits: 2 })

  function massWords(mass: Mass): string {
    if (mass.unit === 'st-lb') return `${mass.stone} st ${plain(mass.pounds)} lb`
    return `${plain(mass.value)} ${mass.unit}`
  }

  function heightWords(height: Height): string {
    if (height.unit === 'ft-in') return `${height.feet} ft ${plain(height.inches)} in`
    return `${plain(height.value)} cm`
  }

  const massBeside = (mass: Mass) => massWords(massShownIn(mass, mass.unit === 'kg' ? 'lb' : 'kg'))
  const heightBeside = (height: Height) =>
    heightWords(heightShownIn(height, height.unit === 'cm' ? 'ft-in' : 'cm'))

  const inchWords = (inches: number) => `${Math.floor(inches / 12)} ft ${plain(inches % 12)} in`

  /** The values that a row or a column is for. */
  function bandWords({ min, max }: Band, unit: 'kg' | 'lb' | 'cm' | 'in' | 'mm'): string {
    const feet = unit === 'in'
    const [from, to] = [min ?? null, max ?? null].map((end) =>
      end === null ? null : feet ? inchWords(end) : plain(end),
    )
    const named = { from: from ?? '', to: to ?? '', unit: feet ? '' : unit }
    const key = from === null ? 'bandTo' : to === null ? 'bandFrom' : 'bandFromTo'
    return t(`fitting.why.${key}`, named).trim()
  }

  return { massWords, heightWords, massBeside, heightBeside, bandWords, plain }
}
