import { createI18n } from 'vue-i18n'
import { bestLocale, fallbackLocale, isLocale, type Locale } from './locales'
import { pluralForm } from './plurals'

/**
 * Texts lie in `locales/<locale>/<area>.json`; the file's name is the first part of every key in it: the text
 * `cancel` of `common.json` is `t('common.cancel')`. A route names the areas that it shows (`meta.texts`) and only
 * those are fetched, so that the renter's phone never carries the staff's words.
 */
type Texts = Record<string, unknown>
const files = import.meta.glob<{ default: Texts }>('./locales/*/*.json')
const rememberedAs = 'notchwise.locale'

const loaded = new Map<string, Promise<void>>()
const areasInUse = new Set<string>(['common'])

function remembered(): string | null {
  try {
    return localStorage.getItem(rememberedAs)
  } catch {
    return null
  }
}

const formats = {
  time: { hour: '2-digit', minute: '2-digit', hourCycle: 'h23' },
  day: { day: 'numeric', month: 'short' },
  date: { day: 'numeric', month: 'short', year: 'numeric' },
  moment: { day: 'numeric', month: 'short', hour: '2-digit', minute: '2-digit', hourCycle: 'h23' },
} as const

export const i18n = createI18n({
  legacy: false,
  locale: bestLocale([remembered(), ...navigator.languages]) as string,
  // Dates of the English screens are British, '1 Dec 2026': 'en' alone would write them the American way.
  fallbackLocale: { en: ['en-GB'], default: [fallbackLocale] },
  pluralRules: { en: pluralForm, de: pluralForm },
  datetimeFormats: { 'en-GB': formats, de: formats } as Record<string, typeof formats>,
  // Names of date formats have no dot; that 'en' finds them at 'en-GB' is meant.
  missingWarn: /\./,
  fallbackWarn: /\./,
})

function loadArea(locale: Locale, area: string): Promise<void> {
  const path = `./locales/${locale}/${area}.json`
  const known = loaded.get(path)
  if (known) return known
  const file = files[path]
  if (!file) throw new Error(`no texts at ${path}`)
  const loading = file().then((texts) => i18n.global.mergeLocaleMessage(locale, { [area]: texts.default }))
  loaded.set(path, loading)
  loading.catch(() => loaded.delete(path))
  return loading
}

/** Fetches the texts of these areas in the current language; a router guard calls it before a view is shown. */
export async function loadTexts(areas: readonly string[]): Promise<void> {
  areas.forEach((area) => areasInUse.add(area))
  const locale = bestLocale([i18n.global.locale.value])
  await Promise.all(['common', ...areas].map((area) => loadArea(locale, area)))
}

/** Changes the language of the screen and remembers it on this device; texts in use are fetched first. */
export async function useLocale(tag: string): Promise<void> {
  if (!isLocale(tag)) return
  await Promise.all([...areasInUse].map((area) => loadArea(tag, area)))
  i18n.global.locale.value = tag
  document.documentElement.lang = tag
  try {
    localStorage.setItem(rememberedAs, tag)
  } catch {
    // A browser that keeps nothing still shows the language until it is closed.
  }
}
