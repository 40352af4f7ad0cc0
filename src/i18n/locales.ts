/** The languages of the program, each by its own name. */
export const locales = { en: 'English', de: 'Deutsch' } as const
export type Locale = keyof typeof locales

export const fallbackLocale: Locale = 'en'

export function isLocale(text: string | null | undefined): text is Locale {
  return typeof text === 'string' && text in locales
}

/** The first of these tags ('de-AT', 'en') that the program speaks, or the fallback. */
export function bestLocale(tags: readonly (string | null | undefined)[]): Locale {
  for (const tag of tags) {
    const language = tag?.toLowerCase().split('-')[0]
    if (isLocale(language)) return language
  }
  return fallbackLocale
}
