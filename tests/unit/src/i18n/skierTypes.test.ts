import { expect, it } from 'vitest'
import { skierTypes } from '#shared/release/rules'
import { skierTypeSentences } from '#shared/renters/skierTypeSentences'
import { skierTypeKey } from '../../../../src/components/renterForm/skierTypeKey'
import de from '../../../../src/i18n/locales/de/form.json'
import en from '../../../../src/i18n/locales/en/form.json'

it.each([
  ['en', en],
  ['de', de],
] as const)('renters read in %s the very sentences that a manager signs', (locale, texts) => {
  const words = texts.types as Record<string, string>
  for (const type of skierTypes) expect(words[skierTypeKey[type]]).toBe(skierTypeSentences[locale][type])
})
